"""One kind of message: values into bytes, and bytes back into values."""

import re
from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from itertools import pairwise
from typing import NamedTuple

from trunnion_drivers.dialect.checksum import ChecksumKind
from trunnion_drivers.dialect.notation import Coding, Field, Part, parts_of
from trunnion_drivers.dialect.numbers import Digits, NumberFormat, binary

CHECKSUM = "checksum"


@dataclass(frozen=True, slots=True)
class Frame:
    """What all messages of a dialect share.

    `begin` and `end` stand around each. The checksum covers everything before it from byte
    `checksum_from` on, and is written as `checksum_as`.
    """

    coding: Coding
    begin: bytes = b""
    end: bytes = b""
    checksum: ChecksumKind | None = None
    checksum_from: int = 0
    checksum_as: str = ""


class Found(NamedTuple):
    """The values of a message found in a stream, and where it begins and ends there."""

    values: Mapping[str, float]
    begin: int
    end: int


class Message:
    """Compiled from its notation. Raises ValueError where that is ambiguous or wrong."""

    def __init__(self, written: str, frame: Frame) -> None:
        self.written = written
        self._frame = frame
        parts = parts_of(written, frame.coding)
        self._parts: tuple[Part, ...] = tuple(p for p in (frame.begin, *parts, frame.end) if p)
        self._formats = {
            part.name: _format(part, frame) for part in self._parts if isinstance(part, Field)
        }
        _must_be_clear(self._parts, self._formats)
        self._pattern = re.compile(self._in_pattern())

    @property
    def fields(self) -> frozenset[str]:
        """The names of its values, without the checksum."""
        return frozenset(self._formats) - {CHECKSUM}

    def encode(self, values: Mapping[str, float]) -> bytes:
        """Write the message. Raises DoesNotFit; KeyError for a value that is not given."""
        written = b""
        for part in self._parts:
            if isinstance(part, bytes):
                written += part
            elif part.name == CHECKSUM:
                written += self._formats[CHECKSUM].encode(self._checksum_of(written))
            else:
                written += self._formats[part.name].encode(values[part.name])
        return written

    def find(self, stream: bytes) -> Found | None:
        """The first such message in a stream whose checksum is right; None where there is none.

        A text message begins at the stream's start or behind the end of another one; a binary one
        may begin anywhere.
        """
        at = 0
        while (match := self._pattern.search(stream, at)) is not None:
            written = match[0]
            values = {name: form.decode(match[name]) for name, form in self._formats.items()}
            if self._is_sound(match, written, values):
                values.pop(CHECKSUM, None)
                return Found(values, match.start(), match.end())
            at = match.start() + 1
        return None

    def _is_sound(self, match: re.Match[bytes], written: bytes, values: dict[str, float]) -> bool:
        if CHECKSUM not in self._formats:
            return True
        covered = written[: match.start(CHECKSUM) - match.start()]
        return int(values[CHECKSUM]) == self._checksum_of(covered)

    def _checksum_of(self, covered: bytes) -> int:
        kind = self._frame.checksum
        if kind is None:
            raise ValueError("expected a checksum's kind in the section `checksum`")
        return kind.of(covered[self._frame.checksum_from :])

    def _in_pattern(self) -> bytes:
        inner = b"".join(
            re.escape(part)
            if isinstance(part, bytes)
            else b"(?P<%s>%s)" % (part.name.encode(), self._formats[part.name].pattern)
            for part in self._parts
        )
        if self._frame.coding is Coding.BINARY:
            return inner
        behind = rb"|(?<=%s)" % re.escape(self._frame.end) if self._frame.end else b""
        return rb"(?:\A%s)%s" % (behind, inner)


def _format(field: Field, frame: Frame) -> NumberFormat:
    written_as = field.written_as
    if field.name == CHECKSUM:
        if frame.checksum is None:
            raise ValueError("expected a section `checksum`, since a message has a {checksum}")
        written_as = written_as or frame.checksum_as
    if frame.coding is Coding.BINARY:
        return binary(written_as)
    return Digits(written_as)


def _must_be_clear(parts: Sequence[Part], formats: Mapping[str, NumberFormat]) -> None:
    names = [part.name for part in parts if isinstance(part, Field)]
    twice = sorted({name for name in names if names.count(name) > 1})
    if twice:
        raise ValueError(f"expected every field once, got {twice[0]!r} twice")
    if not parts:
        raise ValueError("expected a message, got an empty one")
    for part, after in pairwise(parts):
        if isinstance(part, Field) and formats[part.name].is_open_ended:
            _must_end_number(part, after)


def _must_end_number(field: Field, after: Part) -> None:
    """A number of any length must be followed by what cannot belong to it."""
    if isinstance(after, Field) or chr(after[0]) in "0123456789abcdefABCDEF.":
        raise ValueError(
            f"ambiguous: {field.name!r} has no stated width, and what follows could be part of it"
        )
