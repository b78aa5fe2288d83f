"""What the name of a target means by itself: a body, a direction among the stars, a fixed one.

Standard library only, so that files can be checked without loading astronomy.
"""

from enum import Enum
from math import isfinite
from typing import NamedTuple


class Body(Enum):
    """A body of the solar system, by its name in a plan; all but the Earth."""

    SUN = "sun"
    MOON = "moon"
    MERCURY = "mercury"
    VENUS = "venus"
    MARS = "mars"
    JUPITER = "jupiter"
    SATURN = "saturn"
    URANUS = "uranus"
    NEPTUNE = "neptune"


class FixedName(NamedTuple):
    """Azimuth and elevation (deg)."""

    azimuth_deg: float
    elevation_deg: float


class IcrsName(NamedTuple):
    """Right ascension and declination (deg), proper motion (mas a year), parallax (mas)."""

    right_ascension_deg: float
    declination_deg: float
    motion_ra_mas_yr: float = 0.0
    motion_dec_mas_yr: float = 0.0
    parallax_mas: float = 0.0


Meaning = Body | FixedName | IcrsName

FIXED, ICRS = "fixed:", "icrs:"
_BODIES = {body.value: body for body in Body}

BODY_NAMES = tuple(_BODIES)


def has_meaning(text: str) -> bool:
    """Whether the text means a target by itself, without anybody having named one."""
    folded = text.casefold()
    return folded in _BODIES or folded.startswith((FIXED, ICRS))


def meaning(text: str) -> Meaning | None:
    """What the text means by itself, or None where somebody must have given it a meaning.

    Raises ValueError for a direction that is none.
    """
    folded = text.strip().casefold()
    if folded.startswith(FIXED):
        return _fixed(folded)
    if folded.startswith(ICRS):
        return _icrs(folded)
    return _BODIES.get(folded)


def _fixed(text: str) -> FixedName:
    numbers = _numbers(text.removeprefix(FIXED))
    if len(numbers) != 2 or not (abs(numbers[0]) <= 360.0 and abs(numbers[1]) <= 90.0):
        raise ValueError(
            "expected fixed:AZIMUTH,ELEVATION in degrees, as in fixed:143.5,27, "
            f"with an elevation of -90 to 90, got {text[:60]!r}"
        )
    return FixedName(*numbers)


def _icrs(text: str) -> IcrsName:
    numbers = _numbers(text.removeprefix(ICRS))
    if len(numbers) not in {2, 4, 5} or not (abs(numbers[0]) <= 360.0 and abs(numbers[1]) <= 90.0):
        raise ValueError(
            "expected icrs:RIGHT_ASCENSION,DECLINATION in degrees, as in icrs:83.633,22.014, and "
            "after them, where there are any, proper motion in both (mas a year) and parallax "
            f"(mas), got {text[:80]!r}"
        )
    return IcrsName(*numbers)


def _numbers(text: str) -> list[float]:
    """All numbers between commas; none at all where one is not a finite number."""
    try:
        numbers = [float(part) for part in text.split(",")]
    except ValueError:
        return []
    return numbers if all(map(isfinite, numbers)) else []
