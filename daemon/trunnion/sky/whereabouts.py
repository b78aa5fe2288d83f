"""From look angles back to a place: where a target is, not where it is seen."""

from math import cos, radians, sin

import numpy as np

from trunnion.sky.errors import SkyError
from trunnion.sky.look import FloatArray, Look, Looks
from trunnion.sky.site import Site, Vector


def earth_fixed_km(look: Look, site: Site) -> Vector | None:
    """Earth-fixed position (km) of a target seen there, nothing corrected; None without a range."""
    if look.range_km is None:
        return None
    azimuth, elevation = radians(look.azimuth_deg), radians(look.elevation_deg)
    level = look.range_km * cos(elevation)
    east, north, up = level * sin(azimuth), level * cos(azimuth), look.range_km * sin(elevation)
    x, y, z = (
        s + east * e + north * n + up * u
        for s, e, n, u in zip(site.position_km, site.east, site.north, site.up, strict=True)
    )
    return x, y, z


def directions(looks: Looks) -> FloatArray:
    """Unit vectors east, north, up; shape (3, n)."""
    azimuth, elevation = np.radians(looks.azimuth_deg), np.radians(looks.elevation_deg)
    level = np.cos(elevation)
    return np.stack((level * np.sin(azimuth), level * np.cos(azimuth), np.sin(elevation)))


def earth_fixed_many_km(looks: Looks, site: Site) -> FloatArray:
    """The same for many instants, shape (3, n); raises SkyError for targets without a range."""
    axes = np.array((site.east, site.north, site.up))
    if looks.range_km is None:
        raise SkyError("expected targets at a known distance")
    seen_km = directions(looks) * looks.range_km
    return np.array(site.position_km)[:, np.newaxis] + axes.T @ seen_km
