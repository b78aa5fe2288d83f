"""Light time and aberration by the Earth's rotation, against ERFA's aberration in a frame at rest.

There the light's way is straight: from where the satellite was to where the station is, turned
towards the station's motion (`erfa.ab`: the full relativistic formula of the IAU's SOFA). The
Earth-fixed frame, in which look angles are computed, turns while the light is on its way.
"""

from math import cos, degrees, pi, sin

import erfa
import numpy as np
import pytest

from trunnion.sky.earth import EarthOrientation
from trunnion.sky.earth_fixed import EARTH_RATE_RAD_S
from trunnion.sky.look import FloatArray
from trunnion.sky.refraction import NoRefraction
from trunnion.sky.site import Site, Vector
from trunnion.sky.topocentric import LIGHT_KM_S, topocentric, topocentric_many
from trunnion.sky.viewpoint import Viewpoint

TOLERANCE_ARCSEC = 0.001
FAR_FROM_THE_SUN_AU = 1e9
SITE = Site(-23.457, 47.813, 1234.5)
VIEW = Viewpoint(SITE, EarthOrientation.none(), NoRefraction(), is_apparent=True)
ORBITS = {"low": 6913.7, "navigation": 26_561.9, "geostationary": 42_164.2}


def turned(angle: float, vector: FloatArray) -> FloatArray:
    """The vector's coordinates on axes that are turned about the third by this angle."""
    c, s = cos(angle), sin(angle)
    matrix = np.array([[c, s, 0.0], [-s, c, 0.0], [0.0, 0.0, 1.0]])
    product: FloatArray = matrix @ vector
    return product


def at_rest(radius_km: float, second: float) -> FloatArray:
    """A circular orbit, inclined by 0.6 rad, in the frame at rest."""
    angle = 1.1 + second * (398_600.4418 / radius_km**3) ** 0.5
    return radius_km * np.array([cos(angle), sin(angle) * cos(0.6), sin(angle) * sin(0.6)])


def earth_fixed_state(radius_km: float) -> tuple[Vector, Vector]:
    """Its state now, on the axes that turn and coincide with the others at this instant."""
    step = 0.01
    before, now, after = (
        turned(EARTH_RATE_RAD_S * each, at_rest(radius_km, each)) for each in (-step, 0.0, step)
    )
    x, y, z = (float(each) for each in now)
    vx, vy, vz = (float(each) for each in (after - before) / (2.0 * step))
    return (x, y, z), (vx, vy, vz)


def seen_by_erfa(radius_km: float) -> FloatArray:
    """Unit vector to where the satellite is seen."""
    station_km = np.array(SITE.position_km)
    velocity_c = EARTH_RATE_RAD_S * np.array([-station_km[1], station_km[0], 0.0]) / LIGHT_KM_S
    travel_s = 0.0
    for _ in range(5):
        way_km = at_rest(radius_km, -travel_s) - station_km
        travel_s = float(np.linalg.norm(way_km)) / LIGHT_KM_S
    natural = way_km / np.linalg.norm(way_km)
    slowness = (1.0 - velocity_c @ velocity_c) ** 0.5
    seen: FloatArray = erfa.ab(natural, velocity_c, FAR_FROM_THE_SUN_AU, slowness)
    return seen


def unit(azimuth_deg: float, elevation_deg: float) -> FloatArray:
    a, e = np.radians((azimuth_deg, elevation_deg))
    east, north, up = (np.array(each) for each in (SITE.east, SITE.north, SITE.up))
    direction: FloatArray = cos(e) * (sin(a) * east + cos(a) * north) + sin(e) * up
    return direction


@pytest.mark.parametrize("radius_km", ORBITS.values(), ids=ORBITS)
def test_apparent_direction(radius_km: float) -> None:
    look = topocentric(*earth_fixed_state(radius_km), VIEW, with_light_time=True)
    ours = unit(look.azimuth_deg, look.elevation_deg)
    apart = degrees(float(np.linalg.norm(ours - seen_by_erfa(radius_km)))) * 3600.0
    assert apart < TOLERANCE_ARCSEC


@pytest.mark.parametrize("radius_km", ORBITS.values(), ids=ORBITS)
def test_the_difference_to_the_straight_line_of_one_instant_is_no_trifle(radius_km: float) -> None:
    look = topocentric(*earth_fixed_state(radius_km), VIEW, with_light_time=False)
    straight = unit(look.azimuth_deg, look.elevation_deg)
    apart = degrees(float(np.linalg.norm(straight - seen_by_erfa(radius_km)))) * 3600.0
    assert apart > 1.0


@pytest.mark.parametrize("is_apparent", [False, True])
def test_arrays_give_the_same_numbers(*, is_apparent: bool) -> None:
    position_km, velocity_km_s = earth_fixed_state(26_561.9)
    one = topocentric(position_km, velocity_km_s, VIEW, with_light_time=is_apparent)
    many = topocentric_many(
        np.array([position_km]).T, np.array([velocity_km_s]).T, VIEW, with_light_time=is_apparent
    )
    for single, array in zip(one, many, strict=True):
        assert array is not None
        assert array[0] == pytest.approx(single, rel=1e-13, abs=1e-13)


def test_the_axes_turn_once_a_sidereal_day() -> None:
    assert 2.0 * pi / EARTH_RATE_RAD_S == pytest.approx(86_164.1, abs=0.1)
