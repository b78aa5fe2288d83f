"""Joint angles and rates against published formulas, worked values and ERFA."""

from math import acos, asin, cos, degrees, radians

import erfa
import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from tests.track.skies import Overflight
from trunnion.mount.hinges import Hinges
from trunnion.mount.joints import Joints

LATITUDE_DEG = 47.3


@given(st.floats(-179.0, 179.0), st.floats(-89.0, 89.0), st.floats(-89.0, 89.0))
def test_hour_angle_and_declination_point_where_erfa_says(
    hour_angle_deg: float, declination_deg: float, latitude_deg: float
) -> None:
    """`erfa.hd2ae`, the hour-angle conversion of SOFA/ERFA."""
    azimuth, elevation = erfa.hd2ae(
        *(radians(each) for each in (hour_angle_deg, declination_deg, latitude_deg))
    )
    hinges = Hinges.hour_angle_declination(latitude_deg)
    boresight = hinges.boresight(Joints(hour_angle_deg, declination_deg))
    assert boresight[1] == pytest.approx(degrees(elevation), abs=1e-9)
    if abs(boresight[1]) < 89.99:
        turn_deg = (boresight[0] - degrees(azimuth) + 180.0) % 360.0 - 180.0
        assert turn_deg == pytest.approx(0.0, abs=1e-9)


@given(st.floats(0.0, 359.9), st.floats(1.0, 89.0), st.floats(-89.0, 89.0))
def test_azimuth_and_elevation_become_what_erfa_says(
    azimuth_deg: float, elevation_deg: float, latitude_deg: float
) -> None:
    """`erfa.ae2hd`, the way back."""
    hour_angle, declination = erfa.ae2hd(
        *(radians(each) for each in (azimuth_deg, elevation_deg, latitude_deg))
    )
    plain, _ = Hinges.hour_angle_declination(latitude_deg).solutions(azimuth_deg, elevation_deg)
    assert plain.second_deg == pytest.approx(degrees(declination), abs=1e-9)
    if abs(plain.second_deg) < 89.99:
        turn_deg = (plain.first_deg - degrees(hour_angle) + 180.0) % 360.0 - 180.0
        assert turn_deg == pytest.approx(0.0, abs=1e-9)


def test_erfa_s_own_worked_values() -> None:
    """The values of ERFA's test program t_erfa_c.c for hd2ae and ae2hd."""
    ahead = Hinges.hour_angle_declination(degrees(0.3))
    azimuth_deg, elevation_deg = ahead.boresight(Joints(degrees(1.1), degrees(1.2)))
    assert radians(azimuth_deg) == pytest.approx(5.916889243730066194, abs=1e-13)
    assert radians(elevation_deg) == pytest.approx(0.4472186304990486228, abs=1e-13)
    back, _ = Hinges.hour_angle_declination(degrees(0.7)).solutions(degrees(5.5), degrees(1.1))
    assert radians(back.first_deg) == pytest.approx(0.5933291115507309663, abs=1e-13)
    assert radians(back.second_deg) == pytest.approx(0.9613934761647817620, abs=1e-13)


@pytest.mark.parametrize(
    ("direction", "x_y"),
    [
        ((90.0, 45.0), (45.0, 0.0)),
        ((0.0, 30.0), (0.0, 60.0)),
        ((45.0, 45.0), (35.2644, 30.0)),
        ((270.0, 10.0), (-80.0, 0.0)),
        ((180.0, 5.0), (0.0, -85.0)),
    ],
)
def test_x_and_y_of_a_mount_with_its_lower_axis_north_south(
    direction: tuple[float, float], x_y: tuple[float, float]
) -> None:
    """X = atan2(east, up), Y = asin(north): the usual definition of X–Y angles (CCSDS 503.0, XEYN).

    The values were computed from it.
    """
    plain, _ = Hinges.x_y_north_south().solutions(*direction)
    assert (plain.first_deg + 180.0) % 360.0 - 180.0 == pytest.approx(x_y[0], abs=1e-4)
    assert plain.second_deg == pytest.approx(x_y[1], abs=1e-4)


@given(st.floats(0.0, 359.9), st.floats(1.0, 89.0))
def test_the_other_x_y_mount_is_the_same_one_turned(
    azimuth_deg: float, elevation_deg: float
) -> None:
    """X = atan2(north, up), Y = asin(east) (CCSDS 503.0, XSYE, with the sign of X turned north)."""
    plain, _ = Hinges.x_y_east_west().solutions(azimuth_deg, elevation_deg)
    azimuth, elevation = radians(azimuth_deg), radians(elevation_deg)
    north, east = cos(elevation) * np.cos(azimuth), cos(elevation) * np.sin(azimuth)
    x_deg = degrees(np.arctan2(north, np.sin(elevation)))
    assert (plain.first_deg - x_deg + 180.0) % 360.0 == pytest.approx(180.0, abs=1e-7)
    assert plain.second_deg == pytest.approx(degrees(asin(east)), abs=1e-7)


def test_the_azimuth_rate_at_culmination_is_the_sky_s_over_the_cosine_of_elevation() -> None:
    """azimuth rate = v / (d cos elevation), v and d speed and distance at culmination.

    The keyhole formula in use for azimuth–elevation mounts, highest elevation = arccos(sky rate /
    azimuth rate), as in a note of the National Radio Astronomy Observatory.
    """
    target = Overflight(83.1)
    look = target.look(target.culmination_s)
    assert look.range_km is not None
    speed_km_s = np.sqrt(398600.4418 / 6871.0)
    sky_rate = degrees(speed_km_s / look.range_km)
    azimuth_rate = abs(look.azimuth_rate_deg_s)
    assert azimuth_rate == pytest.approx(sky_rate / cos(radians(83.1)), rel=1e-6)
    limit_deg = degrees(acos(sky_rate / azimuth_rate))
    assert limit_deg == pytest.approx(83.1, abs=1e-6)


@pytest.mark.parametrize("azimuth_deg", [0.0, 37.1, 211.9])
def test_an_x_y_mount_passes_the_zenith_evenly_and_is_fast_at_the_ends_of_its_lower_axis(
    azimuth_deg: float,
) -> None:
    """X rate = rate across / cos Y: the keyhole lies on the horizon, not at the zenith."""
    hinges = Hinges.x_y_north_south()
    at_zenith = hinges.motion(azimuth_deg, 89.9, 0.0, 0.9)
    assert abs(at_zenith.first_rate_deg_s) <= 0.9 + 1e-6
    assert abs(at_zenith.second_rate_deg_s) <= 0.9 + 1e-6
    low = hinges.motion(90.0 - 80.0, 0.0, 0.0, 0.9)  # Y is 80°, the motion straight up
    assert low.second_deg == pytest.approx(80.0)
    assert abs(low.first_rate_deg_s) == pytest.approx(0.9 / cos(radians(80.0)))
