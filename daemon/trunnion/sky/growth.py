"""How the error of orbit elements grows with their age: common practice, no source.

Element sets are issued without any word of their accuracy. What follows is what stations reckon
with: about a kilometre at the epoch for a low orbit, and one or two more a day, along the track;
less growth the less there is of the air; more for eccentric orbits, whose fast perigee magnifies.
"""

from enum import Enum


class OrbitClass(Enum):
    """Error at the epoch (km), and its growth (km a day, and km a day squared)."""

    LOW = (1.0, 1.5, 0.25)
    MIDDLE = (2.0, 0.5, 0.0)
    SYNCHRONOUS = (5.0, 1.0, 0.0)
    HIGH = (10.0, 5.0, 0.0)


LONGEST_LOW_MIN = 225.0
"""Longer periods are for the deep-space part of SGP4."""

LONGEST_MIDDLE_MIN = 1350.0
LONGEST_SYNCHRONOUS_MIN = 1530.0


def orbit_class(period_min: float) -> OrbitClass:
    """The class of an orbit of this period."""
    if period_min < LONGEST_LOW_MIN:
        return OrbitClass.LOW
    if period_min < LONGEST_MIDDLE_MIN:
        return OrbitClass.MIDDLE
    return OrbitClass.SYNCHRONOUS if period_min < LONGEST_SYNCHRONOUS_MIN else OrbitClass.HIGH


def position_error_km(period_min: float, age_days: float) -> float:
    """Expected distance between where it is and where the elements have it."""
    at_epoch, a_day, a_day2 = orbit_class(period_min).value
    age = abs(age_days)
    return at_epoch + a_day * age + a_day2 * age * age
