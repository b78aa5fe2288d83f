"""Checksums against their published check values.

The check value of a CRC is that of the nine characters 123456789, as in the Catalogue of
parametrised CRC algorithms (G. Cook, reveng.sourceforge.io/crc-catalogue): CRC-16/MODBUS 4B37,
CRC-16/XMODEM 31C3, CRC-16/IBM-3740 29B1, CRC-32/ISO-HDLC CBF43926 (values from memory).
The Modbus frame is the worked example of "MODBUS over serial line specification and implementation
guide V1.02", appendix B: 02 07 gives the bytes 41 12 (from memory).
The NMEA 0183 checksum is the exclusive or of all characters between $ and *.
"""

import pytest

from trunnion_drivers.dialect.checksum import ChecksumKind


@pytest.mark.parametrize(
    ("kind", "expected"),
    [
        (ChecksumKind.CRC16_MODBUS, 0x4B37),
        (ChecksumKind.CRC16_XMODEM, 0x31C3),
        (ChecksumKind.CRC16_IBM_3740, 0x29B1),
        (ChecksumKind.CRC32, 0xCBF43926),
    ],
)
def test_check_values_of_the_crc_catalogue(kind: ChecksumKind, expected: int) -> None:
    assert kind.of(b"123456789") == expected


def test_worked_example_of_the_modbus_guide() -> None:
    assert ChecksumKind.CRC16_MODBUS.of(b"\x02\x07").to_bytes(2, "little") == b"\x41\x12"


def test_sums_add_up() -> None:
    data = bytes(range(3, 240, 7))
    assert (sum(data) + ChecksumKind.SUM8_NEGATED.of(data)) % 256 == 0
    assert ChecksumKind.SUM8.of(data) == sum(data) % 256
