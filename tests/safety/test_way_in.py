"""The way back inside, from every kind of outside."""

from dataclasses import replace

import pytest
from hypothesis import given
from hypothesis import strategies as st

from tests.safety.bench_mount import LIMITS
from trunnion.mount.clearance import Clearance
from trunnion.mount.joints import Joints
from trunnion.safety.places import depth_deg, find_at
from trunnion.safety.way_in import LONGEST_DEG, ROOM_DEG, find_way_in

MOUNT = LIMITS.mount


@pytest.mark.parametrize(
    ("place", "goal"),
    [
        (Joints(201.7, 3.1), Joints(201.7, 6.6)),
        (
            Joints(MOUNT.first.upper_deg + 1.3, 41.7),
            Joints(MOUNT.first.upper_deg - ROOM_DEG, 41.7),
        ),
        (
            Joints(MOUNT.first.lower_deg - 0.7, MOUNT.second.upper_deg + 0.4),
            Joints(MOUNT.first.lower_deg + ROOM_DEG, MOUNT.second.upper_deg - ROOM_DEG),
        ),
        (Joints(143.1, 26.3), Joints(143.1, 28.3)),
        (Joints(141.9, 12.3), Joints(141.1, 12.3)),
    ],
    ids=["below the mask", "beyond the travel", "beyond both", "under the mast's top", "its side"],
)
def test_it_is_the_nearest_place_inside(place: Joints, goal: Joints) -> None:
    assert find_at(place, LIMITS) is not None
    assert find_way_in(place, LIMITS) == pytest.approx(goal, abs=0.26)


def test_inside_there_is_none_and_from_too_far_outside_neither() -> None:
    assert find_way_in(Joints(201.7, 41.3), LIMITS) is None
    assert find_way_in(Joints(201.7, -90.0 - LONGEST_DEG), LIMITS) is None


def test_up_to_forty_degrees_away_a_way_is_looked_for() -> None:
    high = replace(LIMITS, clearance=Clearance(45.0, None))
    assert find_way_in(Joints(201.7, 5.3), high) is not None
    assert find_way_in(Joints(201.7, 4.9), high) is None


@given(first_deg=st.floats(-290.0, 290.0), second_deg=st.floats(-10.0, 100.0))
def test_whatever_it_is_it_ends_inside_and_never_leads_deeper(
    first_deg: float, second_deg: float
) -> None:
    place = Joints(first_deg, second_deg)
    goal = find_way_in(place, LIMITS)
    if goal is None:
        return
    assert find_at(goal, LIMITS) is None
    middle = Joints((place[0] + goal[0]) / 2.0, (place[1] + goal[1]) / 2.0)
    assert depth_deg(middle, LIMITS) <= depth_deg(place, LIMITS)
