"""Checksums of the common kinds; CRC parameters as in the published catalogues of them."""

import binascii
import zlib
from collections.abc import Callable, Mapping
from enum import Enum
from functools import reduce
from operator import xor
from types import MappingProxyType


class ChecksumKind(Enum):
    """How it is computed: sums and exclusive or of the bytes, or a cyclic redundancy check."""

    SUM8 = "sum8"
    SUM8_NEGATED = "sum8-negated"
    """The two's complement of the sum: message and checksum add up to zero."""
    XOR8 = "xor8"
    CRC16_MODBUS = "crc16-modbus"
    CRC16_XMODEM = "crc16-xmodem"
    CRC16_IBM_3740 = "crc16-ibm-3740"
    """Often called CCITT-FALSE: polynomial 1021, begun with FFFF."""
    CRC32 = "crc32"

    @property
    def size(self) -> int:
        """Its length in bytes."""
        return 4 if self is ChecksumKind.CRC32 else 2 if "crc16" in self.value else 1

    def of(self, data: bytes) -> int:
        """The checksum of these bytes."""
        return _COMPUTE[self](data)


def _crc16_modbus(data: bytes) -> int:
    """Polynomial 8005 reflected (A001), begun with FFFF: Modbus over serial line, section 6.2.2."""
    crc = 0xFFFF
    for byte in data:
        crc ^= byte
        for _ in range(8):
            crc = (crc >> 1) ^ (0xA001 if crc & 1 else 0)
    return crc


_COMPUTE: Mapping[ChecksumKind, Callable[[bytes], int]] = MappingProxyType(
    {
        ChecksumKind.SUM8: lambda data: sum(data) & 0xFF,
        ChecksumKind.SUM8_NEGATED: lambda data: -sum(data) & 0xFF,
        ChecksumKind.XOR8: lambda data: reduce(xor, data, 0),
        ChecksumKind.CRC16_MODBUS: _crc16_modbus,
        ChecksumKind.CRC16_XMODEM: lambda data: binascii.crc_hqx(data, 0),
        ChecksumKind.CRC16_IBM_3740: lambda data: binascii.crc_hqx(data, 0xFFFF),
        ChecksumKind.CRC32: zlib.crc32,
    }
)
