"""A mount and its planning as the station file says, from the file to a flown pass."""

from pathlib import Path

import pytest

from tests.service.stations import station_with, write_plan, write_station
from tests.service.test_geometries import ALTITUDE, OVERHEAD
from trunnion.mount.hinges import Hinges
from trunnion.mount.joints import Joints
from trunnion.mount.mount import JointBox
from trunnion.safety.verdict import Move
from trunnion.service.antenna import mount_of, objective_of
from trunnion.service.rehearsal import rehearsal_of
from trunnion.track.objective import Objective

AXIS = "axis: null   "
FORBIDDEN = "forbidden: []"
TILTED = {
    ALTITUDE: "geometry: other-axis",
    AXIS: "axis: {azimuth_deg: 152.5, elevation_deg: 61.5} ",
    "stow_deg: [0, 88]": "stow_deg: [0, 61]",
    "travel_deg: [0, 90]": "travel_deg: [-20, 90]",
}
MORNING = (
    "{id: morning, target: BRINDLE-4, from: 2026-12-01T00:36:54Z, until: 2026-12-01T00:49:18Z}"
)


def test_a_first_axis_in_any_direction_is_the_station_s(tmp_path: Path) -> None:
    axis = mount_of(station_with(tmp_path, TILTED)).hinges
    assert axis == Hinges(152.5, 61.5, is_clockwise=True)


def test_margin_forbidden_angles_and_objective_are_the_station_s(tmp_path: Path) -> None:
    changes = {
        "margin_deg: 0 ": "margin_deg: 2.5 ",
        FORBIDDEN: "forbidden: [{name: strut, first_deg: [80, 101], second_deg: [0, 12]}]",
        "objective: time-outside-beam": "objective: worst-error",
    }
    station = station_with(tmp_path, changes)
    mount = mount_of(station)
    assert mount.forbidden == (JointBox("strut", 80.0, 101.0, 0.0, 12.0),)
    assert (mount.first.soft_lower_deg, mount.first.soft_upper_deg) == (-267.5, 267.5)
    assert objective_of(station) is Objective.WORST_ERROR


@pytest.mark.parametrize("name", ["time-outside-beam", "worst-error"])
def test_every_objective_of_the_file_is_one_of_planning_s(tmp_path: Path, name: str) -> None:
    changes = {"objective: time-outside-beam": f"objective: {name}"}
    assert objective_of(station_with(tmp_path, changes)).value == name.replace("-", " ").replace(
        "outside", "outside the"
    )


def test_a_mount_on_a_tilted_axis_follows_the_overhead_pass_exactly(tmp_path: Path) -> None:
    station = write_station(tmp_path, TILTED)
    write_plan(tmp_path, OVERHEAD)
    _, rehearsal = rehearsal_of(station, None)
    for turn in rehearsal.turns():
        assert not turn.verdict.interventions
    assert rehearsal.results["overhead"].score.worst_error_deg < 0.02


def test_no_order_ever_enters_a_forbidden_box(tmp_path: Path) -> None:
    """The box lies in the middle of the morning's pass as an open mount would fly it."""
    open_station = write_station(tmp_path)
    write_plan(tmp_path, MORNING)
    middle = _places(open_station)
    joints = middle[len(middle) // 2]
    box = JointBox("strut", joints[0] - 2.0, joints[0] + 2.0, joints[1] - 2.0, joints[1] + 2.0)
    text = (
        f"forbidden: [{{name: strut, first_deg: [{box.first_lower_deg}, {box.first_upper_deg}], "
        f"second_deg: [{box.second_lower_deg}, {box.second_upper_deg}]}}]"
    )
    station = write_station(tmp_path, {FORBIDDEN: text})
    write_plan(tmp_path, MORNING)
    places = _places(station)
    assert places
    assert not any(box.meets(place, place) for place in places)


def _places(station: Path) -> list[Joints]:
    """Where the mount was sent while the contact was on."""
    _, rehearsal = rehearsal_of(station, None)
    return [
        turn.verdict.order.motion.joints
        for turn in rehearsal.turns()
        if turn.decision.look is not None and isinstance(turn.verdict.order, Move)
    ]
