"""Instants as users write them: ISO 8601 with Z or an offset, within the time of spacecraft."""

from trunnion.sky.instants import parse_utc

_FIRST_S = -386_380_800.0  # 1957-10-04T00:00:00Z
_LAST_S = 4_102_444_800.0  # 2100-01-01T00:00:00Z


def parse_instant(text: str) -> float:
    """Return UTC as POSIX seconds; raises ValueError for another notation or another century."""
    utc_s = parse_utc(text)
    if not _FIRST_S <= utc_s <= _LAST_S:
        raise ValueError(f"expected a time from 1957-10-04 to 2100-01-01, got {text[:40]!r}")
    return utc_s
