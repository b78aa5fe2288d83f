"""Frames of Modbus, as a server takes them in and answers: pure, RTU and TCP.

Modbus Application Protocol V1.1b3, sections 6.1 to 6.12, and Modbus over serial line V1.02.
"""

from typing import NamedTuple, Protocol

from trunnion_drivers.dialect.checksum import ChecksumKind

_CRC_SIZE = 2
_HEADER_SIZE = 7
_WRITE_MANY = (15, 16)


class Request(NamedTuple):
    """What a client asks of a unit; `tag` is what its framing must give back."""

    unit: int
    pdu: bytes
    tag: bytes


class Framing(Protocol):
    """How requests are cut out of what has come, and answers are wrapped."""

    def take(self, come: bytes) -> tuple[Request | None, bytes]:
        """The first whole request, and what is left; None where more must come."""
        ...

    def wrap(self, request: Request, pdu: bytes) -> bytes:
        """The answer to a request as it goes out."""
        ...


class Rtu:
    """Unit, function and data, and a CRC; frames are told apart by their lengths."""

    def take(self, come: bytes) -> tuple[Request | None, bytes]:
        """Bytes that begin no sound frame are dropped one by one."""
        while len(come) >= _CRC_SIZE + 2:
            length = _rtu_length(come)
            if length > len(come):
                return None, come
            frame = come[:length]
            if _crc(frame[:-_CRC_SIZE]) == frame[-_CRC_SIZE:]:
                return Request(frame[0], frame[1:-_CRC_SIZE], b""), come[length:]
            come = come[1:]
        return None, come

    def wrap(self, request: Request, pdu: bytes) -> bytes:
        """Add unit and CRC."""
        body = bytes([request.unit]) + pdu
        return body + _crc(body)


class Tcp:
    """The MBAP header: transaction, protocol 0, length, unit."""

    def take(self, come: bytes) -> tuple[Request | None, bytes]:
        """Cut by the header's length."""
        if len(come) < _HEADER_SIZE:
            return None, come
        length = int.from_bytes(come[4:6], "big")
        end = 6 + length
        if len(come) < end:
            return None, come
        return Request(come[6], come[_HEADER_SIZE:end], come[:2]), come[end:]

    def wrap(self, request: Request, pdu: bytes) -> bytes:
        """Add the header."""
        length = (len(pdu) + 1).to_bytes(2, "big")
        return request.tag + b"\0\0" + length + bytes([request.unit]) + pdu


def _rtu_length(come: bytes) -> int:
    """Length of the request that begins here, as its function tells."""
    if come[1] in _WRITE_MANY:
        return 9 + come[6] if len(come) > 6 else 9
    return 8


def _crc(data: bytes) -> bytes:
    return ChecksumKind.CRC16_MODBUS.of(data).to_bytes(2, "little")
