"""What a celestial target is to the program: a place, seen from the Earth's centre.

Vectors are on the axes of the ICRS, in kilometres; time is terrestrial time in days from J2000.
"""

from collections.abc import Hashable
from typing import Protocol

from trunnion.sky.errors import NoPosition
from trunnion.sky.look import FloatArray

J2000_JD = 2451545.0
AU_KM = 149_597_870.7

FIRST_DAY, LAST_DAY = -36_520.0, 36_520.0
"""Days from J2000 between which ERFA's theory of the Earth's motion holds: 1900 to 2100."""


class Place(Hashable, Protocol):
    """A body of the solar system, or a direction among the stars, from the Earth's centre."""

    @property
    def name(self) -> str:
        """The way it is written in a plan."""
        ...

    @property
    def has_range(self) -> bool:
        """Whether its distance means anything."""
        ...

    @property
    def node_days(self) -> float:
        """How far apart it may be computed, for a cubic between to be good to 0.01″."""
        ...

    def at(self, tt_days: float, *, is_apparent: bool) -> FloatArray:
        """From the Earth's centre, shape (3,); raises NoPosition where nothing is known of it.

        Apparent: with the light's travel, its bending by the Sun, and the aberration by the
        Earth's motion around the Sun.
        """
        ...


def check_span(name: str, tt_days: float, first: float = FIRST_DAY, last: float = LAST_DAY) -> None:
    """Raise NoPosition outside a span of time."""
    if not first <= tt_days <= last:
        first_year, last_year = (2000.0 + days / 365.25 for days in (first, last))
        raise NoPosition(
            f"{name}: expected an instant of {first_year:.1f} to {last_year:.1f}, got one of "
            f"{2000.0 + tt_days / 365.25:.1f}"
        )
