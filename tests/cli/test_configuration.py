"""The commands about the configuration: init, show, schema."""

import json
from pathlib import Path

import pytest
import yaml
from jsonschema import Draft202012Validator

from tests.cli.command import EXAMPLE, trunnion
from trunnion.files.station import load_station


def test_init_writes_an_example_that_loads(tmp_path: Path) -> None:
    folder = tmp_path / "stations" / "north"
    told = trunnion("init", folder)
    assert told.exit_code == 0
    assert str(folder / "station.yaml") in told.stdout
    station = load_station(folder / "station.yaml")
    assert station.files.plan.is_file()
    assert all(path.is_file() for path in station.files.elements)
    assert station.safety.horizon_mask is not None
    assert station.safety.horizon_mask.is_file()


def test_init_overwrites_nothing(tmp_path: Path) -> None:
    mine = tmp_path / "plan.yaml"
    mine.write_text("mine")
    told = trunnion("init", tmp_path)
    assert told.exit_code == 1
    assert told.stderr == f"{tmp_path}: already there, nothing written: plan.yaml\n"
    assert [path.name for path in tmp_path.iterdir()] == ["plan.yaml"]
    assert mine.read_text() == "mine"


def test_init_tells_where_it_may_not_write(tmp_path: Path) -> None:
    (tmp_path / "file").write_text("")
    told = trunnion("init", tmp_path / "file" / "below")
    assert told.exit_code == 1
    assert told.stderr.startswith(f"{tmp_path / 'file'}")


def test_show_prints_a_station_file_that_means_the_same(tmp_path: Path) -> None:
    shown = trunnion("show", EXAMPLE / "station.yaml").stdout
    again = tmp_path / "again.yaml"
    again.write_text(shown, encoding="utf-8")
    assert load_station(again).model_dump() == load_station(EXAMPLE / "station.yaml").model_dump()


def test_show_fills_in_the_defaults_and_prints_json_alone() -> None:
    told = trunnion("show", EXAMPLE / "station.yaml", "--json")
    assert json.loads(told.stdout)["mount"]["geometry"] == "azimuth-elevation"
    assert yaml.safe_load(trunnion("show", EXAMPLE / "station.yaml").stdout) == json.loads(
        told.stdout
    )


def test_every_problem_of_a_file_is_printed(tmp_path: Path) -> None:
    file = tmp_path / "station.yaml"
    text = (EXAMPLE / "station.yaml").read_text(encoding="utf-8")
    file.write_text(text.replace("-42.137", "south").replace("tick_hz: 10", "tick_hz: 0"))
    told = trunnion("show", file)
    assert told.exit_code == 1
    assert [line.partition(": ")[2] for line in told.stderr.splitlines()] == [
        "site.latitude_deg: expected a number, got 'south'",
        "cadence.tick_hz: expected 1 or more, got 0",
    ]


@pytest.mark.parametrize("kind", ["station", "plan"])
def test_schema_prints_a_json_schema(kind: str) -> None:
    schema = json.loads(trunnion("schema", kind).stdout)
    Draft202012Validator.check_schema(schema)
    assert schema["properties"]


def test_an_unknown_schema_is_a_mistake_in_the_asking() -> None:
    told = trunnion("schema", "antenna")
    assert told.exit_code == 2
    assert "expected station or plan, got 'antenna'" in told.stderr
