"""Numbers in registers of 16 bits. Pure.

Within a register the high byte comes first, as Modbus has it; of a number that takes two registers
the standard does not say which comes first, so the word order must be given.
"""

import struct
from collections.abc import Iterable, Mapping, Sequence
from enum import Enum
from types import MappingProxyType

from trunnion_drivers.interface.errors import WrongState


class RegisterType(Enum):
    """How a number is written: signed or unsigned, or IEEE 754, in one register or two."""

    I16 = "i16"
    U16 = "u16"
    I32 = "i32"
    U32 = "u32"
    F32 = "f32"

    @property
    def count(self) -> int:
        """How many registers it takes."""
        return 1 if self in (RegisterType.I16, RegisterType.U16) else 2


class WordOrder(Enum):
    """Which register of a number that takes two comes first."""

    HIGH_FIRST = "high-first"
    LOW_FIRST = "low-first"


_STRUCT: Mapping[RegisterType, str] = MappingProxyType(
    {
        RegisterType.I16: ">h",
        RegisterType.U16: ">H",
        RegisterType.I32: ">i",
        RegisterType.U32: ">I",
        RegisterType.F32: ">f",
    }
)


def encode(number: float, kind: RegisterType, order: WordOrder) -> list[int]:
    """The registers that hold this number, rounded if they hold whole ones. Raises WrongState."""
    value = number if kind is RegisterType.F32 else round(number)
    try:
        data = struct.pack(_STRUCT[kind], value)
    except (struct.error, OverflowError) as error:
        raise WrongState(f"{number:g} does not fit into registers of type {kind.value}") from error
    words = list(struct.unpack(f">{kind.count}H", data))
    return words if order is WordOrder.HIGH_FIRST else words[::-1]


def decode(words: Sequence[int], kind: RegisterType, order: WordOrder) -> float:
    """The number that these registers hold."""
    ordered = words if order is WordOrder.HIGH_FIRST else list(reversed(words))
    data = struct.pack(f">{kind.count}H", *ordered)
    return float(struct.unpack(_STRUCT[kind], data)[0])


def blocks(words: Mapping[int, int]) -> list[tuple[int, list[int]]]:
    """Registers by address as runs without a gap: the first address of each, and its values."""
    return [(run.start, [words[address] for address in run]) for run in runs(words)]


def runs(addresses: Iterable[int]) -> list[range]:
    """Addresses as ranges without a gap, so that each can be asked for at once."""
    found: list[range] = []
    for address in sorted(set(addresses)):
        if found and address == found[-1].stop:
            found[-1] = range(found[-1].start, address + 1)
        else:
            found.append(range(address, address + 1))
    return found
