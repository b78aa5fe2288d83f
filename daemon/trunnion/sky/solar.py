"""Where the Sun stands, seen from the Earth's centre, on the frame of the date.

The frame is the celestial intermediate one (true equator, origin without rotation): from it to the
Earth's own there is one turn by the Earth rotation angle. All in it is slow, so it is computed for
each noon and midnight and runs along a cubic between them, which costs 0.0001″ at most.
"""

from functools import lru_cache
from math import floor
from typing import Any, TypeVar

import erfa
import numpy as np

from trunnion.sky.errors import NoPosition
from trunnion.sky.look import FloatArray
from trunnion.sky.site import Vector

AU_KM = 149_597_870.7
LIGHT_AU_A_DAY = 173.1446326846693
J2000_JD = 2451545.0
NODE_DAYS = 0.5
FIRST_DAY, LAST_DAY = -36_520.0, 36_520.0
"""Days from J2000 between which the theory of the Earth's motion holds: 1900 to 2100."""

Float = TypeVar("Float", float, FloatArray)


def sun_at(tt_days: float, *, is_apparent: bool) -> tuple[Vector, Vector]:
    """Position (km) and its change (km/s) at one instant, in days of TT from J2000.

    Apparent: with the light's travel and the aberration by the Earth's motion around the Sun.
    Raises NoPosition outside 1900 to 2100.
    """
    _check(tt_days, tt_days)
    place = tt_days / NODE_DAYS
    index = floor(place)
    values, slopes = _weights(place - index)
    nodes = [_node(index + offset, is_apparent) for offset in (-1, 0, 1, 2)]
    (ax, ay, az), (bx, by, bz), (cx, cy, cz), (dx, dy, dz) = nodes
    (a, b, c, d), (e, f, g, h) = values, slopes
    return (
        (
            a * ax + b * bx + c * cx + d * dx,
            a * ay + b * by + c * cy + d * dy,
            a * az + b * bz + c * cz + d * dz,
        ),
        (
            e * ax + f * bx + g * cx + h * dx,
            e * ay + f * by + g * cy + h * dy,
            e * az + f * bz + g * cz + h * dz,
        ),
    )


def sun_at_many(tt_days: FloatArray, *, is_apparent: bool) -> tuple[FloatArray, FloatArray]:
    """The same for an array of shape (n,); position and change of shape (3, n)."""
    if tt_days.size:
        _check(float(tt_days.min()), float(tt_days.max()))
    place = tt_days / NODE_DAYS
    index = np.floor(place).astype(int)
    needed, where = np.unique(index, return_inverse=True)
    nodes = np.array(
        [
            [_node(each + offset, is_apparent) for offset in (-1, 0, 1, 2)]
            for each in needed.tolist()
        ]
    ).reshape(-1, 4, 3)[where]
    values, slopes = _weights(place - index)
    return (
        np.einsum("jn,njk->kn", np.stack(values), nodes),
        np.einsum("jn,njk->kn", np.stack(slopes), nodes),
    )


def _check(first: float, last: float) -> None:
    if not FIRST_DAY <= first <= last <= LAST_DAY:
        raise NoPosition("the Sun: expected an instant of 1900 to 2100, got one outside")


def _weights(
    u: Float,
) -> tuple[tuple[Float, Float, Float, Float], tuple[Float, Float, Float, Float]]:
    """Weights of four nodes at -1, 0, 1, 2 for the value at u, and for its change a second."""
    v, w, x = u + 1.0, u - 1.0, u - 2.0
    sixth = 1.0 / (6.0 * NODE_DAYS * 86400.0)
    return (
        (-u * w * x / 6.0, v * w * x / 2.0, -v * u * x / 2.0, v * u * w / 6.0),
        (
            -(w * x + u * x + u * w) * sixth,
            (w * x + v * x + v * w) * (3.0 * sixth),
            -(u * x + v * x + v * u) * (3.0 * sixth),
            (u * w + v * w + v * u) * sixth,
        ),
    )


@lru_cache(maxsize=4096)
def _node(index: int, is_apparent: bool) -> Vector:  # noqa: FBT001 - the cache's key
    """Position at one noon or midnight, by ERFA (IAU 2006 precession, 2000A nutation)."""
    tt = index * NODE_DAYS
    heliocentric, barycentric = erfa.epv00(J2000_JD, tt)
    sun_au = -heliocentric["p"]
    if is_apparent:
        sun_au = _as_seen(tt, sun_au, barycentric)
    x, y, z = AU_KM * (erfa.c2i06a(J2000_JD, tt) @ sun_au)
    return float(x), float(y), float(z)


def _as_seen(tt: float, sun_au: FloatArray, earth: Any) -> FloatArray:
    """The Sun where it was when its light left, in the direction a moving Earth sees it in."""
    travel_days = np.linalg.norm(sun_au) / LIGHT_AU_A_DAY
    earlier_heliocentric, earlier_barycentric = erfa.epv00(J2000_JD, tt - travel_days)
    sun_then_au = earlier_barycentric["p"] - earlier_heliocentric["p"]
    seen_au = sun_then_au - earth["p"]
    distance_au = np.linalg.norm(seen_au)
    velocity_c = earth["v"] / LIGHT_AU_A_DAY
    slowness = np.sqrt(1.0 - velocity_c @ velocity_c)
    direction = erfa.ab(seen_au / distance_au, velocity_c, distance_au, slowness)
    seen: FloatArray = distance_au * direction
    return seen
