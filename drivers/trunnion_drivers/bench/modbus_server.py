"""The server's half of Modbus: requests in, answers out, over tables that somebody else fills.

Modbus Application Protocol V1.1b3, sections 6.1 to 6.6, 6.11 and 6.12; exceptions: section 7.
"""

from collections.abc import Callable, Mapping
from enum import IntEnum
from typing import Protocol

from trunnion_drivers.bench.modbus_frames import Framing, Request

_ON = b"\xff\x00"
_MOST = 2000


class _Exception(IntEnum):
    ILLEGAL_FUNCTION = 1
    ILLEGAL_ADDRESS = 2


class Tables(Protocol):
    """The four tables at one instant; KeyError or ValueError for an address that is none."""

    def coil(self, address: int) -> bool:
        """One coil."""
        ...

    def input(self, address: int) -> bool:
        """One discrete input."""
        ...

    def holding(self, address: int) -> int:
        """One holding register."""
        ...

    def input_register(self, address: int) -> int:
        """One input register."""
        ...

    def set_coils(self, states: Mapping[int, bool]) -> None:
        """Write coils by address."""
        ...

    def set_holding(self, words: Mapping[int, int]) -> None:
        """Write holding registers by address, all at once."""
        ...


class ModbusServer:
    """Answers functions 1 to 6, 15 and 16 for one unit, and nothing for any other."""

    def __init__(self, unit: int, framing: Framing) -> None:
        self._unit = unit
        self._framing = framing
        self._buffer = b""

    def hear(self, come: bytes, tables: Tables) -> bytes:
        """Answer every whole request."""
        self._buffer += come
        said = b""
        while True:
            request, self._buffer = self._framing.take(self._buffer)
            if request is None:
                return said
            if request.unit == self._unit:
                said += self._framing.wrap(request, _answer(request, tables))


def _answer(request: Request, tables: Tables) -> bytes:
    function, data = request.pdu[0], request.pdu[1:]
    known: Mapping[int, Callable[[bytes, Tables], bytes]] = {
        1: lambda data, tables: _bits([tables.coil(at) for at in _span(data)]),
        2: lambda data, tables: _bits([tables.input(at) for at in _span(data)]),
        3: lambda data, tables: _words([tables.holding(at) for at in _span(data)]),
        4: lambda data, tables: _words([tables.input_register(at) for at in _span(data)]),
        5: _write_coil,
        6: _write_register,
        15: _write_coils,
        16: _write_registers,
    }
    if function not in known:
        return bytes([function | 0x80, _Exception.ILLEGAL_FUNCTION])
    try:
        return bytes([function]) + known[function](data, tables)
    except (KeyError, ValueError):
        return bytes([function | 0x80, _Exception.ILLEGAL_ADDRESS])


def _write_coil(data: bytes, tables: Tables) -> bytes:
    tables.set_coils({_word(data[:2]): data[2:4] == _ON})
    return data


def _write_coils(data: bytes, tables: Tables) -> bytes:
    packed = int.from_bytes(data[5:], "little")
    tables.set_coils({at: bool(packed >> n & 1) for n, at in enumerate(_span(data))})
    return data[:4]


def _write_register(data: bytes, tables: Tables) -> bytes:
    tables.set_holding({_word(data[:2]): _word(data[2:4])})
    return data


def _write_registers(data: bytes, tables: Tables) -> bytes:
    words = [_word(data[at : at + 2]) for at in range(5, len(data), 2)]
    tables.set_holding(dict(zip(_span(data), words, strict=True)))
    return data[:4]


def _span(data: bytes) -> range:
    begin, count = _word(data[:2]), _word(data[2:4])
    if not 1 <= count <= _MOST:
        raise ValueError(f"expected 1 to {_MOST} of them, got {count}")
    return range(begin, begin + count)


def _word(data: bytes) -> int:
    return int.from_bytes(data, "big")


def _words(words: list[int]) -> bytes:
    data = b"".join(word.to_bytes(2, "big") for word in words)
    return bytes([len(data)]) + data


def _bits(states: list[bool]) -> bytes:
    packed = sum(state << number for number, state in enumerate(states))
    size = (len(states) + 7) // 8
    return bytes([size]) + packed.to_bytes(size, "little")
