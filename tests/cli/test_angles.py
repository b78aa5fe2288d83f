import json
import subprocess
import sys
from pathlib import Path

import pytest

from tests.cli.command import EXAMPLE, trunnion
from tests.files.oem_text import kvn
from trunnion.files.station import load_station
from trunnion.service.targets import resolve_target
from trunnion.service.viewpoint import viewpoint_of
from trunnion.sky.instants import parse_utc

STATION = EXAMPLE / "station.yaml"
KEYS = [
    "time",
    "azimuth_deg",
    "elevation_deg",
    "range_km",
    "azimuth_rate_deg_s",
    "elevation_rate_deg_s",
    "range_rate_km_s",
]
INSTANT = "2026-12-01T01:05:17.25Z"


def test_one_instant_as_json_is_what_the_target_says_itself() -> None:
    told = trunnion("angles", STATION, "--target", "QUILLON-1", "--at", INSTANT, "--json")
    assert told.exit_code == 0
    (angle,) = json.loads(told.stdout)["angles"]
    assert list(angle) == KEYS
    station = load_station(STATION)
    look = resolve_target("QUILLON-1", station, viewpoint_of(station)).look(parse_utc(INSTANT))
    assert angle["time"] == "2026-12-01T01:05:17.250Z"
    assert [angle[key] for key in KEYS[1:]] == [
        look.azimuth_deg,
        look.elevation_deg,
        look.range_km,
        look.azimuth_rate_deg_s,
        look.elevation_rate_deg_s,
        look.range_rate_km_s,
    ]


def test_geometric_is_the_straight_line() -> None:
    arguments = ("angles", STATION, "--target", "90117", "--at", INSTANT, "--json")
    (straight,) = json.loads(trunnion(*arguments, "--geometric").stdout)["angles"]
    (apparent,) = json.loads(trunnion(*arguments).stdout)["angles"]
    station = load_station(STATION)
    viewpoint = viewpoint_of(station).geometric()
    look = resolve_target("90117", station, viewpoint).look(parse_utc(INSTANT))
    assert straight["elevation_deg"] == look.elevation_deg
    assert straight["elevation_deg"] < apparent["elevation_deg"]


def test_a_series_runs_from_begin_to_end_by_its_step() -> None:
    told = trunnion(
        *("angles", STATION, "--target", "sun", "--json", "--every", "2.5"),
        *("--from", "2026-12-01T01:59:50Z", "--until", "2026-12-01T02:00:00Z"),
    )
    times = [each["time"][14:] for each in json.loads(told.stdout)["angles"]]
    assert times == ["59:50.000Z", "59:52.500Z", "59:55.000Z", "59:57.500Z", "00:00.000Z"]


def test_several_instants_may_be_asked_for() -> None:
    told = trunnion(
        *("angles", STATION, "--target", "sun", "--json"),
        *("--at", "2026-12-01T01:00:00Z", "--at", "2026-12-01T12:00:00+09:30"),
    )
    times = [each["time"] for each in json.loads(told.stdout)["angles"]]
    assert times == ["2026-12-01T01:00:00.000Z", "2026-12-01T02:30:00.000Z"]


def test_what_a_target_has_not_is_null() -> None:
    told = trunnion("angles", STATION, "--target", "fixed:251.3,18.5", "--at", INSTANT, "--json")
    (angle,) = json.loads(told.stdout)["angles"]
    assert (angle["azimuth_deg"], angle["elevation_deg"]) == (251.3, 18.5)
    assert (angle["range_km"], angle["range_rate_km_s"]) == (None, None)
    assert (angle["azimuth_rate_deg_s"], angle["elevation_rate_deg_s"]) == (0, 0)


def test_the_table_tells_the_same(tmp_path: Path) -> None:
    told = trunnion("angles", STATION, "--target", "fixed:251.3,18.5", "--at", INSTANT)
    assert told.exit_code == 0
    assert "2026-12-01 01:05:17.250" in told.stdout
    assert "251.3000" in told.stdout
    assert "–" in told.stdout


