"""From a state of SGP4 to look angles at one go, for the control turn.

The same as `earth_fixed` followed by `topocentric`, on the axes of the station's own meridian: one
turn by local sidereal time, after which east is an axis. That halves what a look costs.
"""

from math import atan2, cos, degrees, sin, sqrt

from trunnion.sky.earth import Turned
from trunnion.sky.earth_fixed import EARTH_RATE_RAD_S
from trunnion.sky.look import Look
from trunnion.sky.site import Vector
from trunnion.sky.topocentric import LIGHT_KM_S, ZENITH_KM2
from trunnion.sky.viewpoint import Viewpoint

DEG = degrees(1.0)

_look = tuple.__new__  # makes a Look in half the time that calling Look takes


def sight(state: tuple[Vector, Vector], sidereal: float, turned: Turned, view: Viewpoint) -> Look:
    """Look angles of a TEME position (km) and velocity (km/s) at this sidereal angle (rad)."""
    (x, y, z), (vx, vy, vz) = state
    longitude, sin_lon, cos_lon, sin_lat, cos_lat, axis_km, polar_km = view.site.meridian
    _, pole_x, pole_y = turned
    c, s = cos(sidereal + longitude), sin(sidereal + longitude)
    x, y = c * x + s * y, c * y - s * x
    vx, vy = c * vx + s * vy + EARTH_RATE_RAD_S * y, c * vy - s * vx - EARTH_RATE_RAD_S * x
    px, py = cos_lon * pole_x - sin_lon * pole_y, sin_lon * pole_x + cos_lon * pole_y
    x, y, z = x + px * z - axis_km, y - py * z, z - px * x + py * y - polar_km
    vx, vy, vz = vx + px * vz, vy - py * vz, vz - px * vx + py * vy
    if view.is_apparent:
        travel_s = sqrt(x * x + y * y + z * z) / LIGHT_KM_S
        turn = EARTH_RATE_RAD_S * travel_s
        x, y, z = x - vx * travel_s, y - vy * travel_s, z - vz * travel_s
        x, y = x + turn * y, y - turn * x
    north, up = cos_lat * z - sin_lat * x, cos_lat * x + sin_lat * z
    v_north, v_up = cos_lat * vz - sin_lat * vx, cos_lat * vx + sin_lat * vz
    level2 = y * y + north * north
    if level2 < ZENITH_KM2:
        level2 = ZENITH_KM2
    level = sqrt(level2)
    range_km = sqrt(level2 + up * up)
    range_rate = (y * vy + north * v_north + up * v_up) / range_km
    seen_deg, slope = view.refraction.seen(atan2(up, level) * DEG)
    return _look(
        Look,
        (
            atan2(y, north) * DEG % 360.0 % 360.0,
            seen_deg,
            range_km,
            (vy * north - v_north * y) / level2 * DEG,
            (v_up - range_rate * up / range_km) / level * slope * DEG,
            range_rate,
        ),
    )
