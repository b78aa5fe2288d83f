"""Ways from one place to another that stay clear."""

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from tests.track.stations import CLEARANCE, FLOOR_DEG, mount
from trunnion.mount.clearance import Clearance, Sector
from trunnion.mount.hinges import Hinges
from trunnion.mount.horizon import HorizonMask
from trunnion.mount.joints import Joints, Motion
from trunnion.mount.motion import approach
from trunnion.mount.mount import Mount
from trunnion.track.transit import NoWay, transit, transit_time_s

MAST = Sector("mast", 81.3, 97.9, 0.0, 44.4)
HILLS = HorizonMask(((3.0, 6.1), (77.7, 13.2), (151.9, 31.4), (203.3, 8.8)))
HARD = Clearance(FLOOR_DEG, HILLS, (MAST,))


def fly(start: Joints, way: tuple[Joints, ...], machine: Mount) -> list[Joints]:
    """Every place on the way at 20 Hz."""
    now, places = Motion(*start), []
    for waypoint in way:
        while now.joints != waypoint:
            now = approach(now, Motion(*waypoint), machine, 0.05)
            places.append(now.joints)
    return places


def test_straight_where_that_is_clear() -> None:
    goal = Joints(-133.1, 24.9)
    assert transit(Joints(12.7, 61.3), goal, mount(), CLEARANCE) == (goal,)


def test_round_a_mast_over_its_top() -> None:
    start, goal = Joints(61.1, 20.7), Joints(121.9, 33.3)
    way = transit(start, goal, mount(), Clearance(FLOOR_DEG, None, (MAST,)))
    assert len(way) > 1
    assert way[-1] == goal
    assert max(place.second_deg for place in way) > 44.4


places = st.builds(Joints, st.floats(-270.0, 267.0), st.floats(5.4, 90.0))


@settings(max_examples=40, deadline=None)
@given(places, places, st.sampled_from([mount(), mount(second=(0.0, 180.0))]))
def test_what_is_flown_is_clear_all_the_way(start: Joints, goal: Joints, machine: Mount) -> None:
    hinges = machine.hinges
    if not (HARD.is_clear(*hinges.boresight(start)) and HARD.is_clear(*hinges.boresight(goal))):
        return
    for place in fly(start, transit(start, goal, machine, HARD), machine):
        assert HARD.is_clear(*hinges.boresight(place))


@settings(max_examples=5, deadline=None)
@given(st.floats(-60.0, 60.0), st.floats(-60.0, 60.0), st.floats(-60.0, 60.0))
def test_an_x_y_mount_keeps_clear_too(first_deg: float, goal_deg: float, second_deg: float) -> None:
    machine = mount((-85.0, 85.0), (-85.0, 85.0), hinges=Hinges.x_y_north_south())
    start, goal = Joints(first_deg, 10.0), Joints(goal_deg, second_deg)
    hinges = machine.hinges
    clearance = Clearance(FLOOR_DEG, None)
    if not clearance.is_clear(*hinges.boresight(goal)):
        return
    for place in fly(start, transit(start, goal, machine, clearance), machine):
        assert clearance.is_clear(*hinges.boresight(place))


def test_a_place_walled_in_has_no_way() -> None:
    wall = Sector("wall", 80.0, 100.0, 0.0, 90.0)
    other = Sector("other", 260.0, 280.0, 0.0, 90.0)
    goal = Joints(181.0, 45.0)
    with pytest.raises(NoWay, match=r"expected a clear way from 1\.0°/45\.0° to 181\.0°/45\.0°"):
        transit(Joints(1.0, 45.0), goal, mount(), Clearance(0.0, None, (wall, other)))


def test_time_is_that_of_the_slower_joint_leg_by_leg() -> None:
    # 100° at 5°/s and 3°/s²: 100/5 + 5/3; 10°: 10/5 + 5/3
    way = (Joints(100.0, 10.0), Joints(110.0, 20.0))
    seconds = transit_time_s(Joints(0.0, 10.0), way, mount())
    assert seconds == pytest.approx(100 / 5 + 5 / 3 + 10 / 5 + 5 / 3)
