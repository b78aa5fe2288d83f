import json
from pathlib import Path

import pytest

from tests.cli.command import EXAMPLE, trunnion
from trunnion.files.plan import load_plan
from trunnion.files.station import load_station
from trunnion.service.clearance import clearance_of
from trunnion.service.targets import resolve_target
from trunnion.service.viewpoint import viewpoint_of
from trunnion.sky.instants import parse_utc

STATION = EXAMPLE / "station.yaml"
DAY = ("--from", "2026-12-01T00:00:00Z", "--until", "2026-12-02T00:00:00Z")


def passes_of(*arguments: str) -> list[dict[str, object]]:
    told = trunnion("passes", STATION, *arguments, "--json")
    assert told.exit_code == 0, told.stderr
    found = json.loads(told.stdout)["passes"]
    assert isinstance(found, list)
    return found


def test_a_pass_rises_and_sets_where_floor_and_mask_let_the_target_through() -> None:
    first = passes_of("--target", "QUILLON-1", *DAY)[0]
    assert list(first) == ["rise", "culmination", "set", "highest_elevation_deg"]
    station = load_station(STATION)
    target = resolve_target("QUILLON-1", station, viewpoint_of(station))
    clearance = clearance_of(station)
    for event in ("rise", "set"):
        look = target.look(parse_utc(str(first[event])))
        assert look.elevation_deg == pytest.approx(clearance.lowest_deg(look.azimuth_deg), abs=1e-3)
    highest = target.look(parse_utc(str(first["culmination"])))
    assert highest.elevation_deg == pytest.approx(first["highest_elevation_deg"], abs=1e-3)


def test_above_takes_the_place_of_floor_and_mask() -> None:
    assert len(passes_of("--target", "QUILLON-1", *DAY, "--above", "75")) == 1
    assert len(passes_of("--target", "QUILLON-1", *DAY, "--above", "0")) > 2


def test_what_lies_outside_the_window_is_null() -> None:
    (always,) = passes_of("--target", "fixed:20,30", *DAY)
    assert always == {
        "rise": None,
        "culmination": None,
        "set": None,
        "highest_elevation_deg": 30.0,
    }
    told = trunnion("passes", STATION, "--target", "fixed:20,30", *DAY)
    assert "before the window" in told.stdout
    assert "after the window" in told.stdout


def test_a_target_that_never_rises_has_no_pass() -> None:
    assert passes_of("--target", "fixed:20,3", *DAY) == []
    told = trunnion("passes", STATION, "--target", "fixed:20,3", *DAY)
    assert (told.exit_code, "0" in told.stdout) == (0, True)


def test_the_passes_become_a_draft_plan_that_loads(tmp_path: Path) -> None:
    file = tmp_path / "draft.yaml"
    found = passes_of("--target", "QUILLON-2", *DAY, "--write-plan", str(file))
    contacts = load_plan(file).contacts
    assert [contact.target for contact in contacts] == ["QUILLON-2"] * len(found)
    for contact, each in zip(contacts, found, strict=True):
        assert 0 <= contact.from_s - parse_utc(str(each["rise"])) < 1.001
        assert 0 <= parse_utc(str(each["set"])) - contact.until_s < 1.001


def test_a_draft_from_a_file_of_elements_names_the_spacecraft(tmp_path: Path) -> None:
    elements = tmp_path / "one.tle"
    lines = (EXAMPLE / "elements.tle").read_text().splitlines()
    elements.write_text("\n".join(lines[6:9]) + "\n")
    file = tmp_path / "draft.yaml"
    passes_of("--target", str(elements), *DAY, "--write-plan", str(file))
    assert {contact.target for contact in load_plan(file).contacts} == {"BRINDLE-4"}


def test_a_draft_overwrites_nothing(tmp_path: Path) -> None:
    file = tmp_path / "plan.yaml"
    file.write_text("mine")
    told = trunnion("passes", STATION, "--target", "sun", *DAY, "--write-plan", file)
    assert (told.exit_code, told.stdout, told.stderr) == (1, "", f"{file}: File exists\n")
    assert file.read_text() == "mine"


@pytest.mark.parametrize(
    ("arguments", "message"),
    [
        (("--from", "2026-12-02T00:00:00Z", "--until", "2026-12-01T00:00:00Z"), "--until after"),
        ((*DAY, "--above", "90.5"), "90.5"),
        ((*DAY, "--above", "nan"), "expected --above of -90 to 90"),
        (("--from", DAY[1], "--until", "2027-12-02T00:00:01Z"), "at most a year"),
        (("--from", "2026-12-01T00:00:00Z"), "--until"),
    ],
)
def test_a_wrong_question_is_a_mistake_in_the_asking(
    arguments: tuple[str, ...], message: str
) -> None:
    told = trunnion("passes", STATION, "--target", "sun", *arguments)
    assert (told.exit_code, told.stdout) == (2, "")
    assert message in told.stderr


def test_a_long_window_is_searched_in_pieces_and_finds_every_pass_once() -> None:
    month = ("--from", "2026-12-01T00:00:00Z", "--until", "2026-12-31T00:00:00Z")
    sets = [str(each["set"]) for each in passes_of("--target", "sun", *month)]
    assert sets.pop() == "None"
    assert len({each[:10] for each in sets}) == len(sets) == 30
