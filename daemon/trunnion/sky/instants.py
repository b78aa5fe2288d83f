"""Instants: UTC as POSIX seconds inside, ISO 8601 at every boundary, Julian dates for astronomy.

Standard library only. POSIX seconds have no name for a leap second: second 60 of a minute is
refused, by name, rather than moved.
"""

import re
from datetime import UTC, datetime

UNIX_EPOCH_JD = 2440587.5
"""Julian date of 1970-01-01T00:00 UTC."""

SECONDS_A_DAY = 86400.0

_EXPECTED = "expected a time like 2026-12-01T10:15:00Z, with Z or an offset from UTC"
_LEAP_SECOND = re.compile(r"\d{2}:\d{2}:60")


def parse_utc(text: str) -> float:
    """UTC as POSIX seconds of a time in ISO 8601; raises ValueError unless it says its offset."""
    text = text.strip()
    if _LEAP_SECOND.search(text):
        raise ValueError(f"expected a second of 0 to 59 (no leap second), got {text[:40]!r}")
    try:
        moment = datetime.fromisoformat(text)
    except ValueError:
        raise ValueError(f"{_EXPECTED}, got {text[:40]!r}") from None
    if moment.tzinfo is None:
        raise ValueError(f"{_EXPECTED}, got {text[:40]!r}, which has none")
    return moment.timestamp()


def format_utc(utc_s: float, digits: int = 3) -> str:
    """ISO 8601 with Z, rounded to this many digits of a second."""
    scale = 10**digits
    ticks = round(utc_s * scale)
    seconds, fraction = divmod(ticks, scale)
    moment = datetime.fromtimestamp(seconds, UTC).strftime("%Y-%m-%dT%H:%M:%S")
    return f"{moment}.{fraction:0{digits}d}Z" if digits else f"{moment}Z"


def julian_date(utc_s: float) -> tuple[float, float]:
    """Julian date (UTC) as the midnight before and the fraction of a day since, exactly split."""
    days = utc_s // SECONDS_A_DAY
    return UNIX_EPOCH_JD + days, (utc_s - days * SECONDS_A_DAY) / SECONDS_A_DAY
