"""Places and ways: what forbids them, and how deep a place is outside."""

from dataclasses import replace

import pytest

from tests.mount.mounts import MOUNT
from tests.safety.bench_mount import LIMITS
from trunnion.mount.clearance import Circle, Clearance, Sector
from trunnion.mount.joints import Joints, Motion
from trunnion.mount.mount import JointBox
from trunnion.safety.places import (
    depth_deg,
    find_at,
    find_on_the_way,
    find_while_stopping,
    stopping_place,
)
from trunnion.safety.verdict import Rule

# travel -271…268 and 1.5…91, floor 5.3, the mast at 141.3…146.9 x 1.1…27.9,
# mask 4.1 at 17.3, 11.7 and 2.3 at 93.1, 8.9 at 271.9
STRUT = JointBox("the strut", 199.1, 204.3, 55.1, 61.7)
STRUTTED = replace(LIMITS, mount=replace(MOUNT, forbidden=(STRUT,)))


@pytest.mark.parametrize(
    ("place", "rule", "finding"),
    [
        (Joints(268.01, 41.3), Rule.TRAVEL, "first joint at 268.01°, its travel is -271…268°"),
        (Joints(-271.01, 41.3), Rule.TRAVEL, "first joint at -271.01°, its travel is -271…268°"),
        (Joints(201.7, 91.01), Rule.TRAVEL, "second joint at 91.01°, its travel is 1.5…91°"),
        (Joints(201.7, 1.49), Rule.TRAVEL, "second joint at 1.49°, its travel is 1.5…91°"),
        (Joints(130.1, 5.29), Rule.FLOOR, "elevation 5.29°, the floor is 5.3°"),
        (
            Joints(93.1, 11.69),
            Rule.MASK,
            "elevation 11.69° at azimuth 93.1°, the horizon mask stands at 11.70°",
        ),
        (
            Joints(144.1 - 360.0, 27.9),
            Rule.KEEP_OUT,
            "azimuth 144.1°, elevation 27.9° is in the mast",
        ),
    ],
)
def test_what_forbids_a_place_says_where_it_is(place: Joints, rule: Rule, finding: str) -> None:
    assert find_at(place, LIMITS) == (rule, finding)


@pytest.mark.parametrize(
    "place",
    [
        Joints(268.0, 41.3),
        Joints(-271.0, 41.3),
        Joints(201.7, 91.0),
        Joints(130.1, 5.3),
        Joints(93.1, 11.7),
        Joints(144.1, 27.91),
        Joints(141.2, 20.3),
        Joints(147.0, 20.3),
    ],
)
def test_the_limits_themselves_are_allowed(place: Joints) -> None:
    assert find_at(place, LIMITS) is None


@pytest.mark.parametrize(
    "place", [Joints(268.0, 41.3), Joints(-271.0, 41.3), Joints(201.7, 91.0), Joints(201.7, 1.5)]
)
def test_the_ends_of_the_travel_need_no_rounding(place: Joints) -> None:
    assert find_at(place, replace(LIMITS, clearance=Clearance(-5.3, None)), 0.0) is None


def test_floor_mask_and_circle_need_no_rounding_either() -> None:
    assert find_at(Joints(130.1, 5.3), LIMITS, 0.0) is None
    assert find_at(Joints(93.1, 11.7), LIMITS, 0.0) is None
    circle = Circle("the Sun", 201.7, 41.3, 4.3)
    limits = replace(LIMITS, clearance=LIMITS.clearance.with_circle(circle))
    outside_deg = circle.depth_deg(201.7, 36.5)
    assert find_at(Joints(201.7, 36.5), limits, outside_deg) is None
    assert find_at(Joints(201.7, 36.5), limits, outside_deg - 0.001) is not None


@pytest.mark.parametrize("place", [Joints(268.05, 41.3), Joints(130.1, 5.25), Joints(93.1, 11.65)])
def test_an_allowance_forgives_that_much(place: Joints) -> None:
    assert find_at(place, LIMITS, 0.051) is None
    assert find_at(place, LIMITS, 0.049) is not None


def test_joint_angles_that_are_forbidden_are_found() -> None:
    found = find_at(Joints(201.7, 58.3), STRUTTED)
    assert found == (Rule.KEEP_OUT, "joints at 201.7°/58.3° are in the strut")
    assert find_at(Joints(201.7, 61.8), STRUTTED) is None


def test_a_way_is_looked_at_all_along_but_for_its_begin() -> None:
    assert find_on_the_way(Joints(140.1, 20.3), Joints(148.1, 20.3), LIMITS) is not None
    assert find_on_the_way(Joints(144.1, 27.8), Joints(144.1, 29.3), LIMITS) is None
    assert find_on_the_way(Joints(144.1, 29.3), Joints(144.1, 27.8), LIMITS) is not None


def test_no_obstacle_wider_than_the_spacing_is_stepped_over() -> None:
    thin = JointBox("a rope", 199.1, 199.36, 0.0, 90.0)
    limits = replace(LIMITS, mount=replace(MOUNT, forbidden=(thin,)))
    for step in range(50):
        begin = Joints(190.0 + 0.011 * step, 41.3)
        assert find_on_the_way(begin, Joints(210.3, 47.1), limits) is not None


