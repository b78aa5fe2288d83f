"""Directions among the stars against astropy, with the same Earth orientation table."""

from collections.abc import Iterator

import numpy as np
import pytest
from astropy import units as u
from astropy.coordinates import AltAz, Distance, EarthLocation, SkyCoord
from astropy.time import Time
from astropy.utils import iers
from astropy_iers_data import IERS_A_FILE

from tests.published.reference_sky import EARTH, apart_arcsec
from trunnion.sky.celestial import Celestial
from trunnion.sky.direction import IcrsDirection
from trunnion.sky.instants import parse_utc
from trunnion.sky.look import FloatArray
from trunnion.sky.refraction import NoRefraction
from trunnion.sky.site import Site
from trunnion.sky.viewpoint import Viewpoint

TOLERANCE_ARCSEC = 0.02
"""0.2″ is asked. What remains is the light's path through the Sun's field and the polar motion."""

UTC_S: FloatArray = parse_utc("2003-02-04T05:06:07.8Z") + 86400.0 * 137.123 * np.arange(60.0)
SITES = (Site(52.347, 4.913, 27.4), Site(-33.871, 151.207, 61.9), Site(-89.984, -139.27, 2835.7))
DIRECTIONS = {
    "well off the pole": IcrsDirection(83.6331, 22.0145),
    "near the pole": IcrsDirection(211.371, 89.731),
    "south": IcrsDirection(350.866, -58.815),
    "near and fast": IcrsDirection(217.42895, -62.67949, -3781.74, 769.47, 768.07),
}


@pytest.fixture(autouse=True)
def same_earth_orientation() -> Iterator[None]:
    with iers.conf.set_temp("auto_download", False):  # noqa: SIM117 - one thing each
        with iers.earth_orientation_table.set(iers.IERS_A.open(IERS_A_FILE)):
            yield


def by_astropy(direction: IcrsDirection, site: Site) -> tuple[FloatArray, FloatArray]:
    """Azimuth and elevation (deg), apparent, in a vacuum."""
    times = Time(UTC_S, format="unix")
    place = EarthLocation.from_geodetic(
        site.longitude_deg * u.deg, site.latitude_deg * u.deg, site.height_m * u.m
    )
    seen = _star(direction, times).transform_to(AltAz(obstime=times, location=place))
    return seen.az.deg, seen.alt.deg


def _star(direction: IcrsDirection, times: Time) -> SkyCoord:
    place = {"ra": direction.right_ascension_deg * u.deg, "dec": direction.declination_deg * u.deg}
    if not direction.parallax_mas:
        return SkyCoord(**place)
    star = SkyCoord(
        **place,
        distance=Distance(parallax=direction.parallax_mas * u.mas),
        pm_ra_cosdec=direction.motion_ra_mas_yr * u.mas / u.yr,
        pm_dec=direction.motion_dec_mas_yr * u.mas / u.yr,
        obstime=Time("J2000.0"),
    )
    return star.apply_space_motion(new_obstime=times)


@pytest.mark.parametrize("site", SITES, ids=str)
@pytest.mark.parametrize("kind", DIRECTIONS)
def test_astropy_sees_it_in_the_same_direction(kind: str, site: Site) -> None:
    view = Viewpoint(site, EARTH, NoRefraction(), is_apparent=True)
    ours = Celestial(DIRECTIONS[kind], view).looks(UTC_S)
    theirs = by_astropy(DIRECTIONS[kind], site)
    apart = apart_arcsec((ours.azimuth_deg, ours.elevation_deg), theirs)
    assert apart.max() < TOLERANCE_ARCSEC
    assert (ours.range_km, ours.range_rate_km_s) == (None, None)


def test_leaving_the_motion_or_the_parallax_out_would_be_noticed() -> None:
    view = Viewpoint(SITES[0], EARTH, NoRefraction(), is_apparent=True)
    theirs = by_astropy(DIRECTIONS["near and fast"], SITES[0])
    for mutation in (
        IcrsDirection(217.42895, -62.67949),
        IcrsDirection(217.42895, -62.67949, -3781.74, 769.47),
    ):
        ours = Celestial(mutation, view).looks(UTC_S)
        assert apart_arcsec((ours.azimuth_deg, ours.elevation_deg), theirs).max() > 0.5
