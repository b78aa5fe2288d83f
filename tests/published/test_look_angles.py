"""Look angles of satellites against skyfield and ERFA, and published geodetic examples.

skyfield gets the Earth orientation that we use: UT1 − UTC as a constant of its time scale, and
the pole as its polar-motion table. What is compared is then the mathematics alone.
"""

from math import cos, degrees, hypot, radians
from typing import NamedTuple

import erfa
import numpy as np
import pytest
from skyfield.api import EarthSatellite, load, wgs84
from skyfield.timelib import Timescale

from trunnion.sky.earth import EarthOrientation
from trunnion.sky.elements import ElementSet, Satellite
from trunnion.sky.instants import format_utc, julian_date, parse_utc
from trunnion.sky.refraction import NoRefraction
from trunnion.sky.site import Site
from trunnion.sky.topocentric import topocentric
from trunnion.sky.viewpoint import Viewpoint

TOLERANCE_ARCSEC = 0.02
FROM_S = parse_utc("2026-12-01T03:17:41.3Z")
EARTH = EarthOrientation.packaged()
LEAP_SECONDS = load.timescale(builtin=True).leap_dates, load.timescale(builtin=True).leap_offsets


class Orbit(NamedTuple):
    """Inclination (deg), eccentricity and mean motion (1/day) of an invented satellite."""

    inclination_deg: float
    eccentricity: float
    mean_motion: float


ORBITS = {
    "very low": Orbit(96.5843, 0.0007, 15.8912),
    "low": Orbit(97.4512, 0.0011, 15.1796),
    "low and level": Orbit(7.3911, 0.0023, 14.8871),
    "low at middle latitudes": Orbit(51.6447, 0.0006, 15.4932),
    "higher": Orbit(98.6013, 0.0024, 14.2932),
    "navigation": Orbit(55.1782, 0.0081, 2.0057),
    "eccentric": Orbit(63.4312, 0.7214, 2.0061),
    "transfer": Orbit(26.8743, 0.7287, 2.2713),
    "geostationary": Orbit(0.0521, 0.0003, 1.0027),
    "inclined geosynchronous": Orbit(42.7113, 0.0751, 1.0027),
}
SITES = {
    "north": Site(52.347, 4.913, 27.4),
    "south": Site(-33.871, 151.207, 61.9),
    "equator": Site(0.0213, -51.066, 13.2),
    "north pole": Site(89.9917, 33.3, 4.1),
    "south pole": Site(-89.9843, -139.27, 2835.7),
    "east of the date line": Site(-16.781, -179.9936, 3.3),
    "west of the date line": Site(65.123, 179.9971, 411.8),
}


def geometric(site: Site) -> Viewpoint:
    return Viewpoint(site, EARTH, NoRefraction(), is_apparent=False)


def element_set(orbit: Orbit, turn: int) -> ElementSet:
    """Lines for such an orbit; `turn` spreads the other angles over the circle."""
    angles = [(37.4711 * turn + offset) % 360.0 for offset in (11.3, 123.7, 291.9)]
    first = "1 90500U 26901A   26334.75000000  .00000011  00000-0  31000-4 0  112"
    second = (
        f"2 90500 {orbit.inclination_deg:8.4f} {angles[0]:8.4f} {1e7 * orbit.eccentricity:07.0f} "
        f"{angles[1]:8.4f} {angles[2]:8.4f} {orbit.mean_motion:11.8f}    1"
    )
    line_1, line_2 = (f"{line}{_checksum(line)}" for line in (first, second))
    return ElementSet("invented", 90500, parse_utc("2026-11-30T18:00:00Z"), line_1, line_2)


def _checksum(line: str) -> int:
    return (sum(int(each) for each in line if each.isdigit()) + line.count("-")) % 10


def skyfield_look(elements: ElementSet, site: Site, utc_s: float) -> tuple[float, float, float]:
    """Azimuth, elevation (deg) and range (km) by skyfield."""
    turned, tai_minus_utc_s = EARTH.at(utc_s), EARTH.leap_seconds.at(utc_s)
    delta_t_s = tai_minus_utc_s + 32.184 - turned[0]
    timescale = Timescale(lambda tt: delta_t_s + 0.0 * tt, *LEAP_SECONDS)
    arcsec = np.degrees((turned[1], turned[2])) * 3600.0
    timescale.polar_motion_table = (
        np.array([2400000.0, 2500000.0]),
        np.full(2, arcsec[0]),
        np.full(2, arcsec[1]),
    )
    midnight, fraction = julian_date(utc_s)
    time = timescale.tai_jd(midnight, fraction + tai_minus_utc_s / 86400.0)
    station = wgs84.latlon(site.latitude_deg, site.longitude_deg, elevation_m=site.height_m)
    craft = EarthSatellite(elements.line_1, elements.line_2, ts=timescale)
    elevation, azimuth, distance = (craft - station).at(time).altaz()
    return azimuth.degrees, elevation.degrees, distance.km


