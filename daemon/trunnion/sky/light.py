"""From where a body is to where its light comes from: travel, bending by the Sun, aberration.

Vectors in astronomical units on the axes of the ICRS, days of terrestrial time from J2000.
"""

from collections.abc import Callable
from typing import NamedTuple

import erfa
import numpy as np

from trunnion.sky.look import FloatArray
from trunnion.sky.place import J2000_JD

LIGHT_AU_A_DAY = 173.1446326846693

_TRAVEL_STEPS = 3
"""Each brings the light time closer by the body's speed against that of light, 1e-4."""

_DISC = 1e-5
"""Squared half angle (rad²) from the Sun's centre within which ERFA lets the bending fade."""


class EarthState(NamedTuple):
    """Of the Earth: from the barycentre (au), velocity (au a day), and from the Sun (au)."""

    position_au: FloatArray
    velocity_au_day: FloatArray
    from_sun_au: FloatArray


def earth_state(tt_days: float) -> EarthState:
    """By ERFA's epv00, 1900 to 2100: 4.6 km rms, 13.4 km at most, as its header says."""
    heliocentric, barycentric = erfa.epv00(J2000_JD, tt_days)
    return EarthState(barycentric["p"], barycentric["v"], heliocentric["p"])


def as_seen(
    geocentric_au: Callable[[float], FloatArray], tt_days: float, earth_from_sun_au: FloatArray
) -> FloatArray:
    """Where a body of the solar system is seen, with its distance, from the Earth's centre.

    It stood there, from the Earth, when its light left: so the light's travel and the aberration
    go together, the Earth's speed being nearly the same then and now (Explanatory Supplement to the
    Astronomical Almanac, "planetary aberration"; it leaves out 0.01″ at Saturn).
    """
    seen_au = geocentric_au(tt_days)
    for _ in range(_TRAVEL_STEPS):
        seen_au = geocentric_au(tt_days - float(np.linalg.norm(seen_au)) / LIGHT_AU_A_DAY)
    distance_au = np.linalg.norm(seen_au)
    direction = bent_by_sun(seen_au / distance_au, seen_au + earth_from_sun_au, earth_from_sun_au)
    return distance_au * direction


def bent_by_sun(
    direction: FloatArray, source_from_sun_au: FloatArray, earth_from_sun_au: FloatArray
) -> FloatArray:
    """A direction (unit vector) of light from a source, bent by the Sun's mass."""
    source_au = np.linalg.norm(source_from_sun_au)
    earth_au = np.linalg.norm(earth_from_sun_au)
    if source_au < 0.1:  # the Sun itself
        return direction
    to_source, to_earth = source_from_sun_au / source_au, earth_from_sun_au / earth_au
    bent: FloatArray = erfa.ld(1.0, direction, to_source, to_earth, earth_au, _DISC)
    return bent


def aberrated(direction: FloatArray, earth: EarthState) -> FloatArray:
    """A direction (unit vector) as the moving Earth sees it."""
    velocity_c = earth.velocity_au_day / LIGHT_AU_A_DAY
    slowness = np.sqrt(1.0 - velocity_c @ velocity_c)
    seen: FloatArray = erfa.ab(direction, velocity_c, np.linalg.norm(earth.from_sun_au), slowness)
    return seen
