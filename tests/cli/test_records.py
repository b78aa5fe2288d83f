"""The commands about the records, against a file as the daemon writes it."""

import csv
import json
import subprocess
import sys
from pathlib import Path

import pytest

from tests.cli.command import trunnion
from tests.files.station_text import written
from trunnion.mount.joints import Motion, Reading
from trunnion.service.records.store import RecordStore
from trunnion.service.records.values import (
    ContactEnd,
    ContactStart,
    Event,
    EventKind,
    Outcome,
    Sample,
)

BEGIN = 1_796_086_932.5  # 2026-12-01T01:02:12.5Z


@pytest.fixture
def station(tmp_path: Path) -> Path:
    store = RecordStore(tmp_path / "records.sqlite3")
    reading = Reading(taken_s=16.75, first_deg=31.5, second_deg=6.25)
    store.write(
        [
            ContactStart(BEGIN, "overhead", "QUILLON-1", BEGIN, BEGIN + 571),
            Sample(BEGIN, 17.0, "tracking", None, 0.02, Motion(31.5, 6.25), None, reading),
            Event(BEGIN + 3, EventKind.INTERVENTION, "held above the floor"),
            ContactEnd(BEGIN + 571, Outcome.DONE, {"worst_error_deg": 0.042}),
            ContactStart(BEGIN + 900, "noon", "sun", BEGIN + 900, BEGIN + 1500),
            ContactEnd(BEGIN + 1000, Outcome.CUT_SHORT, {}),
        ]
    )
    store.close()
    return written(tmp_path)


def test_the_list_names_the_newest_contact_first(station: Path) -> None:
    told = trunnion("records", station)
    assert told.exit_code == 0
    rows = [line.split()[:3] for line in told.stdout.splitlines() if "2026" in line]
    assert rows == [["2", "noon", "sun"], ["1", "overhead", "QUILLON-1"]]


def test_the_list_as_json_keeps_every_value(station: Path) -> None:
    newest, oldest = json.loads(trunnion("records", station, "--json").stdout)["contacts"]
    assert newest["outcome"] == "cut short"
    assert oldest == {
        "id": 1,
        "contact": "overhead",
        "target": "QUILLON-1",
        "begin": "2026-12-01T01:02:12.500Z",
        "end": "2026-12-01T01:11:43.500Z",
        "planned_begin": "2026-12-01T01:02:12.500Z",
        "planned_end": "2026-12-01T01:11:43.500Z",
        "outcome": "done",
        "samples": 1,
        "summary": {"worst_error_deg": 0.042},
    }


def test_the_list_can_be_cut_short(station: Path) -> None:
    told = trunnion("records", station, "--limit", "1", "--json")
    assert [each["id"] for each in json.loads(told.stdout)["contacts"]] == [2]


def test_show_prints_the_summary_and_the_events(station: Path) -> None:
    told = trunnion("records", "show", "1", station)
    assert told.exit_code == 0
    assert "summary: worst error [°]" in told.stdout
    assert "0.042" in told.stdout
    assert "held above the floor" in told.stdout


def test_show_as_json(station: Path) -> None:
    told = json.loads(trunnion("records", "show", "1", station, "--json").stdout)
    assert told["contact"]["id"] == 1
    assert told["events"] == [
        {
            "time": "2026-12-01T01:02:15.500Z",
            "kind": "intervention",
            "what": "held above the floor",
        }
    ]


def test_samples_are_exported_as_csv(station: Path, tmp_path: Path) -> None:
    file = tmp_path / "samples.csv"
    assert trunnion("records", "show", "1", station, "--csv", file).exit_code == 0
    (sample,) = csv.DictReader(file.read_text().splitlines())
    assert sample["utc"] == "2026-12-01T01:02:12.500Z"
    assert (sample["demand_first_deg"], sample["order_first_deg"]) == ("31.5", "")
    printed = trunnion("records", "show", "1", station, "--csv", "-").stdout
    assert printed == file.read_text()


def test_a_reader_that_has_gone_is_no_error_message(station: Path) -> None:
    command = f"{Path(sys.executable).parent / 'trunnion'} records show 1 {station} --csv - | true"
    for _ in range(3):
        told = subprocess.run(["sh", "-c", command], capture_output=True, text=True, check=False)
        assert told.stderr == ""


def test_an_export_overwrites_nothing(station: Path) -> None:
    told = trunnion("records", "show", "1", station, "--csv", station)
    assert (told.exit_code, told.stderr) == (1, f"{station}: File exists\n")


def test_a_contact_that_is_not_on_record_is_told(station: Path) -> None:
    told = trunnion("records", "show", "17", station)
    assert told.exit_code == 1
    assert told.stderr == "expected the number of a contact on record, got 17\n"


def test_a_station_without_records_is_told(tmp_path: Path) -> None:
    told = trunnion("records", written(tmp_path))
    assert told.exit_code == 1
    assert "no records yet" in told.stderr
