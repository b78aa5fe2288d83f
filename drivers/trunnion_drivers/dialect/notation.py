r"""How messages are written down: what is sent as it stands, with fields in braces.

Text: `P{first:+08.3f},{second:07.3f}`; a brace itself is doubled. Binary: bytes in hexadecimal,
separated or not, as in `A5 01 {first:i32be} {checksum}`.
"""

import re
from dataclasses import dataclass
from enum import Enum


class Coding(Enum):
    """Whether messages are text or bytes."""

    TEXT = "text"
    BINARY = "binary"


@dataclass(frozen=True, slots=True)
class Field:
    """A place for a value: its name, and how it is written (empty for the checksum)."""

    name: str
    written_as: str


Part = bytes | Field

_FIELD = re.compile(r"\{(?P<name>[a-z_]+)(?::(?P<as>[^{}]*))?\}")
_TEXT = re.compile(r"(?:[^{}]|\{\{|\}\})+")


def parts_of(written: str, coding: Coding) -> tuple[Part, ...]:
    """Take a message's notation apart. Raises ValueError."""
    parts: list[Part] = []
    at = 0
    while at < len(written):
        field = _FIELD.match(written, at)
        text = _TEXT.match(written, at)
        if field:
            parts.append(Field(field["name"], field["as"] or ""))
            at = field.end()
        elif text:
            parts.append(literal(text[0].replace("{{", "{").replace("}}", "}"), coding))
            at = text.end()
        else:
            raise ValueError(
                f"expected a field such as {{first:07.2f}} at {written[at : at + 20]!r}; "
                "a brace itself is doubled"
            )
    return tuple(part for part in parts if part != b"")


def literal(written: str, coding: Coding) -> bytes:
    """What stands for itself: characters of ASCII, or bytes in hexadecimal. Raises ValueError."""
    if coding is Coding.TEXT:
        if not written.isascii():
            raise ValueError(f"expected ASCII characters, got {written!r}")
        return written.encode("ascii")
    try:
        return bytes.fromhex(written)
    except ValueError:
        raise ValueError(f"expected bytes such as 'A5 01', got {written!r}") from None
