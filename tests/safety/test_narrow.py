"""Obstacles that are narrow: the way is looked at all along, whatever the mount."""

from dataclasses import replace

from hypothesis import given
from hypothesis import strategies as st

from tests.mount.mounts import MOUNT, hinges
from tests.safety.bench_mount import LIMITS, MAST
from trunnion.mount.clearance import Clearance, Sector
from trunnion.mount.hinges import Hinges
from trunnion.mount.horizon import HorizonMask
from trunnion.mount.joints import Joints, Motion
from trunnion.mount.mount import JointLimits, Mount
from trunnion.safety.limits import SafetyLimits
from trunnion.safety.places import (
    FINEST_DEG,
    depth_deg,
    find_at,
    find_on_the_way,
    find_while_stopping,
    has_room,
)

WIDE = replace(MOUNT, first=JointLimits(-400.0, 400.0, 6.3, 2.9))
POLE = Clearance(5.3, None, (Sector("the pole", 144.13, 144.16, 1.1, 27.9),))


def test_a_pole_three_hundredths_wide_is_not_stepped_over() -> None:
    limits = replace(LIMITS, clearance=POLE)
    for step in range(60):
        begin = Joints(143.0 + 0.017 * step, 20.3)
        assert find_on_the_way(begin, Joints(144.2 + 0.011 * step, 20.4), limits) is not None
        rate_deg_s = 2.7 + 0.03 * step
        assert find_while_stopping(Motion(143.9, 20.3, rate_deg_s, 0.1), limits) is not None


def test_a_short_step_across_it_is_seen_too() -> None:
    limits = replace(LIMITS, clearance=POLE)
    assert find_on_the_way(Joints(144.12, 20.3), Joints(144.17, 20.3), limits) is not None
    assert find_while_stopping(Motion(144.12, 20.3, 0.5, 0.0), limits) is not None
    assert find_while_stopping(Motion(144.15, 20.3, 0.5, 0.0), limits) is not None
    assert find_while_stopping(Motion(144.17, 20.3, 0.5, 0.0), limits) is None


def test_a_spike_of_the_mask_is_not_stepped_over() -> None:
    points = ((17.3, 6.1), (144.13, 6.1), (144.13, 24.7), (144.17, 24.7), (144.17, 6.1))
    limits = replace(LIMITS, clearance=Clearance(5.3, HorizonMask(points)))
    for step in range(40):
        begin = Joints(139.0 + 0.017 * step, 20.3)
        assert find_on_the_way(begin, Joints(149.1, 20.4), limits) is not None
    assert find_on_the_way(Joints(139.1, 24.8), Joints(149.1, 24.8), limits) is None


def limits_with(turned: Hinges, sector: Sector) -> SafetyLimits:
    mount = Mount(
        turned, replace(WIDE.first, lower_deg=-400.0), JointLimits(-95.0, 95.0, 4.7, 2.1), WIDE.stow
    )
    return SafetyLimits(mount, Clearance(-90.0, None, (sector,)), transmit_floor_deg=3.0)


def narrow(turned: Hinges, place: Joints, width_deg: float) -> Sector | None:
    """A sector about this place, as narrow as that; none where azimuths are no measure."""
    azimuth_deg, elevation_deg = turned.boresight(place)
    if abs(elevation_deg) > 60.0:
        return None
    return Sector(
        "the pole",
        (azimuth_deg - 0.4 * width_deg) % 360.0,
        (azimuth_deg + 0.6 * width_deg) % 360.0,
        elevation_deg - 7.3,
        elevation_deg + 6.1,
    )


angles = st.floats(-170.0, 170.0)
lengths = st.floats(-9.0, 9.0)
widths = st.floats(0.1, 0.4)


