"""skyfield with its packaged JPL ephemeris DE421, given the Earth orientation that we use.

What is compared is then the theories and the mathematics, not two tables of UT1.
"""

from collections.abc import Iterator
from contextlib import contextmanager
from importlib.util import find_spec
from pathlib import Path
from typing import Any

import numpy as np
from skyfield.api import Loader, load, wgs84
from skyfield.timelib import Timescale

from trunnion.sky.earth import EarthOrientation
from trunnion.sky.look import FloatArray
from trunnion.sky.site import Site

_PACKAGE = find_spec("skyfield_data")
if _PACKAGE is None or _PACKAGE.origin is None:
    raise ImportError("skyfield_data")
EPHEMERIS = Path(_PACKAGE.origin).parent / "data" / "de421.bsp"
"""Found without importing the package, which warns of a table in it that is not used here."""
EARTH = EarthOrientation.packaged()


@contextmanager
def de421() -> Iterator[Any]:
    """The ephemeris, closed afterwards."""
    ephemeris = Loader(str(EPHEMERIS.parent), verbose=False)(EPHEMERIS.name)
    try:
        yield ephemeris
    finally:
        ephemeris.close()


def skyfield_time(utc_s: FloatArray) -> Any:
    """skyfield's time for UTC instants (in order), with our UT1 and our pole."""
    builtin = load.timescale(builtin=True)
    tai_minus_utc_s = EARTH.leap_seconds.at_many(utc_s)
    ut1_minus_utc_s, pole_x, pole_y = EARTH.at_many(utc_s)
    timescale = Timescale(
        lambda _: tai_minus_utc_s + 32.184 - ut1_minus_utc_s,
        builtin.leap_dates,
        builtin.leap_offsets,
    )
    days = np.floor(utc_s / 86400.0)
    fraction = utc_s / 86400.0 - days
    time = timescale.tai_jd(2440587.5 + days, fraction + tai_minus_utc_s / 86400.0)
    arcsec = np.degrees((pole_x, pole_y)) * 3600.0
    timescale.polar_motion_table = (time.tt, *arcsec)
    return time


def skyfield_look(
    ephemeris: Any, name: str, site: Site, utc_s: FloatArray
) -> tuple[FloatArray, FloatArray, FloatArray]:
    """Apparent azimuth and elevation (deg) without refraction, and distance (km)."""
    height_m = site.height_m
    place = wgs84.latlon(site.latitude_deg, site.longitude_deg, elevation_m=height_m)
    station = ephemeris["earth"] + place
    seen = station.at(skyfield_time(utc_s)).observe(ephemeris[name]).apparent()
    elevation, azimuth, distance = seen.altaz()
    return azimuth.degrees, elevation.degrees, distance.km


def unit_vectors(azimuth_deg: FloatArray, elevation_deg: FloatArray) -> FloatArray:
    """East, north, up; shape (n, 3)."""
    azimuth, elevation = np.radians(azimuth_deg), np.radians(elevation_deg)
    level = np.cos(elevation)
    return np.stack((level * np.sin(azimuth), level * np.cos(azimuth), np.sin(elevation)), axis=-1)


def apart_arcsec(
    first: tuple[FloatArray, FloatArray], second: tuple[FloatArray, FloatArray]
) -> FloatArray:
    """Angles on the sky between directions (azimuth, elevation) that are close together."""
    chord = np.linalg.norm(unit_vectors(*first) - unit_vectors(*second), axis=-1)
    arcsec: FloatArray = np.degrees(chord) * 3600.0
    return arcsec
