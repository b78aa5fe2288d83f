"""How the Earth is turned: UT1 − UTC and polar motion, from the IERS, or none."""

from bisect import bisect_right
from collections.abc import Iterator
from dataclasses import dataclass, field
from itertools import pairwise
from math import radians
from pathlib import Path
from typing import NamedTuple, Self

import numpy as np

from trunnion.sky.errors import SkyError
from trunnion.sky.instants import SECONDS_A_DAY
from trunnion.sky.leap_seconds import LeapSeconds, mjd_to_utc_s
from trunnion.sky.look import FloatArray

ARCSECOND = radians(1.0 / 3600.0)


class Turned(NamedTuple):
    """UT1 − UTC (s) and the pole's coordinates x and y (rad) at one instant."""

    ut1_minus_utc_s: float
    pole_x: float
    pole_y: float


STANDING = Turned(0.0, 0.0, 0.0)


@dataclass(frozen=True, slots=True)
class EarthOrientation:
    """A daily table, interpolated; outside it, and without one, zero: UT1 is taken as UTC.

    Interpolated is UT1 − TAI, which knows no leap seconds, so that none is smeared over a day.
    """

    source: str
    leap_seconds: LeapSeconds
    day_s: tuple[float, ...] = ()
    ut1_minus_tai_s: tuple[float, ...] = field(default=(), repr=False)
    pole_x: tuple[float, ...] = field(default=(), repr=False)
    pole_y: tuple[float, ...] = field(default=(), repr=False)

    @classmethod
    def none(cls) -> Self:
        """No table: UT1 taken as UTC (less than 0.9 s off), the pole at rest."""
        return cls("none", LeapSeconds.packaged())

    @classmethod
    def packaged(cls) -> Self:
        """The IERS table that is installed with the program."""
        from astropy_iers_data import IERS_A_FILE

        return cls.from_finals(Path(IERS_A_FILE))

    @classmethod
    def from_finals(cls, path: Path) -> Self:
        """A finals2000A file of the IERS; raises SkyError where it is none."""
        leap_seconds = LeapSeconds.packaged()
        try:
            rows = list(_rows(path, leap_seconds))
        except OSError as error:
            raise SkyError(f"{path}: {error.strerror}") from error
        if len(rows) < 2:
            raise SkyError(f"{path}: expected an Earth orientation table (finals2000A), got none")
        days, ut1, x, y = zip(*rows, strict=True)
        if any(after - before != SECONDS_A_DAY for before, after in pairwise(days)):
            raise SkyError(f"{path}: expected one row a day, got a gap or a repetition")
        return cls(path.name, leap_seconds, days, ut1, x, y)

    def covers(self, utc_s: float) -> bool:
        """Whether the table reaches to this instant."""
        return bool(self.day_s) and self.day_s[0] <= utc_s <= self.day_s[-1]

    def at(self, utc_s: float) -> Turned:
        """UT1 − UTC and the pole at one instant; zero outside the table."""
        if not self.covers(utc_s):
            return STANDING
        index = min(bisect_right(self.day_s, utc_s), len(self.day_s) - 1) - 1
        share = (utc_s - self.day_s[index]) / SECONDS_A_DAY
        rest = 1.0 - share
        ut1_minus_tai_s = (
            rest * self.ut1_minus_tai_s[index] + share * self.ut1_minus_tai_s[index + 1]
        )
        return Turned(
            ut1_minus_tai_s + self.leap_seconds.at(utc_s),
            rest * self.pole_x[index] + share * self.pole_x[index + 1],
            rest * self.pole_y[index] + share * self.pole_y[index + 1],
        )

    def at_many(self, utc_s: FloatArray) -> tuple[FloatArray, FloatArray, FloatArray]:
        """The same for an array of instants."""
        if not self.day_s:
            nothing = np.zeros_like(utc_s)
            return nothing, nothing, nothing
        is_covered = (utc_s >= self.day_s[0]) & (utc_s <= self.day_s[-1])
        days = np.array(self.day_s)
        ut1, x, y = (
            np.interp(utc_s, days, column)
            for column in (self.ut1_minus_tai_s, self.pole_x, self.pole_y)
        )
        return (
            np.where(is_covered, ut1 + self.leap_seconds.at_many(utc_s), 0.0),
            np.where(is_covered, x, 0.0),
            np.where(is_covered, y, 0.0),
        )


def _rows(path: Path, leap_seconds: LeapSeconds) -> Iterator[tuple[float, float, float, float]]:
    """Day, UT1 − TAI, pole x and y; columns as in the IERS' ReadMe.finals2000A, counted from 0.

    Rows at the end that hold a date and nothing else are left out.
    """
    with path.open(encoding="ascii", errors="replace") as lines:
        for number, line in enumerate(lines, start=1):
            if not line[58:68].strip():
                continue
            try:
                day_s = mjd_to_utc_s(float(line[7:15]))
                ut1_s, x, y = float(line[58:68]), float(line[18:27]), float(line[37:46])
            except ValueError:
                raise SkyError(f"{path}:{number}: expected a row of finals2000A") from None
            yield day_s, ut1_s - leap_seconds.at(day_s), x * ARCSECOND, y * ARCSECOND