@given(hinges, angles, st.floats(-80.0, 80.0), lengths, lengths, st.floats(0.1, 0.9), widths)
def test_what_stands_on_the_way_is_found_by_every_mount(
    turned: Hinges,
    first_deg: float,
    second_deg: float,
    long_deg: float,
    high_deg: float,
    share: float,
    width_deg: float,
) -> None:
    def way(share: float) -> Joints:
        return Joints(first_deg + share * long_deg, second_deg + share * high_deg)

    sector = narrow(turned, way(share), width_deg)
    if sector is None:
        return
    limits = limits_with(turned, sector)
    begin, end = way(0.0), way(1.0)
    if find_at(begin, limits) is not None:
        return
    deepest_deg = max(depth_deg(way(step / 400.0), limits) for step in range(401))
    if find_on_the_way(begin, end, limits) is None:
        assert deepest_deg <= FINEST_DEG


@given(hinges, angles, st.floats(-70.0, 70.0), st.floats(-6.3, 6.3), st.floats(-4.7, 4.7), widths)
def test_what_stands_in_the_way_of_stopping_is_found_by_every_mount(
    turned: Hinges,
    first_deg: float,
    second_deg: float,
    first_deg_s: float,
    second_deg_s: float,
    width_deg: float,
) -> None:
    motion = Motion(first_deg, second_deg, first_deg_s, second_deg_s)
    half_s = 0.5

    def braked(deg: float, rate: float, joint: JointLimits) -> float:
        slowing = 0.8 * joint.acceleration_deg_s2
        braking_s = min(half_s, abs(rate) / slowing)
        sign = 1.0 if rate > 0.0 else -1.0
        return deg + rate * braking_s - 0.5 * sign * slowing * braking_s**2

    first, second = JointLimits(-400.0, 400.0, 6.3, 2.9), JointLimits(-95.0, 95.0, 4.7, 2.1)
    later = Joints(braked(first_deg, first_deg_s, first), braked(second_deg, second_deg_s, second))
    sector = narrow(turned, later, width_deg)
    if sector is None:
        return
    limits = limits_with(turned, sector)
    if depth_deg(later, limits) > FINEST_DEG:
        assert find_while_stopping(motion, limits) is not None


def test_what_stands_behind_is_not_in_the_way() -> None:
    limits = replace(LIMITS, clearance=POLE)
    assert find_on_the_way(Joints(144.18, 20.3), Joints(149.1, 20.4), limits) is None
    assert find_while_stopping(Motion(144.18, 20.3, 4.9, 0.0), limits) is None


def test_what_stands_near_the_begin_of_a_stop_is_in_the_way() -> None:
    limits = replace(LIMITS, clearance=POLE)
    assert find_while_stopping(Motion(143.9, 20.3, 5.9, 0.0), limits) is not None


def test_a_way_that_begins_where_it_may_not_has_a_quarter_of_a_degree_to_leave() -> None:
    """The mast ends at 146.9."""
    for begin_deg, is_free in ((146.67, True), (146.63, False)):
        found = find_on_the_way(Joints(begin_deg, 20.3), Joints(149.1, 20.3), LIMITS)
        assert (found is None) == is_free
    through = Clearance(5.3, None, (MAST, Sector("the pole", 149.0, 149.03, 1.1, 27.9)))
    limits = replace(LIMITS, clearance=through)
    assert find_on_the_way(Joints(146.7, 20.3), Joints(149.1, 20.3), limits) is not None
    assert find_on_the_way(Joints(146.7, 20.3), Joints(148.9, 20.3), limits) is None


def test_a_degree_of_room_on_every_side() -> None:
    for place in (
        Joints(-270.0, 41.3),
        Joints(267.0, 41.3),
        Joints(201.7, 90.0),
        Joints(201.7, 41.3),
    ):
        assert has_room(place, LIMITS)
    limits = replace(LIMITS, clearance=Clearance(-3.0, None))
    assert has_room(Joints(201.7, 2.5), limits)
    for place in (
        Joints(-270.01, 41.3),
        Joints(267.01, 41.3),
        Joints(201.7, 90.01),
        Joints(201.7, 2.49),
    ):
        assert not has_room(place, limits)
    assert not has_room(Joints(144.1, 28.89), LIMITS)
    assert has_room(Joints(144.1, 28.91), LIMITS)
