"""Station file: a first axis in any direction, margins, forbidden joint angles, the objective."""

from pathlib import Path

import pytest

from tests.files.station_text import changed, written
from trunnion.files.problems import FileProblems
from trunnion.files.station import load_station
from trunnion.files.station_machine import Objective

STOW = "stow_deg: [0, 88]\n"
STRUT = "{name: strut, first_deg: [80, 100.5], second_deg: [0, 12]}"


def problem_of(folder: Path, text: str) -> str:
    with pytest.raises(FileProblems) as caught:
        load_station(written(folder, text))
    (problem,) = caught.value.problems
    return str(problem)


def test_nothing_is_forbidden_and_nothing_left_unused_by_default(tmp_path: Path) -> None:
    station = load_station(written(tmp_path))
    assert station.mount.forbidden == ()
    assert station.mount.axis is None
    assert (station.mount.first.margin_deg, station.mount.second.margin_deg) == (0.0, 0.0)
    assert station.planning.objective is Objective.TIME_OUTSIDE_BEAM


@pytest.mark.parametrize(
    ("mount", "expected"),
    [
        (
            "  geometry: other-axis\n",
            "mount.axis: expected where the axis points, as geometry is other-axis, got none",
        ),
        (
            "  axis: {azimuth_deg: 12, elevation_deg: 78}\n",
            "mount.axis: expected none, as geometry is azimuth-elevation, got one",
        ),
        (
            "  geometry: other-axis\n  axis: {azimuth_deg: 12, elevation_deg: 91.5}\n",
            "mount.axis.elevation_deg: expected 90 or less, got 91.5",
        ),
        (
            "  forbidden: [{name: hut, first_deg: [-4, 4], second_deg: [80, 90]}]\n",
            "expected boxes that leave out the stow position [0, 88], got it in 'hut'",
        ),
        (
            "  forbidden: [{name: hut, first_deg: [14, -4], second_deg: [0, 9]}]\n",
            "expected the lower end first and above it the upper, got [14, -4]",
        ),
    ],
)
def test_what_contradicts_itself_is_told(tmp_path: Path, mount: str, expected: str) -> None:
    assert expected in problem_of(tmp_path, changed(stow_deg=STOW + mount.rstrip("\n")))


def test_a_margin_leaves_some_of_the_travel(tmp_path: Path) -> None:
    text = changed(travel_deg="travel_deg: [-7, 83]\n    margin_deg: 45")
    expected = "mount.first.margin_deg: expected less than half of the travel, 45, got 45"
    assert expected in problem_of(tmp_path, text)


def test_an_unknown_objective_is_told_with_what_there_is(tmp_path: Path) -> None:
    text = changed() + "planning: {objective: least-noise}\n"
    assert "expected one of 'time-outside-beam', 'worst-error'" in problem_of(tmp_path, text)


def test_a_strut_is_read(tmp_path: Path) -> None:
    text = changed(stow_deg=STOW + f"  forbidden: [{STRUT}]")
    (box,) = load_station(written(tmp_path, text)).mount.forbidden
    assert (box.name, box.first_deg, box.second_deg) == ("strut", (80, 100.5), (0, 12))
