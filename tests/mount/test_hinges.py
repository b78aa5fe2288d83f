"""Two hinges: directions to joints and back, for every direction of the first axis."""

from math import cos, radians

import pytest
from hypothesis import assume, given
from hypothesis import strategies as st

from tests.mount.mounts import azimuths, elevations, hinges
from trunnion.mount.hinges import Hinges
from trunnion.mount.joints import Joints
from trunnion.mount.sphere import separation_deg

ROUNDING_DEG = 1e-9


@given(hinges, azimuths, elevations, st.integers(-2, 2))
def test_both_solutions_point_back_there(
    mount: Hinges, azimuth_deg: float, elevation_deg: float, turns: int
) -> None:
    for joints in mount.solutions(azimuth_deg, elevation_deg):
        turned = Joints(joints.first_deg + 360.0 * turns, joints.second_deg)
        boresight = mount.boresight(turned)
        assert separation_deg(azimuth_deg, elevation_deg, *boresight) < ROUNDING_DEG


@given(hinges, azimuths, elevations)
def test_the_solutions_are_half_a_turn_apart_and_principal(
    mount: Hinges, azimuth_deg: float, elevation_deg: float
) -> None:
    plain, tipped = mount.solutions(azimuth_deg, elevation_deg)
    assert -90.0 <= plain.second_deg <= 90.0
    assert 0.0 <= plain.first_deg < 360.0
    assert 0.0 <= tipped.first_deg < 360.0
    assert abs(abs(tipped.first_deg - plain.first_deg) - 180.0) < ROUNDING_DEG
    assert tipped.second_deg == 180.0 - plain.second_deg


@given(hinges)
def test_along_the_first_axis_the_boresight_is_exact(mount: Hinges) -> None:
    axis = (mount.axis_azimuth_deg, mount.axis_elevation_deg)
    for joints in mount.solutions(*axis):
        assert separation_deg(*axis, *mount.boresight(joints)) < 1e-6


@given(hinges, azimuths, elevations, st.floats(-2.0, 2.0), st.floats(-2.0, 2.0), st.booleans())
def test_rates_are_the_derivatives_of_the_joints(
    mount: Hinges,
    azimuth_deg: float,
    elevation_deg: float,
    azimuth_rate: float,
    elevation_rate: float,
    is_tipped: bool,
) -> None:
    step_s = 1e-4
    distance_deg = separation_deg(
        azimuth_deg, elevation_deg, mount.axis_azimuth_deg, mount.axis_elevation_deg
    )
    assume(3.0 < distance_deg < 177.0)
    motion = mount.motion(
        azimuth_deg, elevation_deg, azimuth_rate, elevation_rate, is_tipped=is_tipped
    )
    before, after = (
        mount.solutions(azimuth_deg + azimuth_rate * dt_s, elevation_deg + elevation_rate * dt_s)[
            is_tipped
        ]
        for dt_s in (-step_s, step_s)
    )
    first_change_deg = (after.first_deg - before.first_deg + 180.0) % 360.0 - 180.0
    assert motion.first_rate_deg_s == pytest.approx(first_change_deg / 2e-4, abs=2e-3)
    assert motion.second_rate_deg_s == pytest.approx(
        (after.second_deg - before.second_deg) / 2e-4, abs=2e-3
    )


@given(st.floats(-719.0, 719.0), st.floats(-359.0, 359.0))
def test_an_upright_mount_needs_no_rotation_and_agrees_with_one(
    first_deg: float, second_deg: float
) -> None:
    almost = Hinges(0.0, 90.0 - 1e-8, is_clockwise=True)
    joints = Joints(first_deg, second_deg)
    one = Hinges.azimuth_elevation().boresight(joints)
    other = almost.boresight(Joints(first_deg + 180.0, second_deg))
    assert separation_deg(*one, *other) < 1e-6


def test_an_upright_mount_keeps_angles_to_the_last_digit() -> None:
    assert Hinges.azimuth_elevation().boresight(Joints(-17.1, 5.3)) == (342.9, 5.3)
    assert Hinges.azimuth_elevation().boresight(Joints(20.5, 171.25)) == (200.5, 8.75)


def test_azimuth_rate_at_culmination_is_the_sky_rate_over_the_cosine() -> None:
    motion = Hinges.azimuth_elevation().motion(91.7, 63.1, 1.3 / cos(radians(63.1)), 0.0)
    assert motion.first_rate_deg_s * cos(radians(63.1)) == pytest.approx(1.3)
