"""What the built-in series leave out, as sums of sines: from a minute of arc to a few seconds.

The series that ERFA carries are cut short for speed. The terms here are what a least-squares fit to
the JPL ephemeris DE421 found in the remainder over 1900 to 2050, for multiples of the fundamental
arguments of the IERS Conventions (2010), chapter 5.7. `python -m tests.published.fit_refinement`
makes the table anew.
"""

from functools import lru_cache
from importlib.resources import files
from typing import NamedTuple

import erfa
import numpy as np

from trunnion.sky.look import FloatArray
from trunnion.sky.naming import Body

DAYS_A_CENTURY = 36_525.0
ARCSEC = np.radians(1.0 / 3600.0)

ARGUMENTS = (
    erfa.fad03,
    erfa.falp03,
    erfa.fal03,
    erfa.faf03,
    erfa.fame03,
    erfa.fave03,
    erfa.fae03,
    erfa.fama03,
    erfa.faju03,
    erfa.fasa03,
    erfa.faur03,
    erfa.fane03,
)
"""The Moon's elongation, the Sun's and the Moon's anomaly, the Moon's argument of latitude, and the
mean longitudes of the planets from Mercury to Neptune: functions of Julian centuries."""

DIRECTIONS = ("along", "across", "outward")
"""Of a correction: towards rising longitude, towards the ecliptic's north, away from the centre."""

OBLIQUITY_RAD = 84381.406 * ARCSEC
"""Of the ecliptic of J2000 (IAU 2006): here no more than a fixed choice of axes."""


class Terms(NamedTuple):
    """The sum for one body: a row is cos·t^p·cos(argument) + sin·t^p·sin(argument)."""

    direction: FloatArray
    """Which of the three, as ones and zeros, shape (3, n)."""
    power: FloatArray
    """Of the time in Julian centuries, shape (n,)."""
    multiples: FloatArray
    """Of the fundamental arguments, shape (n, 12)."""
    cos_rad: FloatArray
    sin_rad: FloatArray


def refined(body: Body, position_au: FloatArray, tt_days: float) -> FloatArray:
    """A position by the series, from the Sun's or Earth's centre (ICRS axes), put right."""
    terms = _all_terms().get(body)
    if terms is None:
        return position_au
    size_au = float(np.linalg.norm(position_au))
    refined_au: FloatArray = position_au + size_au * (
        correction(terms, tt_days / DAYS_A_CENTURY) @ axes(position_au)
    )
    return refined_au


def correction(terms: Terms, centuries: float) -> FloatArray:
    """Along, across and outward, as parts of the distance, shape (3,)."""
    fundamental = np.array([argument(centuries) for argument in ARGUMENTS])
    angle = terms.multiples @ fundamental
    waves = terms.cos_rad * np.cos(angle) + terms.sin_rad * np.sin(angle)
    sums: FloatArray = terms.direction @ (centuries**terms.power * waves)
    return sums


def axes(position_au: FloatArray) -> FloatArray:
    """Unit vectors along, across and outward at a position, shape (3, 3), one in each row."""
    outward = position_au / np.linalg.norm(position_au)
    north = np.array((0.0, -np.sin(OBLIQUITY_RAD), np.cos(OBLIQUITY_RAD)))
    along = np.cross(north, outward)
    along /= np.linalg.norm(along)
    return np.stack((along, np.cross(outward, along), outward))


@lru_cache(maxsize=1)
def _all_terms() -> dict[Body, Terms]:
    """The packaged table, by body."""
    text = files("trunnion.sky").joinpath("refinement.csv").read_text(encoding="ascii")
    rows = [line.split(",") for line in text.splitlines()[1:]]
    return {
        body: _terms([row[1:] for row in rows if row[0] == body.value])
        for body in Body
        if any(row[0] == body.value for row in rows)
    }


def _terms(rows: list[list[str]]) -> Terms:
    numbers = np.array([row[1:] for row in rows], dtype=float)
    return Terms(
        direction=np.array([[row[0] == name for row in rows] for name in DIRECTIONS], dtype=float),
        power=numbers[:, 0],
        multiples=numbers[:, 1:-2],
        cos_rad=numbers[:, -2] * ARCSEC,
        sin_rad=numbers[:, -1] * ARCSEC,
    )
