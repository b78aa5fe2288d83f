"""`check`, `rehearse` and `demo`: what they print, and what they end with."""

import json
from pathlib import Path

import pytest

from tests.cli.command import trunnion
from tests.service.stations import write_plan, write_station
from trunnion.safety.policy import POLICY

MORNING = ("--now", "2026-12-01T00:00Z")
GOOD = "{id: good, target: beacon, from: 2026-12-01T00:24:00Z, until: 2026-12-01T00:25:00Z}"
LOW = "{id: low, target: 'fixed:10,2', from: 2026-12-01T00:40:00Z, until: 2026-12-01T00:41:00Z}"
UNKNOWN = "{id: odd, target: QUILON-1, from: 2026-12-01T00:50:00Z, until: 2026-12-01T00:51:00Z}"


@pytest.fixture
def station(tmp_path: Path) -> Path:
    path = write_station(tmp_path)
    write_plan(tmp_path, GOOD)
    return path


def test_check_of_a_plan_that_is_served_ends_with_zero(station: Path) -> None:
    done = trunnion("check", station, *MORNING)
    assert done.exit_code == 0
    assert "as asked" in done.stdout
    assert "NOT" not in done.stdout
    told = json.loads(trunnion("check", station, *MORNING, "--json").stdout)
    (contact,) = told["contacts"]
    assert told["is_served"]
    assert (contact["rise"], contact["set"]) == ("2026-12-01T00:24:00Z", "2026-12-01T00:25:00Z")
    assert contact["highest_elevation_deg"] == pytest.approx(18.5)
    assert contact["first_joint_deg"] == pytest.approx([-108.7, -108.7])


def test_check_says_in_words_what_will_not_be_as_asked_and_ends_with_one(station: Path) -> None:
    write_plan(station.parent, GOOD, LOW, UNKNOWN)
    done = trunnion("check", station, *MORNING)
    assert done.exit_code == 1
    assert "low: the target never stands clear" in done.stdout
    assert "odd: expected a known target" in done.stdout
    assert "did you mean 'QUILLON-1'" in done.stdout
    told = json.loads(trunnion("check", station, *MORNING, "--json").stdout)
    assert [each["is_served"] for each in told["contacts"]] == [True, False, False]
    assert "Traceback" not in done.output


def test_check_takes_another_plan(station: Path, tmp_path: Path) -> None:
    other = tmp_path / "other.yaml"
    other.write_text(f"contacts:\n  - {LOW}\n")
    assert trunnion("check", station, "--plan", other, *MORNING).exit_code == 1
    missing = trunnion("check", station, "--plan", tmp_path / "none.yaml", *MORNING)
    assert missing.exit_code == 1
    assert "none.yaml: no such file" in missing.stderr


def test_check_finds_a_driver_that_cannot_be_built(station: Path) -> None:
    station.write_text(station.read_text().replace("kind: simulator", "kind: simulater"))
    done = trunnion("check", station, *MORNING)
    assert done.exit_code == 1
    assert "did you mean 'simulator'" in done.stderr


def test_check_warns_of_a_sun_that_will_stand_over_stow(station: Path) -> None:
    text = station.read_text().replace("stow_deg: [0, 88]", "stow_deg: [0, 72]")
    station.write_text(text.replace("sun_keep_out_deg: null", "sun_keep_out_deg: 5"))
    done = trunnion("check", station, *MORNING)
    assert done.exit_code == 0
    assert "warning: the Sun comes within 5° of the stow position" in " ".join(done.stdout.split())
    told = json.loads(trunnion("check", station, *MORNING, "--json").stdout)
    assert len(told["warnings"]) == 1


def test_a_time_that_is_none_is_wrong_usage(station: Path) -> None:
    done = trunnion("check", station, "--now", "tomorrow")
    assert done.exit_code == 2
    assert "expected a time like" in done.stderr


def test_rehearse_tells_of_every_contact_and_ends_with_zero(station: Path) -> None:
    done = trunnion("rehearse", station)
    assert done.exit_code == 0
    assert "tracked" in done.stdout
    told = json.loads(trunnion("rehearse", station, "--json").stdout)
    (contact,) = told["contacts"]
    assert told["is_in_order"]
    assert contact["fate"] == "tracked"
    assert contact["worst_error_deg"] < 0.01
    assert contact["seconds"] == pytest.approx(60.0, abs=0.3)
    assert (contact["outside_beam_s"], contact["interventions"]) == (0.0, 0)


def test_rehearse_ends_with_one_where_a_contact_is_missed(station: Path) -> None:
    write_plan(station.parent, GOOD, UNKNOWN)
    done = trunnion("rehearse", station, "--json")
    assert done.exit_code == 1
    assert [each["fate"] for each in json.loads(done.stdout)["contacts"]] == ["tracked", "missed"]


def test_rehearse_finds_a_mount_that_is_worse_than_forecast(station: Path) -> None:
    jammed = "kind: simulator\n  faults: [{after_s: 605, for_s: 9999, joints: [jammed, jammed]}]"
    station.write_text(station.read_text().replace("kind: simulator", jammed))
    moving = "{id: m, target: BRINDLE-4, from: 2026-12-01T00:40:00Z, until: 2026-12-01T00:46:00Z}"
    write_plan(station.parent, moving)
    done = trunnion("rehearse", station, "--json")
    assert done.exit_code == 1
    (contact,) = json.loads(done.stdout)["contacts"]
    assert contact["fate"] == "lost for longer than forecast"
    assert contact["interventions"] > 0


def test_the_demo_tells_its_story_on_stderr_and_its_table_on_stdout() -> None:
    done = trunnion("demo", "--speed", "100000")
    assert done.exit_code == 0
    for phase in ("slewing", "waiting", "tracking", "stowing", "stowed"):
        assert phase in done.stderr
    for contact in ("brindle-4-morning", "quillon-2-north", "lantern-g-relay"):
        assert contact in done.stdout
    assert done.stdout.count("tracked") == 7


def test_check_draws_the_plan(station: Path, tmp_path: Path) -> None:
    file = tmp_path / "plan.svg"
    done = trunnion("check", station, *MORNING, "--plot", file, "--json")
    assert done.exit_code == 0
    assert json.loads(done.stdout)["is_served"]
    text = file.read_text()
    assert text.startswith("<svg")
    assert "good" in text
    assert trunnion("check", station, *MORNING, "--plot", tmp_path / "plan.gif").exit_code == 2
    nowhere = trunnion("check", station, *MORNING, "--plot", tmp_path / "no" / "plan.svg")
    assert nowhere.exit_code == 1
    assert "plan.svg" in nowhere.stderr


def test_check_prints_what_the_gate_does(station: Path) -> None:
    done = trunnion("check", station, "--safety")
    assert done.exit_code == 0
    assert "emergency stop" in done.stdout
    told = json.loads(trunnion("check", station, "--safety", "--json").stdout)["policy"]
    assert len(told) == len(POLICY)