def apart_arcsec(
    azimuth_1: float, elevation_1: float, azimuth_2: float, elevation_2: float
) -> float:
    """Angle on the sky between two directions that are close together."""
    across = ((azimuth_1 - azimuth_2 + 180.0) % 360.0 - 180.0) * cos(radians(elevation_1))
    return 3600.0 * hypot(across, elevation_1 - elevation_2)


@pytest.mark.parametrize("place", SITES)
@pytest.mark.parametrize("kind", ORBITS)
def test_skyfield_agrees_wherever_the_satellite_stands(kind: str, place: str) -> None:
    """Ten orbits at three turns each, from seven places: above the horizon and below."""
    site = SITES[place]
    for turn in range(3):
        elements = element_set(ORBITS[kind], turn)
        ours = Satellite(elements, geometric(site))
        for later_s in (0.0, 1234.567, 20_345.6, 86_399.9):
            utc_s = FROM_S + later_s
            look = ours.look(utc_s)
            azimuth_deg, elevation_deg, range_km = skyfield_look(elements, site, utc_s)
            apart = apart_arcsec(look.azimuth_deg, look.elevation_deg, azimuth_deg, elevation_deg)
            assert apart < TOLERANCE_ARCSEC, format_utc(utc_s)
            assert look.range_km == pytest.approx(range_km, abs=1e-3)


def test_the_orbits_are_told_apart_and_some_are_above_the_horizon() -> None:
    """So that the comparison above cannot succeed on one direction or below the ground alone."""
    looks = [
        Satellite(element_set(orbit, turn), geometric(site)).look(FROM_S)
        for orbit in ORBITS.values()
        for turn in range(3)
        for site in SITES.values()
    ]
    assert len({round(look.azimuth_deg, 3) for look in looks}) > 190
    assert sum(look.elevation_deg > 0.0 for look in looks) > 30


FULL_CHAIN = (
    ("2019-12-10T22:03:01Z", 303.308208, 6.291483, 1759.1662),
    ("2019-12-10T22:05:01Z", 302.486940, 22.385184, 955.0403),
    ("2019-12-10T22:07:01Z", 217.607011, 85.064043, 422.5380),
    ("2019-12-10T22:09:01Z", 127.844900, 22.447006, 952.1700),
    ("2019-12-10T22:11:01Z", 126.959797, 6.290711, 1756.2106),
)


@pytest.mark.parametrize(("instant", "azimuth_deg", "elevation_deg", "range_km"), FULL_CHAIN)
def test_astropy_agrees_over_an_overhead_pass(
    instant: str, azimuth_deg: float, elevation_deg: float, range_km: float
) -> None:
    """Computed with astropy 8.0.2, topocentric ITRS, its own IERS table; to the digits kept."""
    elements = ElementSet(
        "station",
        25544,
        0.0,
        "1 25544U 98067A   19343.69339541  .00001764  00000-0  38792-4 0  9991",
        "2 25544  51.6439 211.2001 0007417  17.6667  85.6398 15.50103472202482",
    )
    site = Site(42.38, -71.13, 24.0)
    look = Satellite(elements, geometric(site)).look(parse_utc(instant))
    assert look.azimuth_deg == pytest.approx(azimuth_deg, abs=1e-5)
    assert look.elevation_deg == pytest.approx(elevation_deg, abs=1e-5)
    assert look.range_km == pytest.approx(range_km, abs=1e-3)


def test_geodetic_to_earth_fixed_as_in_erfas_own_test() -> None:
    """Source: ERFA, `t_erfa_c.c`, `t_gd2gc`, WGS 84."""
    site = Site(degrees(-0.5), degrees(3.1), 2500.0)
    metres = [1000.0 * each for each in site.position_km]
    assert metres == pytest.approx(
        [-5599000.5577049947, 233011.67223479203, -3040909.4706983363], abs=1e-6
    )


def test_azimuth_and_elevation_as_in_erfas_own_test() -> None:
    """Source: ERFA, `t_erfa_c.c`, `t_hd2ae`: hour angle 1.1, declination 1.2, latitude 0.3."""
    hour_angle, declination = 1.1, 1.2
    site = Site(degrees(0.3), 0.0, 0.0)
    far_km = 1e12
    direction = erfa.s2c(-hour_angle, declination)
    position = tuple(float(each) for each in far_km * direction)
    look = topocentric(
        (position[0], position[1], position[2]),
        (0.0, 0.0, 0.0),
        geometric(site),
        with_light_time=False,
    )
    assert radians(look.azimuth_deg) == pytest.approx(5.916889243730066194, abs=1e-7)
    assert radians(look.elevation_deg) == pytest.approx(0.4472186304990486228, abs=1e-7)


def test_a_published_topocentric_example() -> None:
    """Source: Vallado, "Fundamentals of Astrodynamics and Applications", example 11-6."""
    site = Site(42.38, -71.13, 24.0)
    look = topocentric(
        (885.7296, -4389.3856, 5070.1765), (0.0, 0.0, 0.0), geometric(site), with_light_time=False
    )
    assert look.range_km == pytest.approx(1022.3143, abs=1e-3)
    assert look.azimuth_deg == pytest.approx(323.0781, abs=1e-3)
    assert look.elevation_deg == pytest.approx(18.7620, abs=1e-3)
