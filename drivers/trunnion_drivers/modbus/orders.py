"""Commands as writes to registers and coils, and what was read as a reading. Pure."""

from collections.abc import Mapping, Sequence
from typing import NamedTuple

from trunnion_drivers.control.command import Command, Rates, Switches, Turn
from trunnion_drivers.interface.values import DriverMotion
from trunnion_drivers.modbus.registers import decode, encode
from trunnion_drivers.modbus.settings import JointMap, ModbusSettings


class Writes(NamedTuple):
    """Holding registers and coils by address; registers are written first."""

    registers: Mapping[int, int]
    coils: Mapping[int, bool]


def writes_for(settings: ModbusSettings, command: Command) -> Writes:
    """What to write for a command. Raises WrongState for what no register can hold."""
    joints = settings.first, settings.second
    registers: dict[int, int] = {}
    coils: dict[int, bool] = {}
    for number, joint in enumerate(joints):
        match command:
            case DriverMotion():
                registers |= _angle(settings, joint, command[number])
                registers |= _rate(settings, joint, command[number + 2])
            case Rates():
                registers |= _rate(settings, joint, command[number])
            case Switches():
                coils |= _switches(joint, command[number])
    if settings.go is not None and not isinstance(command, Switches):
        coils[settings.go] = True
    return Writes(registers, coils)


def writes_for_halt(settings: ModbusSettings) -> Writes:
    """What to write to bring the mount to rest."""
    halt = settings.halt
    if halt.coil is not None:
        return Writes({}, {halt.coil: bool(halt.value)})
    assert halt.register_address is not None  # noqa: S101 - the settings see to it
    return Writes({halt.register_address: halt.value}, {})


def angle_block(settings: ModbusSettings) -> tuple[int, int]:
    """The first register to read, and how many, to get both angles at once."""
    joints = settings.first, settings.second
    begin = min(joint.read for joint in joints)
    return begin, max(joint.read + joint.type.count for joint in joints) - begin


def angles_deg(settings: ModbusSettings, begin: int, words: Sequence[int]) -> tuple[float, float]:
    """Both angles (deg) in a block of registers that begins at this address."""
    first, second = (
        joint.scale().angle_deg(
            decode(
                words[joint.read - begin : joint.read - begin + joint.type.count],
                joint.type,
                settings.word_order,
            )
        )
        for joint in (settings.first, settings.second)
    )
    return first, second


def _angle(settings: ModbusSettings, joint: JointMap, angle_deg: float) -> dict[int, int]:
    if joint.write is None:
        return {}
    words = encode(joint.scale().written(angle_deg), joint.type, settings.word_order)
    return {joint.write + n: word for n, word in enumerate(words)}


def _rate(settings: ModbusSettings, joint: JointMap, rate_deg_s: float) -> dict[int, int]:
    if joint.write_rate is None:
        return {}
    written = joint.scale().written_rate(rate_deg_s)
    words = encode(written, joint.rate_type, settings.word_order)
    return {joint.write_rate + n: word for n, word in enumerate(words)}


def _switches(joint: JointMap, turn: Turn) -> dict[int, bool]:
    """The coil that goes off stands first, so that both are never on."""
    up, down = (joint.down, joint.up) if joint.reversed else (joint.up, joint.down)
    assert up is not None  # noqa: S101 - the settings see to it
    assert down is not None  # noqa: S101
    states = {up: turn is Turn.UP, down: turn is Turn.DOWN}
    return dict(sorted(states.items(), key=lambda state: state[1]))
