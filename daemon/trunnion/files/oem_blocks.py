"""The raw content of an orbit ephemeris message, however it was written."""

from typing import NamedTuple

from trunnion.files.ccsds import Entry


class RawState(NamedTuple):
    """One node: its line (None in XML), epoch, and six numbers as text."""

    line: int | None
    epoch: str
    numbers: tuple[str, ...]


class RawSegment(NamedTuple):
    """Metadata and nodes between one META_START and the next."""

    line: int | None
    metadata: tuple[Entry, ...]
    states: tuple[RawState, ...]


class RawMessage(NamedTuple):
    """Version, header and segments, and what could not even be read: line and sentence."""

    version: Entry | None
    header: tuple[Entry, ...]
    segments: tuple[RawSegment, ...]
    problems: tuple[tuple[int | None, str], ...] = ()
