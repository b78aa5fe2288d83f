"""Ways round a circle of the sky, for every mount."""

import pytest
from hypothesis import given
from hypothesis import strategies as st

from tests.mount.mounts import MOUNT, hinges
from trunnion.mount.clearance import Circle, Clearance
from trunnion.mount.hinges import Hinges
from trunnion.mount.joints import Joints
from trunnion.mount.mount import JointLimits, Mount
from trunnion.track.clear_box import SMALLEST_DEG, is_box_clear
from trunnion.track.transit import NoWay, transit

SUN = Circle("the Sun", 211.7, 41.3, 4.3)
CLEARANCE = Clearance(3.1, None, (), (SUN,))


@pytest.mark.parametrize(
    ("one", "other", "is_clear"),
    [
        (Joints(190.1, 41.3), Joints(230.3, 41.9), False),  # through its middle
        (Joints(190.1, 36.9), Joints(230.3, 12.3), True),  # below it
        (Joints(190.1, 37.1), Joints(230.3, 12.3), False),
        (Joints(190.1, 45.7), Joints(230.3, 80.3), True),  # above it
        (Joints(190.1, 45.5), Joints(230.3, 80.3), False),
        (Joints(205.9, 10.3), Joints(190.3, 80.3), True),  # beside it, 4.3 / cos 41.3° = 5.72°
        (Joints(206.1, 10.3), Joints(190.3, 80.3), False),
        (Joints(206.9, 44.3), Joints(190.3, 44.9), True),  # beside its upper part
        (Joints(217.5 - 360.0, 10.3), Joints(230.3 - 360.0, 80.3), True),
        (Joints(217.3 - 360.0, 10.3), Joints(230.3 - 360.0, 80.3), False),
        (Joints(0.0, 30.3), Joints(360.0, 35.9), True),  # a whole turn
        (Joints(0.0, 30.3), Joints(360.0, 37.9), False),
    ],
)
def test_what_a_box_has_of_the_circle(one: Joints, other: Joints, *, is_clear: bool) -> None:
    assert is_box_clear(one, other, MOUNT, CLEARANCE) == is_clear


@given(
    hinges,
    st.floats(-170.0, 170.0),
    st.floats(-80.0, 80.0),
    st.floats(-40.0, 40.0),
    st.floats(-30.0, 30.0),
    st.floats(0.0, 359.0),
    st.floats(-1.0, 89.0),
    st.floats(0.5, 15.0),
)
def test_no_clear_box_reaches_into_a_circle(
    turned: Hinges,
    first_deg: float,
    second_deg: float,
    wide_deg: float,
    high_deg: float,
    azimuth_deg: float,
    elevation_deg: float,
    radius_deg: float,
) -> None:
    circle = Circle("it", azimuth_deg, elevation_deg, radius_deg)
    travel = JointLimits(-400.0, 400.0, 6.3, 2.9), JointLimits(-95.0, 95.0, 4.7, 2.1)
    mount = Mount(turned, *travel, Joints(12.7, 3.3))
    one = Joints(first_deg, second_deg)
    other = Joints(first_deg + wide_deg, min(max(second_deg + high_deg, -90.0), 90.0))
    clearance = Clearance(-90.0, None, (), (circle,))
    if not is_box_clear(one, other, mount, clearance):
        return
    for step in range(81):
        first, second = step % 9 / 8.0, step // 9 / 8.0
        place = Joints(
            one.first_deg + first * (other.first_deg - one.first_deg),
            one.second_deg + second * (other.second_deg - one.second_deg),
        )
        inside_deg = circle.depth_deg(*turned.boresight(place))
        assert inside_deg <= (1e-6 if turned.is_upright else SMALLEST_DEG)


@pytest.mark.parametrize(
    "turned",
    [Hinges.azimuth_elevation(), Hinges.x_y_north_south(), Hinges.hour_angle_declination(47.1)],
)
def test_a_slew_goes_round_the_sun(turned: Hinges) -> None:
    mount = Mount(
        turned,
        JointLimits(-271.0, 268.0, 6.3, 2.9),
        JointLimits(-88.0, 91.0, 4.7, 2.1),
        Joints(12.7, 3.3),
    )
    middle, _ = turned.solutions(SUN.azimuth_deg, SUN.elevation_deg)
    middle = Joints((middle.first_deg + 180.0) % 360.0 - 180.0, middle.second_deg)
    start = Joints(middle.first_deg - 11.3, middle.second_deg)
    goal = Joints(middle.first_deg + 10.7, middle.second_deg)
    way = transit(start, goal, mount, CLEARANCE)
    assert len(way) > 1
    assert way[-1] == goal
    assert len(transit(start, goal, mount, Clearance(3.1, None))) == 1


def test_from_below_the_sun_a_way_leads_aside_and_up() -> None:
    way = transit(Joints(211.3, 30.3), Joints(212.1, 80.3), MOUNT, CLEARANCE)
    first, second, _ = way
    assert (first.second_deg, second.second_deg) == (30.3, 80.3)
    assert first.first_deg == second.first_deg
    assert abs(first.first_deg - 211.7) < 8.0  # no further aside than it must


def test_into_the_sun_leads_no_way() -> None:
    with pytest.raises(NoWay):
        transit(Joints(190.1, 41.3), Joints(210.3, 41.3), MOUNT, CLEARANCE)
