"""The frames in which ephemerides are given, and the way from each to the Earth-fixed one."""

from enum import Enum
from functools import lru_cache
from math import floor

import erfa
import numpy as np

from trunnion.sky.earth import EarthOrientation
from trunnion.sky.earth_fixed import earth_fixed, rotation_angle, sidereal_angle
from trunnion.sky.instants import SECONDS_A_DAY, julian_date
from trunnion.sky.leap_seconds import TT_MINUS_TAI_S
from trunnion.sky.look import FloatArray
from trunnion.sky.place import J2000_JD
from trunnion.sky.site import Vector

J2000_UTC_S = 946_728_000.0

NODE_DAYS = 0.5
"""The axes of the date turn by 0.2″ a day, all but evenly: a line between nodes costs 0.002″."""


class Frame(Enum):
    """Axes of an ephemeris around the Earth's centre."""

    ICRF = "ICRF"
    EME2000 = "EME2000"
    TEME = "TEME"
    ITRF = "ITRF"


State = tuple[Vector, Vector]


def fixed_to_earth(frame: Frame, state: State, utc_s: float, earth: EarthOrientation) -> State:
    """Position (km) and velocity (km/s) on Earth-fixed axes, of a state on the axes of a frame.

    In ITRF the velocity is that on the Earth-fixed axes already.
    """
    if frame is Frame.ITRF:
        return state
    turned = earth.at(utc_s)
    jd_midnight, fraction = julian_date(utc_s)
    ut1_fraction = fraction + turned[0] / SECONDS_A_DAY
    if frame is Frame.TEME:
        return earth_fixed(*state, sidereal_angle(jd_midnight, ut1_fraction), turned)
    tt_s = utc_s - J2000_UTC_S + earth.leap_seconds.at(utc_s) + TT_MINUS_TAI_S
    matrix = _axes_of_date(frame, tt_s / SECONDS_A_DAY)
    position_km, velocity_km_s = (_turned(matrix, each) for each in state)
    angle = rotation_angle(jd_midnight, ut1_fraction)
    return earth_fixed(position_km, velocity_km_s, angle, turned)


Matrix = tuple[tuple[float, float, float], ...]


def _axes_of_date(frame: Frame, tt_days: float) -> Matrix:
    """From the frame's axes to the celestial intermediate ones."""
    index = floor(tt_days / NODE_DAYS)
    share = tt_days / NODE_DAYS - index
    before, after = _node(frame, index), _node(frame, index + 1)
    return tuple(
        (
            a[0] + share * (b[0] - a[0]),
            a[1] + share * (b[1] - a[1]),
            a[2] + share * (b[2] - a[2]),
        )
        for a, b in zip(before, after, strict=True)
    )


@lru_cache(maxsize=512)
def _node(frame: Frame, index: int) -> Matrix:
    """By ERFA: IAU 2006 precession, 2000A nutation, and the frame bias for EME2000."""
    matrix: FloatArray = erfa.c2i06a(J2000_JD, index * NODE_DAYS)
    if frame is Frame.EME2000:
        bias, _, _ = erfa.bp06(J2000_JD, 0.0)
        matrix = matrix @ np.transpose(bias)
    return tuple((float(a), float(b), float(c)) for a, b, c in matrix)


def _turned(matrix: Matrix, vector: Vector) -> Vector:
    x, y, z = vector
    (a, b, c), (d, e, f), (g, h, i) = matrix
    return a * x + b * y + c * z, d * x + e * y + f * z, g * x + h * y + i * z