@pytest.mark.parametrize(
    ("arguments", "message"),
    [
        ((), "expected either --at, or --from, --until and --every together"),
        (("--at", INSTANT, "--every", "5"), "expected either --at"),
        (("--from", INSTANT, "--until", INSTANT), "expected either --at"),
        (("--at", "2026-12-01T01:05:17"), "which has none"),
        (("--at", "noon"), "expected a time like 2026-12-01T10:15:00Z"),
        (("--from", INSTANT, "--until", INSTANT, "--every", "0"), "--every above 0"),
        (("--from", INSTANT, "--until", INSTANT, "--every", "nan"), "--every above 0"),
        (
            ("--from", INSTANT, "--until", "2026-12-01T01:05:00Z", "--every", "5"),
            "--until not before --from",
        ),
        (
            ("--from", INSTANT, "--until", "2027-12-01T01:05:00Z", "--every", "0.1"),
            "at most 1000000 instants",
        ),
    ],
)
def test_a_wrong_question_is_a_mistake_in_the_asking(
    arguments: tuple[str, ...], message: str
) -> None:
    told = trunnion("angles", STATION, "--target", "sun", *arguments)
    assert (told.exit_code, told.stdout) == (2, "")
    assert message in " ".join(told.stderr.replace("│", " ").split())


def test_an_unknown_target_fails_with_a_suggestion() -> None:
    told = trunnion("angles", STATION, "--target", "QUILON-1", "--at", INSTANT, "--json")
    assert (told.exit_code, told.stdout) == (1, "")
    assert told.stderr == ("expected a known target, got 'QUILON-1'; did you mean 'QUILLON-1'?\n")


def test_a_reader_that_has_gone_is_no_error_message() -> None:
    command = (
        f"{Path(sys.executable).parent / 'trunnion'} angles {STATION} --target sun --every 0.5"
        " --from 2026-12-01T01:00:00Z --until 2026-12-01T03:00:00Z --json | head -n 1"
    )
    told = subprocess.run(["sh", "-c", command], capture_output=True, text=True, check=False)
    assert (told.stdout, told.stderr) == ("{\n", "")


@pytest.mark.parametrize(
    "target", ["sun", "moon", "saturn", "icrs:83.633,22.014", "fixed:12.5,7.25", "QUILLON-1"]
)
def test_every_kind_of_target_is_answered_with_its_trust(target: str) -> None:
    told = trunnion(
        *("angles", STATION, "--target", target, "--at", INSTANT, "--json", "--verbose")
    )
    assert told.exit_code == 0
    answer = json.loads(told.stdout)
    assert answer["refraction"] == "radio"
    assert answer["earth_orientation"] == "finals2000A.all"
    assert 0.0 <= answer["expected_error_deg"] < 1.0
    assert -90.0 <= answer["angles"][0]["elevation_deg"] <= 90.0


def test_what_may_be_wrong_is_told_with_its_source() -> None:
    arguments = ("angles", STATION, "--target", "QUILLON-1", "--at", INSTANT, "--geometric")
    told = trunnion(*arguments, "--verbose")
    assert told.exit_code == 0
    for words in ("refraction: none", "light time and aberration: off", "expected error: "):
        assert words in told.stdout
    assert "age of the orbit elements" in told.stdout
    assert "common practice, no source" in told.stdout
    assert "expected error" not in trunnion(*arguments).stdout


def test_files_of_every_kind_are_targets_on_the_command_line(tmp_path: Path) -> None:
    table = tmp_path / "beacon.csv"
    table.write_text(
        "time,azimuth_deg,elevation_deg\n"
        "2026-12-01T01:05:10Z,359.6,12.1\n2026-12-01T01:05:20Z,0.4,12.3\n"
    )
    told = trunnion("angles", STATION, "--target", table, "--at", INSTANT, "--json")
    (angle,) = json.loads(told.stdout)["angles"]
    assert angle["elevation_deg"] == pytest.approx(12.245, abs=0.01)
    ephemeris = tmp_path / "craft.oem"
    ephemeris.write_text(kvn())
    at = "2026-03-01T12:04:30Z"
    told = trunnion("angles", STATION, "--target", ephemeris, "--at", at, "--json")
    assert json.loads(told.stdout)["target"] == "TESTSAT"
    outside = trunnion("angles", STATION, "--target", ephemeris, "--at", INSTANT)
    assert outside.exit_code != 0
    assert "expected an instant within its ephemeris" in outside.stderr
