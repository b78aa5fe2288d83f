"""An orbit ephemeris message in keywords and values."""

from dataclasses import dataclass, field
from enum import Enum, auto

from trunnion.files.ccsds import Entry, keyword, kvn_lines
from trunnion.files.oem_blocks import RawMessage, RawSegment, RawState

VERSION = "CCSDS_OEM_VERS"


class _Part(Enum):
    HEADER = auto()
    METADATA = auto()
    STATES = auto()
    COVARIANCE = auto()


@dataclass
class _Reader:
    part: _Part = _Part.HEADER
    header: list[Entry] = field(default_factory=list)
    begin: int | None = None
    metadata: list[Entry] = field(default_factory=list)
    states: list[RawState] = field(default_factory=list)
    segments: list[RawSegment] = field(default_factory=list)
    problems: list[tuple[int | None, str]] = field(default_factory=list)

    def read(self, line: int, text: str) -> None:
        """Take in one line."""
        switch = _SWITCHES.get((self.part, text))
        if switch is not None:
            if text == "META_START":
                self.close()
                self.begin = line
            self.part = switch
        elif self.part is _Part.STATES:
            self._state(line, text)
        elif self.part is not _Part.COVARIANCE:
            self._entry(line, text)

    def close(self) -> None:
        """End the segment under way, if there is one."""
        if self.begin is not None:
            segment = RawSegment(self.begin, tuple(self.metadata), tuple(self.states))
            self.segments.append(segment)
        self.metadata, self.states = [], []

    def _entry(self, line: int, text: str) -> None:
        found = keyword(text)
        if found is None:
            self.problems.append((line, f"expected KEYWORD = value, got {text[:60]!r}"))
            return
        entries = self.header if self.part is _Part.HEADER else self.metadata
        entries.append(Entry(line, *found))

    def _state(self, line: int, text: str) -> None:
        epoch, *numbers = text.split()
        if len(numbers) in {6, 9}:
            self.states.append(RawState(line, epoch, tuple(numbers[:6])))
        else:
            message = "expected an epoch, three coordinates and three velocities without units"
            self.problems.append((line, f"{message}, got {text[:60]!r}"))


_SWITCHES = {
    (_Part.HEADER, "META_START"): _Part.METADATA,
    (_Part.METADATA, "META_STOP"): _Part.STATES,
    (_Part.STATES, "META_START"): _Part.METADATA,
    (_Part.STATES, "COVARIANCE_START"): _Part.COVARIANCE,
    (_Part.COVARIANCE, "COVARIANCE_STOP"): _Part.STATES,
}


def read_kvn(text: str) -> RawMessage:
    """The message's parts; what cannot be read is among its problems."""
    reader = _Reader()
    for line, content in kvn_lines(text):
        reader.read(line, content)
    reader.close()
    if reader.part in {_Part.METADATA, _Part.COVARIANCE}:
        reader.problems.append((None, "expected the end of a block that was begun, got none"))
    has_version = bool(reader.header) and reader.header[0].key == VERSION
    return RawMessage(
        reader.header[0] if has_version else None,
        tuple(reader.header[has_version:]),
        tuple(reader.segments),
        tuple(reader.problems),
    )
