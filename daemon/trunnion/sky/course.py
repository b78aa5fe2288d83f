"""The course of a celestial target on the frame of the date.

The frame is the celestial intermediate one (true equator, origin without rotation): from it to the
Earth's own there is one turn by the Earth rotation angle. All in it is slow, so it is computed at
nodes a part of a day apart and runs along a cubic between them, which costs 0.01″ at most.
"""

from functools import lru_cache
from math import floor
from typing import TypeVar

import erfa
import numpy as np

from trunnion.sky.instants import SECONDS_A_DAY
from trunnion.sky.look import FloatArray
from trunnion.sky.place import J2000_JD, Place
from trunnion.sky.site import Vector

Float = TypeVar("Float", float, FloatArray)

NODES = (-1, 0, 1, 2)


def course_at(place: Place, tt_days: float, *, is_apparent: bool) -> tuple[Vector, Vector]:
    """Position (km) and its change (km/s) at one instant, in days of TT from J2000.

    Raises NoPosition where nothing is known of it.
    """
    node_days = place.node_days
    at = tt_days / node_days
    index = floor(at)
    (a, b, c, d), (e, f, g, h) = _weights(at - index, node_days)
    (ax, ay, az), (bx, by, bz), (cx, cy, cz), (dx, dy, dz) = _around(place, index, is_apparent)
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


def course_at_many(
    place: Place, tt_days: FloatArray, *, is_apparent: bool
) -> tuple[FloatArray, FloatArray]:
    """The same for an array of shape (n,); position and change of shape (3, n)."""
    at = tt_days / place.node_days
    index = np.floor(at).astype(int)
    needed, where = np.unique(index, return_inverse=True)
    around = [_around(place, each, is_apparent) for each in needed.tolist()]
    nodes = np.array(around).reshape(-1, len(NODES), 3)[where]
    values, slopes = _weights(at - index, place.node_days)
    return (
        np.einsum("jn,njk->kn", np.stack(values), nodes),
        np.einsum("jn,njk->kn", np.stack(slopes), nodes),
    )


def _weights(
    u: Float, node_days: float
) -> tuple[tuple[Float, Float, Float, Float], tuple[Float, Float, Float, Float]]:
    """Weights of four nodes at -1, 0, 1, 2 for the value at u, and for its change a second."""
    v, w, x = u + 1.0, u - 1.0, u - 2.0
    sixth = 1.0 / (6.0 * node_days * SECONDS_A_DAY)
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
def _around(place: Place, index: int, is_apparent: bool) -> tuple[Vector, ...]:  # noqa: FBT001 - the cache's key
    """The four nodes between whose inner two the course runs."""
    return tuple(_node(place, index + each, is_apparent) for each in NODES)


@lru_cache(maxsize=4096)
def _node(place: Place, index: int, is_apparent: bool) -> Vector:  # noqa: FBT001 - the cache's key
    """Position (km) at one node, turned by ERFA (IAU 2006 precession, 2000A nutation)."""
    tt_days = index * place.node_days
    x, y, z = erfa.c2i06a(J2000_JD, tt_days) @ place.at(tt_days, is_apparent=is_apparent)
    return float(x), float(y), float(z)
