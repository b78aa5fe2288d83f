"""NMEA 0183 sentences, of which one is read: MWV, wind speed and angle. Pure.

`$WIMWV,214.8,R,0.1,K,A*28`: angle, reference (R relative, T true), speed, unit (K km/h, M m/s,
N knots, S statute miles per hour), status (A valid, V not). The checksum is the exclusive or of all
characters between $ and *, in two hexadecimal digits.
"""

import re
from collections.abc import Mapping
from types import MappingProxyType
from typing import NamedTuple

from trunnion_drivers.dialect.checksum import ChecksumKind
from trunnion_drivers.interface.errors import Garbled

_SENTENCE = re.compile(rb"\$([!-)+-~ ]{3,79})\*([0-9A-Fa-f]{2})")
_IN_M_S: Mapping[str, float] = MappingProxyType(
    {"K": 1000.0 / 3600.0, "M": 1.0, "N": 1852.0 / 3600.0, "S": 1609.344 / 3600.0}
)
_NUMBER = re.compile(r"\d{1,4}(\.\d{0,6})?")
_FIELDS = 6


class Wind(NamedTuple):
    """What one sentence says: where the wind comes from (deg; None if not told), and its speed."""

    direction_deg: float | None
    speed_m_s: float


def sentences(stream: bytes) -> tuple[list[str], bytes]:
    """The sound sentences in a stream, without $ and checksum, and what is left behind the last.

    A sentence whose checksum is wrong is passed over.
    """
    found, end = [], 0
    for match in _SENTENCE.finditer(stream):
        end = match.end()
        if ChecksumKind.XOR8.of(match[1]) == int(match[2], 16):
            found.append(match[1].decode("ascii"))
    return found, stream[end:]


def wind_of(sentence: str) -> Wind | None:
    """The wind that a sentence tells of; None for any other sentence. Raises Garbled.

    A sentence that says of itself that it is not valid is Garbled, not calm.
    """
    address, *fields = sentence.split(",")
    if address[2:] != "MWV":
        return None
    if len(fields) != _FIELDS - 1:
        raise Garbled(f"expected {_FIELDS} fields in an MWV sentence, got {sentence!r}")
    angle, _reference, speed, unit, status = fields
    if status != "A":
        raise Garbled(f"the anemometer says that its reading is not valid: {sentence!r}")
    if unit not in _IN_M_S or not _NUMBER.fullmatch(speed):
        raise Garbled(f"expected a speed and its unit, got {sentence!r}")
    direction_deg = float(angle) if _NUMBER.fullmatch(angle) else None
    return Wind(direction_deg, float(speed) * _IN_M_S[unit])
