"""The Sun against a worked example, a packaged ephemeris, and ERFA step by step.

Sources: Reda and Andreas, "Solar Position Algorithm for Solar Radiation Applications",
NREL/TP-560-34302 (rev. 2008), table A5.1; skyfield with the JPL ephemeris DE421 of the
skyfield-data package; Meeus, "Astronomical Algorithms", 2nd edition, example 25.b, by way of its
recomputation with ERFA.
"""

import warnings
from math import cos, hypot, radians

import erfa
import numpy as np
import pytest
from skyfield.api import Loader, wgs84
from skyfield_data import get_skyfield_data_path

from trunnion.sky.bodies import SeriesBody
from trunnion.sky.course import course_at
from trunnion.sky.earth import EarthOrientation
from trunnion.sky.instants import julian_date, parse_utc
from trunnion.sky.leap_seconds import LeapSeconds
from trunnion.sky.naming import Body
from trunnion.sky.place import AU_KM
from trunnion.sky.refraction import NoRefraction
from trunnion.sky.site import Site
from trunnion.sky.sun import Sun
from trunnion.sky.viewpoint import Viewpoint

TOLERANCE_ARCSEC = 2.0
PLACES = ((39.742476, -105.1786, 1830.14), (-54.81, -68.31, 57.0), (78.92, 11.93, 38.0))
INSTANTS = ("1999-02-11T03:47:12Z", "2011-06-23T15:00:41Z", "2024-07-09T20:11:12Z")


def apparent(place: tuple[float, float, float], earth: EarthOrientation) -> Sun:
    return Sun(Viewpoint(Site(*place), earth, NoRefraction(), is_apparent=True))


def test_the_worked_example_of_the_solar_position_algorithm() -> None:
    """The example's clock is UT1, with TT 67 s ahead of it; so no Earth orientation is used."""
    ut1_s = parse_utc("2003-10-17T19:30:30Z")
    leap_seconds = LeapSeconds((0.0,), (67.0 - 32.184,), float("inf"))
    earth = EarthOrientation("none", leap_seconds)
    look = apparent((39.742476, -105.1786, 1830.14), earth).look(ut1_s)
    assert look.azimuth_deg == pytest.approx(194.34024, abs=3e-4)
    assert look.elevation_deg == pytest.approx(39.872046, abs=3e-4)


@pytest.mark.parametrize("place", PLACES)
@pytest.mark.parametrize("instant", INSTANTS)
def test_skyfield_and_its_ephemeris_agree(place: tuple[float, float, float], instant: str) -> None:
    earth = EarthOrientation.packaged()
    utc_s = parse_utc(instant)
    ours = apparent(place, earth).look(utc_s)
    with warnings.catch_warnings():
        warnings.simplefilter("ignore")  # of an expired table that is not used here
        load = Loader(get_skyfield_data_path(), verbose=False)
        ephemeris, timescale = load("de421.bsp"), load.timescale(builtin=True)
    day, fraction = julian_date(utc_s)
    time = timescale.tai_jd(day, fraction + earth.leap_seconds.at(utc_s) / 86400.0)
    latitude_deg, longitude_deg, height_m = place
    station = ephemeris["earth"] + wgs84.latlon(latitude_deg, longitude_deg, elevation_m=height_m)
    elevation, azimuth, distance = station.at(time).observe(ephemeris["sun"]).apparent().altaz()
    turn_deg = (ours.azimuth_deg - azimuth.degrees + 180.0) % 360.0 - 180.0
    across_deg = turn_deg * cos(radians(ours.elevation_deg))
    apart_arcsec = 3600.0 * hypot(across_deg, ours.elevation_deg - elevation.degrees)
    assert apart_arcsec < TOLERANCE_ARCSEC
    assert ours.range_km == pytest.approx(distance.km, abs=300.0)
    ephemeris.close()


def test_right_ascension_and_declination_of_a_textbook_example() -> None:
    """1992-10-13 0h TD: 13h13m30.7526s, −7°47′01.721″ by ERFA; the book's 30.749 s, 01.74″."""
    tt_days = 2448908.5 - 2451545.0
    (x, y, z), _ = course_at(SeriesBody(Body.SUN), tt_days, is_apparent=True)
    right_ascension = np.arctan2(y, x) - erfa.eo06a(2448908.5, 0.0)
    assert np.degrees(right_ascension) % 360.0 == pytest.approx(
        15.0 * (13 + 13 / 60 + 30.7526 / 3600), abs=0.01 / 3600
    )
    assert np.degrees(np.arctan2(z, hypot(x, y))) == pytest.approx(
        -(7 + 47 / 60 + 1.721 / 3600), abs=0.01 / 3600
    )


def test_the_curve_between_noon_and_midnight_keeps_to_the_theory() -> None:
    """0.01″ is asked; the geometric direction by ERFA at crooked instants."""
    for tt_days in (-2345.6789, 1234.0987, 9876.26):
        position_km, _ = course_at(SeriesBody(Body.SUN), tt_days, is_apparent=False)
        heliocentric, _ = erfa.epv00(2451545.0, tt_days)
        theory_km = -AU_KM * erfa.c2i06a(2451545.0, tt_days) @ heliocentric["p"]
        apart = np.linalg.norm(position_km - theory_km) / AU_KM
        assert np.degrees(apart) * 3600.0 < 0.001
