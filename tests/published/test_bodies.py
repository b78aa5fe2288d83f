"""Sun, Moon and planets against skyfield with the JPL ephemeris DE421, and textbook examples.

The first tolerances are the limits of the built-in series, as the user is told them; with an
ephemeris file what remains is the mathematics.
"""

import erfa
import numpy as np
import pytest

from tests.published.reference_sky import EARTH, EPHEMERIS, apart_arcsec, de421, skyfield_look
from trunnion.sky.bodies import SERIES_LIMIT_ARCSEC, SeriesBody, series_au
from trunnion.sky.celestial import Celestial
from trunnion.sky.instants import parse_utc
from trunnion.sky.look import FloatArray
from trunnion.sky.naming import Body
from trunnion.sky.place import AU_KM, Place
from trunnion.sky.refinement import ARCSEC, axes, refined
from trunnion.sky.refraction import NoRefraction
from trunnion.sky.site import Site
from trunnion.sky.spk import SpkBody
from trunnion.sky.viewpoint import Viewpoint

SITES = (Site(52.347, 4.913, 27.4), Site(-33.871, 151.207, 61.9), Site(78.92, -170.3, 138.0))

FILE_ARCSEC = 0.1
DE421_NAMES = {
    Body.MERCURY: "mercury",
    Body.VENUS: "venus",
    Body.MARS: "mars",
    Body.JUPITER: "jupiter barycenter",
    Body.SATURN: "saturn barycenter",
    Body.URANUS: "uranus barycenter",
    Body.NEPTUNE: "neptune barycenter",
}


def instants(count: int) -> FloatArray:
    """Uneven steps from 2000 to 2050."""
    return parse_utc("2000-01-02T03:04:05.6Z") + np.linspace(0.0, 1.57e9, count)


def apart_from_skyfield(place: Place, body: Body, site: Site, utc_s: FloatArray) -> float:
    ours = Celestial(place, Viewpoint(site, EARTH, NoRefraction(), is_apparent=True)).looks(utc_s)
    with de421() as ephemeris:
        name = DE421_NAMES.get(body, body.value)
        azimuth_deg, elevation_deg, _ = skyfield_look(ephemeris, name, site, utc_s)
    return float(
        apart_arcsec((ours.azimuth_deg, ours.elevation_deg), (azimuth_deg, elevation_deg)).max()
    )


@pytest.mark.parametrize("body", Body)
def test_the_series_keep_the_limits_that_the_user_is_told(body: Body) -> None:
    place = SeriesBody(body)
    assert apart_from_skyfield(place, body, SITES[0], instants(4001)) < SERIES_LIMIT_ARCSEC[body]


@pytest.mark.parametrize("site", SITES, ids=str)
@pytest.mark.parametrize("body", Body)
def test_an_ephemeris_file_gives_what_skyfield_makes_of_it(body: Body, site: Site) -> None:
    place = SpkBody(body, str(EPHEMERIS))
    assert apart_from_skyfield(place, body, site, instants(61)) < FILE_ARCSEC


def test_ranges_are_skyfields() -> None:
    utc_s = instants(25)
    view = Viewpoint(SITES[1], EARTH, NoRefraction(), is_apparent=True)
    with de421() as ephemeris:
        for body in (Body.MOON, Body.VENUS):
            ours = Celestial(SpkBody(body, str(EPHEMERIS)), view).looks(utc_s)
            _, _, range_km = skyfield_look(ephemeris, body.value, SITES[1], utc_s)
            assert ours.range_km == pytest.approx(range_km, rel=1.1e-4)


def test_the_moon_of_a_textbook_example() -> None:
    """Meeus, "Astronomical Algorithms", 2nd edition, example 47.a: 1992-04-12 0h TD.

    Right ascension 134.688470°, declination 13.768368°, 368 409.7 km; the light's travel is in
    the series' longitude, so the geometric place is compared, before it is refined.
    """
    tt_days = 2448724.5 - 2451545.0
    of_date = erfa.c2i06a(2451545.0, tt_days) @ series_au(Body.MOON, tt_days)
    x, y, z = AU_KM * of_date
    right_ascension = np.arctan2(y, x) - erfa.eo06a(2448724.5, 0.0)
    distance_km = np.linalg.norm((x, y, z))
    assert np.degrees(right_ascension) % 360.0 == pytest.approx(134.688470, abs=5e-4)
    assert np.degrees(np.arcsin(z / distance_km)) == pytest.approx(13.768368, abs=5e-4)
    assert distance_km == pytest.approx(368_409.7, abs=0.1)


def test_the_moon_refined_stays_within_what_the_textbook_allows() -> None:
    """The same example; its author gives 10″ in longitude and 4″ in latitude."""
    tt_days = 2448724.5 - 2451545.0
    series = series_au(Body.MOON, tt_days)
    off = axes(series) @ (refined(Body.MOON, series, tt_days) - series) / np.linalg.norm(series)
    along_arcsec, across_arcsec, _ = np.abs(off) / ARCSEC
    assert 0.1 < along_arcsec < 10.0
    assert 0.01 < across_arcsec < 4.0


@pytest.mark.parametrize("body", [Body.SUN, Body.MOON, Body.SATURN])
def test_scalars_and_arrays_give_the_same_numbers(body: Body) -> None:
    target = Celestial(SeriesBody(body), Viewpoint(SITES[2], EARTH, NoRefraction(), True))
    utc_s = instants(17)
    looks = target.looks(utc_s)
    for index, instant in enumerate(utc_s):
        one = target.look(float(instant))
        many = [column[index] for column in looks if column is not None]
        assert one == pytest.approx(many, rel=1e-10, abs=1e-10)


def test_rates_are_the_slopes_of_the_angles() -> None:
    target = Celestial(SeriesBody(Body.MOON), Viewpoint(SITES[0], EARTH, NoRefraction(), True))
    middle_s, step_s = parse_utc("2026-12-05T06:07:08Z"), 1.0
    before, now, after = (target.look(middle_s + each) for each in (-step_s, 0.0, step_s))
    rates = (now.azimuth_rate_deg_s, now.elevation_rate_deg_s)
    slopes = [(b - a) / (2.0 * step_s) for a, b in zip(before[:2], after[:2], strict=True)]
    assert rates == pytest.approx(slopes, abs=1e-7)
