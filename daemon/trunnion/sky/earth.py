"""How the Earth is turned: UT1 − UTC and polar motion, from the IERS, or none."""

from array import array
from collections.abc import Iterable, Iterator
from dataclasses import dataclass, field
from itertools import chain, pairwise
from math import inf, radians
from pathlib import Path
from typing import Self

import numpy as np

from trunnion.sky.errors import SkyError
from trunnion.sky.instants import SECONDS_A_DAY
from trunnion.sky.leap_seconds import LeapSeconds, mjd_to_utc_s
from trunnion.sky.look import FloatArray

ARCSECOND = radians(1.0 / 3600.0)


Turned = tuple[float, float, float]
"""UT1 − UTC (s) and the pole's coordinates x and y (rad) at one instant."""

COLUMNS = 6

Day = tuple[float, float, float, float, float, float, float, float]
"""Begin and end of a day (s), and its line of the table with the changes per second."""

NO_DAY: Day = (0.0, 0.0, 0.0, 0.0, 0.0, 0.0, 0.0, 0.0)


@dataclass(frozen=True, slots=True)
class EarthOrientation:
    """A daily table, interpolated; outside it, and without one, zero: UT1 is taken as UTC.

    `lines` holds six numbers a day: UT1 − UTC at its begin and the change over the day, and the
    same of the pole's x and y. No leap second falls within a day, so none is smeared over one.
    """

    source: str
    leap_seconds: LeapSeconds
    begin_s: float = 0.0
    end_s: float = 0.0
    lines: "array[float]" = field(default_factory=lambda: array("d"), repr=False)
    _today: list[Day] = field(
        default_factory=lambda: [NO_DAY], init=False, repr=False, compare=False
    )

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
        days_s = [row[0] for row in rows]
        if any(after - before != SECONDS_A_DAY for before, after in pairwise(days_s)):
            raise SkyError(f"{path}: expected one row a day, got a gap or a repetition")
        lines = array("d", chain.from_iterable(_lines(rows, leap_seconds)))
        return cls(path.name, leap_seconds, days_s[0], days_s[-1], lines)

    def covers(self, utc_s: float) -> bool:
        """Whether the table reaches to this instant."""
        return self.begin_s <= utc_s < self.end_s

    def at(self, utc_s: float) -> Turned:
        """UT1 − UTC and the pole at one instant; zero outside the table."""
        begin_s, end_s, ut1_s, ut1_rate, x, x_rate, y, y_rate = self._today[0]
        if not begin_s <= utc_s < end_s:
            self._today[0] = self._day(utc_s)  # control turns stay within a day for long
            begin_s, end_s, ut1_s, ut1_rate, x, x_rate, y, y_rate = self._today[0]
        since_s = utc_s - begin_s
        return ut1_s + ut1_rate * since_s, x + x_rate * since_s, y + y_rate * since_s

    def _day(self, utc_s: float) -> Day:
        if not self.covers(utc_s):
            until_s = self.begin_s if utc_s < self.begin_s else inf
            return (utc_s, min(utc_s + SECONDS_A_DAY, until_s), *NO_DAY[2:])
        day = int((utc_s - self.begin_s) / SECONDS_A_DAY)
        ut1_s, ut1, x, x_change, y, y_change = self.lines[COLUMNS * day : COLUMNS * (day + 1)]
        return (
            self.begin_s + day * SECONDS_A_DAY,
            self.begin_s + (day + 1) * SECONDS_A_DAY,
            *(ut1_s, ut1 / SECONDS_A_DAY),
            *(x, x_change / SECONDS_A_DAY),
            *(y, y_change / SECONDS_A_DAY),
        )

    def at_many(self, utc_s: FloatArray) -> tuple[FloatArray, FloatArray, FloatArray]:
        """The same for an array of instants, shape (n,)."""
        if not self.lines:
            nothing = np.zeros_like(utc_s)
            return nothing, nothing, nothing
        is_covered = (self.begin_s <= utc_s) & (utc_s < self.end_s)
        days = np.where(is_covered, (utc_s - self.begin_s) / SECONDS_A_DAY, 0.0)
        day = days.astype(int)
        share = days - day
        ut1, ut1_change, x, x_change, y, y_change = (
            np.frombuffer(self.lines).reshape(-1, COLUMNS)[day].T * is_covered
        )
        return ut1 + share * ut1_change, x + share * x_change, y + share * y_change


def _lines(
    rows: Iterable[tuple[float, float, float, float]], leap_seconds: LeapSeconds
) -> Iterator[tuple[float, ...]]:
    """Six numbers for the day between each row and the next."""
    for (day_s, ut1_s, x, y), (_, next_ut1_s, next_x, next_y) in pairwise(rows):
        at_begin_s = ut1_s + leap_seconds.at(day_s)
        yield at_begin_s, next_ut1_s - ut1_s, x, next_x - x, y, next_y - y


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