def test_the_place_of_rest_counts_on_less_than_full_braking() -> None:
    """Four fifths of 2.9 and 2.1 deg/s²: 5² / 4.64 and 3² / 3.36 degrees."""
    expected = (201.7 + 25.0 / 4.64, 41.3 - 9.0 / 3.36)
    assert stopping_place(Motion(201.7, 41.3, 5.0, -3.0), LIMITS) == pytest.approx(expected)


@pytest.mark.parametrize("side", [-1.0, 1.0])
def test_the_slowest_motion_goes_on_to_its_own_side_too(side: float) -> None:
    expected = (201.7 + side * 0.25 / 4.64, 41.3)
    place = stopping_place(Motion(201.7, 41.3, side * 0.5, 0.0), LIMITS)
    assert place == pytest.approx(expected, abs=1e-9)


def test_each_joint_brakes_by_itself_and_the_way_is_bent() -> None:
    """From here the straight way to rest passes the strut, and the real one does not."""
    motion = Motion(196.9, 54.0, 5.9, 0.9)
    rest = stopping_place(motion, STRUTTED)
    assert find_on_the_way(motion.joints, rest, STRUTTED) is None
    assert find_while_stopping(motion, STRUTTED) is None
    assert find_while_stopping(motion._replace(second_rate_deg_s=2.4), STRUTTED) is not None


def test_what_is_in_the_way_of_stopping_is_found() -> None:
    assert find_while_stopping(Motion(138.0, 20.3, 5.9, 0.0), LIMITS) is not None
    assert find_while_stopping(Motion(138.0, 20.3, 1.9, 0.0), LIMITS) is None
    assert find_while_stopping(Motion(201.7, 7.3, 0.0, -2.9), LIMITS) is not None
    assert find_while_stopping(Motion(201.7, 9.3, 0.0, 2.9), LIMITS) is None


@pytest.mark.parametrize(
    ("pole_deg", "is_met"), [(137.5, False), (138.5, True), (145.1, True), (145.7, False)]
)
def test_stopping_takes_the_way_from_here_to_rest_and_no_more(
    pole_deg: float, is_met: bool
) -> None:
    """From 5.9 deg/s at 4/5 of 2.9 deg/s²: 7.502 degrees, to 145.502."""
    pole = Sector("the pole", pole_deg, pole_deg + 0.03, 1.1, 27.9)
    limits = replace(LIMITS, clearance=Clearance(5.3, None, (pole,)))
    found = find_while_stopping(Motion(138.0, 20.3, 5.9, 0.0), limits)
    assert (found is not None) == is_met


def test_a_step_over_a_pole_hardly_wider_than_the_finest_is_seen() -> None:
    pole = Sector("the pole", 144.122, 144.143, 1.1, 27.9)
    limits = replace(LIMITS, clearance=Clearance(5.3, None, (pole,)))
    assert find_on_the_way(Joints(144.12, 20.3), Joints(144.145, 20.3), limits) is not None


@pytest.mark.parametrize(
    ("place", "depth"),
    [
        (Joints(201.7, 41.3), 0.0),
        (Joints(268.7, 41.3), 0.7),
        (Joints(-271.7, 41.3), 0.7),
        (Joints(201.7, 91.7), 0.7),
        (Joints(130.1, 4.6), 0.7),
        (Joints(93.1, 11.0), 0.7),
        (Joints(142.0, 20.3), 0.7),
        (Joints(146.2, 20.3), 0.7),
        (Joints(144.1, 27.2), 0.7),
    ],
)
def test_depth_is_how_far_outside_the_worst_of_them(place: Joints, depth: float) -> None:
    assert depth_deg(place, LIMITS) == pytest.approx(depth, abs=1e-9)


@pytest.mark.parametrize(
    "place",
    [Joints(199.8, 58.3), Joints(203.6, 58.3), Joints(201.7, 55.8), Joints(201.7, 61.0)],
)
def test_depth_in_a_forbidden_box_is_the_way_to_its_nearest_face(place: Joints) -> None:
    assert depth_deg(place, STRUTTED) == pytest.approx(0.7)


@pytest.mark.parametrize(
    ("from_deg", "to_deg", "azimuth_deg"), [(350.0, 20.0, 2.0), (340.0, 10.0, -2.0)]
)
def test_depth_in_a_sector_across_north_is_the_way_to_its_nearer_side(
    from_deg: float, to_deg: float, azimuth_deg: float
) -> None:
    across = Sector("the mast", from_deg, to_deg, 1.1, 60.7)
    limits = replace(LIMITS, clearance=Clearance(5.3, None, (across,)))
    assert depth_deg(Joints(azimuth_deg, 30.1), limits) == pytest.approx(12.0)


def test_room_is_kept_over_the_highest_of_all_obstacles() -> None:
    bare = replace(LIMITS, clearance=Clearance(45.3, None))
    assert find_at(Joints(130.1, 45.4), bare, -0.2) is not None
    assert find_at(Joints(130.1, 45.6), bare, -0.2) is None
    assert find_at(Joints(130.1, 45.4), bare) is None
