"""What the CCSDS navigation messages (502.0-B-3) have in common: keywords, epochs, numbers, times.

A message comes as keywords with values (KVN) or as XML; both are read into the same `Entry`s.
"""

import re
from collections.abc import Callable, Iterator
from datetime import UTC, datetime, timedelta
from math import isfinite, sin
from typing import NamedTuple

from trunnion.sky.leap_seconds import TT_MINUS_TAI_S, LeapSeconds

_EPOCH = re.compile(
    r"(\d{4})-(?:(\d{2})-(\d{2})|(\d{3}))T(\d{2}):(\d{2}):(\d{2})(\.\d*)?Z?", re.ASCII
)
_NUMBER = re.compile(r"[+-]?(\d+\.?\d*|\.\d+)([eE][+-]?\d{1,3})?", re.ASCII)
_KEYWORD = re.compile(r"([A-Z][A-Z0-9_]*)\s*=\s*(.*)", re.ASCII)
_GPS_MINUS_TAI_S = -19.0


class Entry(NamedTuple):
    """A keyword and its value; `line` is None in XML, whose reader counts none."""

    line: int | None
    key: str
    value: str


def keyword(text: str) -> tuple[str, str] | None:
    """Keyword and value of a KVN line, or None for a line that is none."""
    found = _KEYWORD.fullmatch(text.strip())
    return (found[1], found[2].strip()) if found else None


def kvn_lines(text: str) -> Iterator[tuple[int, str]]:
    """The lines that count, with their numbers: no comments, no empty ones."""
    for number, line in enumerate(text.split("\n"), start=1):
        stripped = line.strip()
        if stripped and not stripped.startswith("COMMENT"):
            yield number, stripped


def number(text: str) -> float:
    """A finite number; raises ValueError, for units behind it too."""
    if not _NUMBER.fullmatch(text):
        raise ValueError(f"expected a number without a unit, got {text[:40]!r}")
    value = float(text)
    if not isfinite(value):
        raise ValueError(f"expected a finite number, got {text[:40]!r}")
    return value


def epoch_s(text: str) -> float:
    """Seconds of an epoch, counted as if it were UTC; raises ValueError.

    Year, month and day, or year and day of the year; fractions of a second as long as they like.
    """
    found = _EPOCH.fullmatch(text)
    if not found:
        raise ValueError(f"expected an epoch like 2026-12-01T10:15:00.000, got {text[:40]!r}")
    year, month, day, day_of_year, hour, minute, second, fraction = found.groups()
    if second == "60":
        raise ValueError(f"expected a second of 0 to 59 (no leap second), got {text!r}")
    try:
        moment = datetime(
            int(year), int(month or 1), int(day or 1), int(hour), int(minute), int(second), 0, UTC
        )
        moment += timedelta(days=int(day_of_year or 1) - 1)
    except (ValueError, OverflowError):
        raise ValueError(f"expected an epoch that exists, got {text!r}") from None
    if day_of_year and moment.year != int(year):
        raise ValueError(f"expected an epoch that exists, got {text!r}")
    return moment.timestamp() + float(f"0{fraction}" if fraction and fraction != "." else 0.0)


def tai_clock(time_system: str, leap_seconds: LeapSeconds) -> Callable[[float], float]:
    """The function from `epoch_s` in a time system to POSIX seconds counted in TAI.

    Raises ValueError for a system that cannot be told exactly: UT1, sidereal time, the craft's own.
    """
    systems: dict[str, Callable[[float], float]] = {
        "UTC": lambda s: s + leap_seconds.at(s),
        "TAI": lambda s: s,
        "TT": lambda s: s - TT_MINUS_TAI_S,
        "GPS": lambda s: s - _GPS_MINUS_TAI_S,
        "TDB": lambda s: s - TT_MINUS_TAI_S - _tdb_minus_tt_s(s),
    }
    if time_system not in systems:
        known = ", ".join(systems)
        raise ValueError(f"expected one of the time systems {known}, got {time_system[:40]!r}")
    return systems[time_system]


def _tdb_minus_tt_s(tt_s: float) -> float:
    """Good to 0.03 ms: Explanatory Supplement to the Astronomical Almanac, equation 2.222-1."""
    days = (tt_s - 946_728_000.0) / 86400.0
    anomaly = 6.2400602 + 0.0172019699 * days
    return 0.001657 * sin(anomaly + 0.01671 * sin(anomaly))
