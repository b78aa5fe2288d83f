"""From the true equator, mean equinox frame of SGP4 (TEME) to the Earth-fixed frame.

A turn by Greenwich mean sidereal time of 1982 about the pole, then polar motion: the method of
Vallado, Crawford, Hujsak, Kelso, "Revisiting Spacetrack Report #3", AIAA 2006-6753, appendix C.
"""

from math import cos, pi, sin

import numpy as np

from trunnion.sky.earth import Turned
from trunnion.sky.look import FloatArray
from trunnion.sky.site import Vector

J2000_JD = 2451545.0
DAYS_A_CENTURY = 36525.0
SECONDS_A_DAY = 86400.0
EARTH_RATE_RAD_S = 7.292115146706979e-5
"""Rate of the Earth's rotation; the change of the length of the day costs less than 1e-7 of it."""

SIDEREAL_S = (24110.54841, 8640184.812866, 0.093104, -6.2e-6)
"""Coefficients (s) at 0h UT1, in Julian centuries from J2000: Aoki et al. 1982."""

_C0, _C1, _C2, _C3 = SIDEREAL_S
_RAD_A_SECOND = 2.0 * pi / SECONDS_A_DAY


def sidereal_angle(jd_midnight: float, ut1_fraction: float) -> float:
    """Greenwich mean sidereal time 1982 (rad, within a turn) at midnight and a fraction of UT1."""
    t = ((jd_midnight - J2000_JD) + ut1_fraction) / DAYS_A_CENTURY
    seconds = _C0 + (_C1 + (_C2 + _C3 * t) * t) * t + SECONDS_A_DAY * ut1_fraction
    return seconds % SECONDS_A_DAY * _RAD_A_SECOND


def rotation_angle(jd_midnight: float, ut1_fraction: float) -> float:
    """Earth rotation angle (rad, within one turn): IAU 2000, Capitaine, Guinot, McCarthy."""
    days = (jd_midnight - J2000_JD) + ut1_fraction
    turns = 0.7790572732640 + 0.00273781191135448 * days + (ut1_fraction + 0.5)
    return turns % 1.0 * (2.0 * pi)


def earth_fixed(
    position_km: Vector, velocity_km_s: Vector, sidereal: float, turned: Turned
) -> tuple[Vector, Vector]:
    """Position and velocity in the rotating Earth-fixed frame (ITRF) of a TEME state."""
    c, s = cos(sidereal), sin(sidereal)
    x, y, z = position_km
    vx, vy, vz = velocity_km_s
    x, y = c * x + s * y, c * y - s * x
    vx, vy = c * vx + s * vy + EARTH_RATE_RAD_S * y, c * vy - s * vx - EARTH_RATE_RAD_S * x
    _, px, py = turned
    return (
        (x + px * z, y - py * z, z - px * x + py * y),
        (vx + px * vz, vy - py * vz, vz - px * vx + py * vy),
    )


def earth_fixed_many(
    position_km: FloatArray,
    velocity_km_s: FloatArray,
    sidereal: FloatArray,
    pole_x: FloatArray,
    pole_y: FloatArray,
) -> tuple[FloatArray, FloatArray]:
    """The same for arrays: states of shape (3, n), the others (n,)."""
    c, s = np.cos(sidereal), np.sin(sidereal)
    x, y, z = position_km
    vx, vy, vz = velocity_km_s
    x, y = c * x + s * y, c * y - s * x
    vx, vy = c * vx + s * vy + EARTH_RATE_RAD_S * y, c * vy - s * vx - EARTH_RATE_RAD_S * x
    return (
        np.stack((x + pole_x * z, y - pole_y * z, z - pole_x * x + pole_y * y)),
        np.stack((vx + pole_x * vz, vy - pole_y * vz, vz - pole_x * vx + pole_y * vy)),
    )


def sidereal_angles(jd_midnight: FloatArray, ut1_fraction: FloatArray) -> FloatArray:
    """The same as `sidereal_angle` for arrays of shape (n,)."""
    t = ((jd_midnight - J2000_JD) + ut1_fraction) / DAYS_A_CENTURY
    seconds = _C0 + (_C1 + (_C2 + _C3 * t) * t) * t + SECONDS_A_DAY * ut1_fraction
    return seconds % SECONDS_A_DAY * _RAD_A_SECOND


def rotation_angles(jd_midnight: FloatArray, ut1_fraction: FloatArray) -> FloatArray:
    """The same as `rotation_angle` for arrays of shape (n,)."""
    days = (jd_midnight - J2000_JD) + ut1_fraction
    turns = 0.7790572732640 + 0.00273781191135448 * days + (ut1_fraction + 0.5)
    return turns % 1.0 * (2.0 * pi)
