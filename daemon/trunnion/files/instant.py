"""Instants in a file: ISO 8601 with Z or an offset, never a local time."""

from typing import Annotated

from pydantic import BeforeValidator, PlainSerializer, WithJsonSchema

from trunnion.files.instant_text import parse_instant
from trunnion.sky.instants import format_utc


def _instant(value: object) -> object:
    if isinstance(value, str):
        return parse_instant(value)
    raise ValueError(f"expected a time like 2026-12-01T10:15:00Z, got {value!r}")


Instant = Annotated[
    float,
    BeforeValidator(_instant),
    PlainSerializer(format_utc, when_used="json"),
    WithJsonSchema({"type": "string", "format": "date-time"}),
]
"""UTC as POSIX seconds; in the file ISO 8601 with Z or an offset."""
