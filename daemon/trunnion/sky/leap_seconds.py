"""TAI − UTC, from a table in the form of the IETF and IERS `Leap_Second.dat`."""

from bisect import bisect_right
from dataclasses import dataclass
from datetime import UTC, datetime
from pathlib import Path
from typing import Self

import numpy as np

from trunnion.sky.errors import SkyError
from trunnion.sky.instants import SECONDS_A_DAY
from trunnion.sky.look import FloatArray

MJD_UNIX_EPOCH = 40587
TT_MINUS_TAI_S = 32.184


@dataclass(frozen=True, slots=True)
class LeapSeconds:
    """TAI − UTC (s) from each instant on (UTC, POSIX seconds), and when the table expires."""

    from_s: tuple[float, ...]
    tai_minus_utc_s: tuple[float, ...]
    expires_s: float

    @classmethod
    def from_file(cls, path: Path) -> Self:
        """Read a table; raises SkyError where it is none, OSError where it cannot be read."""
        rows, expires_s = [], float("inf")
        for line in path.read_text(encoding="ascii", errors="replace").splitlines():
            if line.startswith("#"):
                expires_s = _expiry_s(line) or expires_s
            elif line.strip():
                fields = line.split()
                rows.append((mjd_to_utc_s(float(fields[0])), float(fields[4])))
        if not rows:
            raise SkyError(f"expected a table of leap seconds, got none in {path}")
        starts, offsets = zip(*rows, strict=True)
        return cls(starts, offsets, expires_s)

    @classmethod
    def packaged(cls) -> Self:
        """The table that is installed with the program."""
        from astropy_iers_data import IERS_LEAP_SECOND_FILE

        return cls.from_file(Path(IERS_LEAP_SECOND_FILE))

    def at(self, utc_s: float) -> float:
        """TAI − UTC in seconds; before 1972 that of 1972, since nothing is tracked there."""
        return self.tai_minus_utc_s[max(0, bisect_right(self.from_s, utc_s) - 1)]

    def at_many(self, utc_s: FloatArray) -> FloatArray:
        """The same for an array of instants."""
        index = np.searchsorted(self.from_s, utc_s, side="right") - 1
        return np.array(self.tai_minus_utc_s)[np.maximum(index, 0)]


def mjd_to_utc_s(mjd: float) -> float:
    """Modified Julian date (UTC) as POSIX seconds."""
    return (mjd - MJD_UNIX_EPOCH) * SECONDS_A_DAY


def _expiry_s(comment: str) -> float | None:
    _, is_there, date = comment.partition("expires on ")
    if not is_there:
        return None
    return datetime.strptime(date.strip(), "%d %B %Y").replace(tzinfo=UTC).timestamp()
