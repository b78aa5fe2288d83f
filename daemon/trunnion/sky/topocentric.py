"""From an Earth-fixed position and velocity to azimuth, elevation, range, and their rates.

Apparent look angles are those of where the target was when its signal left. In the station's own,
Earth-fixed frame that step holds the aberration by the Earth's rotation too, but for one thing: the
frame turns while the light is on its way, which bends the way by that turn.
"""

from math import atan2, degrees, sqrt

import numpy as np

from trunnion.sky.earth_fixed import EARTH_RATE_RAD_S
from trunnion.sky.look import FloatArray, Look, Looks
from trunnion.sky.site import Vector
from trunnion.sky.viewpoint import Viewpoint

LIGHT_KM_S = 299_792.458

ZENITH_KM2 = 1e-18
"""Closer to the zenith (squared level distance) azimuth has no rate worth the name."""

DEG = degrees(1.0)


def topocentric(
    position_km: Vector, velocity_km_s: Vector, view: Viewpoint, *, with_light_time: bool
) -> Look:
    """Look angles of an Earth-fixed position (km) that moves with this velocity (km/s).

    `with_light_time` looks back to where the target was when its signal left.
    """
    site = view.site
    sx, sy, sz = site.position_km
    x, y, z = position_km
    vx, vy, vz = velocity_km_s
    x, y, z = x - sx, y - sy, z - sz
    if with_light_time:
        travel_s = sqrt(x * x + y * y + z * z) / LIGHT_KM_S
        turn = EARTH_RATE_RAD_S * travel_s
        x, y, z = x - vx * travel_s, y - vy * travel_s, z - vz * travel_s
        x, y = x + turn * y, y - turn * x
    ex, ey, _ = site.east
    nx, ny, nz = site.north
    ux, uy, uz = site.up
    east, north, up = ex * x + ey * y, nx * x + ny * y + nz * z, ux * x + uy * y + uz * z
    v_east, v_north = ex * vx + ey * vy, nx * vx + ny * vy + nz * vz
    v_up = ux * vx + uy * vy + uz * vz
    level2 = max(east * east + north * north, ZENITH_KM2)
    level = sqrt(level2)
    range_km = sqrt(level2 + up * up)
    range_rate = (east * v_east + north * v_north + up * v_up) / range_km
    seen_deg, slope = view.refraction.seen(atan2(up, level) * DEG)
    return Look(
        atan2(east, north) * DEG % 360.0 % 360.0,  # what rounds up to 360 is 0
        seen_deg,
        range_km,
        (v_east * north - v_north * east) / level2 * DEG,
        (v_up - range_rate * up / range_km) / level * slope * DEG,
        range_rate,
    )


def topocentric_many(
    position_km: FloatArray, velocity_km_s: FloatArray, view: Viewpoint, *, with_light_time: bool
) -> Looks:
    """The same for arrays of shape (3, n)."""
    site = view.site
    axes = np.array((site.east, site.north, site.up))
    relative_km = position_km - np.array(site.position_km)[:, np.newaxis]
    if with_light_time:
        travel_s = np.sqrt(np.einsum("in,in->n", relative_km, relative_km)) / LIGHT_KM_S
        turn = EARTH_RATE_RAD_S * travel_s
        x, y, z = relative_km - velocity_km_s * travel_s
        relative_km = np.stack((x + turn * y, y - turn * x, z))
    east, north, up = axes @ relative_km
    v_east, v_north, v_up = axes @ velocity_km_s
    level2 = np.maximum(east * east + north * north, ZENITH_KM2)
    level = np.sqrt(level2)
    range_km = np.sqrt(level2 + up * up)
    range_rate = (east * v_east + north * v_north + up * v_up) / range_km
    seen_deg, slope = view.refraction.seen_many(np.degrees(np.arctan2(up, level)))
    return Looks(
        np.degrees(np.arctan2(east, north)) % 360.0 % 360.0,
        seen_deg,
        range_km,
        np.degrees((v_east * north - v_north * east) / level2),
        np.degrees((v_up - range_rate * up / range_km) / level) * slope,
        range_rate,
    )
