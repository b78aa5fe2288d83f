"""How a number stands in a message: as digits, or as bytes.

Every format turns a number into bytes, knows a pattern that matches such bytes and nothing else,
and turns them back.
"""

import re
import struct
from abc import ABC, abstractmethod
from dataclasses import dataclass
from types import MappingProxyType


class DoesNotFit(ValueError):  # noqa: N818 - named for what happened
    """The number cannot be written in this format."""


class NumberFormat(ABC):
    """One way of writing a number."""

    pattern: bytes
    """A regular expression without groups."""
    is_open_ended: bool = False
    """Whether its length is not known, so that digits behind it would be taken for its own."""

    @abstractmethod
    def encode(self, number: float) -> bytes:
        """Write the number, rounded to what the format holds. Raises DoesNotFit."""

    @abstractmethod
    def decode(self, written: bytes) -> float:
        """Read what the pattern has matched."""


@dataclass(frozen=True, slots=True)
class _Spec:
    plus: bool
    zeros: bool
    width: int
    places: int
    kind: str


_SPEC = re.compile(
    r"(?P<plus>\+?)(?P<zeros>0?)(?P<width>[1-9]\d?)?(?:\.(?P<places>\d))?(?P<kind>[dfxX])"
)


class Digits(NumberFormat):
    """Text, in the notation of Python's format(): `+08.3f`, `03d`, `02X`, `.1f`, `d`.

    Of a stated width, a number has exactly that many characters; else as many as it needs.
    """

    def __init__(self, spec: str) -> None:
        found = _SPEC.fullmatch(spec)
        if found is None or (found["places"] and found["kind"] != "f"):
            raise ValueError(f"expected a format such as +08.3f, 03d or 02X, got {spec!r}")
        self._text = spec
        self._spec = _Spec(
            bool(found["plus"]),
            bool(found["zeros"]),
            int(found["width"] or 0),
            int(found["places"] or 0) if found["kind"] == "f" else 0,
            found["kind"],
        )
        if self._spec.kind == "f" and found["places"] is None:
            raise ValueError(f"expected the number of decimal places, as in .2f, got {spec!r}")
        self.is_open_ended = self._spec.width == 0
        self.pattern = self._pattern().encode("ascii")

    def encode(self, number: float) -> bytes:
        """Write the number in digits."""
        value = round(number, self._spec.places) if self._spec.kind == "f" else round(number)
        written = format(value or abs(value), self._text)
        if self._spec.width and len(written) > self._spec.width:
            raise DoesNotFit(f"{number:g} needs more than {self._spec.width} characters")
        return written.encode("ascii")

    def decode(self, written: bytes) -> float:
        """Read digits."""
        text = written.decode("ascii").strip()
        return float(int(text, 16)) if self._spec.kind in "xX" else float(text)

    def _pattern(self) -> str:
        spec = self._spec
        digit = "[0-9A-Fa-f]" if spec.kind in "xX" else "[0-9]"
        decimals = rf"\.{digit}{{{spec.places}}}" if spec.places else ""
        if not spec.width:
            return f"{'[+-]' if spec.plus else '-?'}{digit}+{decimals}"
        after_point = spec.places + 1 if spec.places else 0
        shapes = (
            (spaces, sign, spec.width - spaces - bool(sign) - after_point)
            for spaces in range(1 if spec.zeros else spec.width)
            for sign in (("[+-]",) if spec.plus else ("", "-"))
        )
        ways = (
            f" {{{n}}}{sign}{digit}{{{left}}}{decimals}" for n, sign, left in shapes if left > 0
        )
        return f"(?:{'|'.join(ways)})"


_STRUCT = MappingProxyType(
    {
        "u8": ">B", "i8": ">b",
        "u16be": ">H", "i16be": ">h", "u16le": "<H", "i16le": "<h",
        "u32be": ">I", "i32be": ">i", "u32le": "<I", "i32le": "<i",
        "f32be": ">f", "f32le": "<f", "f64be": ">d", "f64le": "<d",
    }
)  # fmt: skip


class Bytes(NumberFormat):
    """Binary: `u` unsigned, `i` two's complement, `f` IEEE 754, bits, and which end comes first."""

    def __init__(self, name: str) -> None:
        if name not in _STRUCT:
            known = ", ".join(_STRUCT)
            raise ValueError(f"expected one of {known}, bcd6, or dec4+30, got {name!r}")
        self._struct = struct.Struct(_STRUCT[name])
        self._is_whole = name[0] in "ui"
        self._name = name
        self.pattern = b"(?s:.{%d})" % self._struct.size

    def encode(self, number: float) -> bytes:
        """Write the number in bytes."""
        try:
            return self._struct.pack(round(number) if self._is_whole else number)
        except (struct.error, OverflowError) as error:
            raise DoesNotFit(f"{number:g} does not fit into {self._name}") from error

    def decode(self, written: bytes) -> float:
        """Read bytes."""
        return float(self._struct.unpack(written)[0])


class PackedDecimal(NumberFormat):
    """Binary-coded decimal: `bcd6` holds six digits, two in a byte, the higher one first."""

    def __init__(self, name: str) -> None:
        self._digits = int(name.removeprefix("bcd"))
        self.pattern = b"[%s]{%d}" % (_PACKED, self._digits // 2)

    def encode(self, number: float) -> bytes:
        """Write the number in halves of bytes."""
        return bytes.fromhex(_decimal(number, self._digits))

    def decode(self, written: bytes) -> float:
        """Read halves of bytes."""
        return float(written.hex())


class OffsetDigits(NumberFormat):
    """`dec4+30`: four bytes, one a digit, each the digit and 30 (hexadecimal), as in ASCII."""

    def __init__(self, name: str) -> None:
        digits, _, offset = name.removeprefix("dec").partition("+")
        self._digits, self._offset = int(digits), int(offset or "0", 16)
        if self._offset > 0xF6:
            raise ValueError(f"expected an offset up to F6, got {name!r}")
        low, high = self._offset, self._offset + 9
        self.pattern = rb"[\x%02x-\x%02x]{%d}" % (low, high, self._digits)

    def encode(self, number: float) -> bytes:
        """Write a byte for each digit."""
        return bytes(int(digit) + self._offset for digit in _decimal(number, self._digits))

    def decode(self, written: bytes) -> float:
        """Read a digit from each byte."""
        return float("".join(str(byte - self._offset) for byte in written))


_BCD = re.compile(r"bcd(?:2|4|6|8|10|12)")
_DECIMAL = re.compile(r"dec[1-9](?:\+[0-9A-Fa-f]{2})?")
_PACKED = b"".join(rb"\x%x0-\x%x9" % (tens, tens) for tens in range(10))


def binary(name: str) -> NumberFormat:
    """The format that a binary message names. Raises ValueError."""
    if _BCD.fullmatch(name):
        return PackedDecimal(name)
    return OffsetDigits(name) if _DECIMAL.fullmatch(name) else Bytes(name)


def _decimal(number: float, digits: int) -> str:
    whole = round(number)
    if not 0 <= whole < 10**digits:
        raise DoesNotFit(f"{number:g} is not a number of {digits} decimal digits without a sign")
    return f"{whole:0{digits}d}"
