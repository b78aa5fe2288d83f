"""A simulated machine as a Modbus server, by the same map that its driver has."""

from collections.abc import Callable
from enum import IntEnum

from trunnion_drivers.bench.modbus_frames import Framing, Request
from trunnion_drivers.control.command import CommandMode, Rates, Switches, Turn
from trunnion_drivers.interface.values import DriverMotion
from trunnion_drivers.modbus.registers import decode, encode
from trunnion_drivers.modbus.settings import JointMap, ModbusSettings
from trunnion_drivers.simulator.machine import SimulatedMachine

_ON = b"\xff\x00"


class _Exception(IntEnum):
    """Exception codes of the standard, section 7."""

    ILLEGAL_FUNCTION = 1
    ILLEGAL_ADDRESS = 2


class ModbusPeer:
    """Answers functions 1 to 6, 15 and 16."""

    def __init__(
        self, settings: ModbusSettings, machine: SimulatedMachine, framing: Framing
    ) -> None:
        self._settings = settings
        self._machine = machine
        self._framing = framing
        self._buffer = b""
        self._holding: dict[int, int] = {}
        self._coils: dict[int, bool] = {}
        if settings.power is not None:
            self._coils[settings.power] = True

    def hear(self, mono_s: float, come: bytes) -> bytes:
        """Answer every whole request that is for this unit."""
        self._buffer += come
        said = b""
        while True:
            request, self._buffer = self._framing.take(self._buffer)
            if request is None:
                return said
            if request.unit == self._settings.unit:
                said += self._framing.wrap(request, self._answer(mono_s, request))

    def says_unasked(self, _mono_s: float) -> bytes:
        """A server never does."""
        return b""

    def _answer(self, mono_s: float, request: Request) -> bytes:
        function, data = request.pdu[0], request.pdu[1:]
        known: dict[int, Callable[[float, bytes], bytes]] = {
            1: self._read_coils,
            2: self._read_inputs,
            3: self._read_holding,
            4: self._read_input_registers,
            5: self._write_coil,
            6: self._write_register,
            15: self._write_coils,
            16: self._write_registers,
        }
        if function not in known:
            return bytes([function | 0x80, _Exception.ILLEGAL_FUNCTION])
        try:
            return bytes([function]) + known[function](mono_s, data)
        except (KeyError, ValueError):
            return bytes([function | 0x80, _Exception.ILLEGAL_ADDRESS])

    def _read_coils(self, _mono_s: float, data: bytes) -> bytes:
        return _bits([self._coils.get(address, False) for address in _span(data)])

    def _read_inputs(self, mono_s: float, data: bytes) -> bytes:
        look, stop = self._machine.look(mono_s), self._settings.stop_input
        inputs = dict.fromkeys(self._settings.limits, look.at_limit)
        if stop is not None:
            inputs[stop.input] = look.stop_pressed is stop.pressed_when
        return _bits([inputs[address] for address in _span(data)])

    def _read_holding(self, mono_s: float, data: bytes) -> bytes:
        words = {**self._holding, **self._angle_words(mono_s)}
        return _words([words.get(address, 0) for address in _span(data)])

    def _read_input_registers(self, mono_s: float, data: bytes) -> bytes:
        words = self._angle_words(mono_s)
        return _words([words.get(address, 0) for address in _span(data)])

    def _write_coil(self, mono_s: float, data: bytes) -> bytes:
        self._set_coil(mono_s, int.from_bytes(data[:2], "big"), is_on=data[2:4] == _ON)
        return data

    def _write_coils(self, mono_s: float, data: bytes) -> bytes:
        for number, address in enumerate(_span(data)):
            is_on = bool(data[5 + number // 8] >> number % 8 & 1)
            self._set_coil(mono_s, address, is_on=is_on)
        return data[:4]

    def _write_register(self, mono_s: float, data: bytes) -> bytes:
        self._set_registers(mono_s, {int.from_bytes(data[:2], "big"): _word(data[2:4])})
        return data

    def _write_registers(self, mono_s: float, data: bytes) -> bytes:
        words = [_word(data[at : at + 2]) for at in range(5, len(data), 2)]
        self._set_registers(mono_s, dict(zip(_span(data), words, strict=True)))
        return data[:4]

    def _set_coil(self, mono_s: float, address: int, *, is_on: bool) -> None:
        self._coils[address] = is_on
        settings = self._settings
        if address == settings.halt.coil and is_on == bool(settings.halt.value):
            self._machine.halt(mono_s)
        elif address == settings.power:
            self._machine.cut_power(mono_s, is_cut=not is_on)
        elif address == settings.go and is_on:
            self._go(mono_s)
        elif settings.command is CommandMode.ON_OFF:
            self._machine.command(mono_s, Switches(*map(self._turn, self._joints)))

    def _set_registers(self, mono_s: float, words: dict[int, int]) -> None:
        self._holding |= words
        halt = self._settings.halt
        if halt.register_address is not None and words.get(halt.register_address) == halt.value:
            self._machine.halt(mono_s)
        goals = {joint.write for joint in self._joints} | {j.write_rate for j in self._joints}
        if self._settings.go is None and goals & words.keys():
            self._go(mono_s)

    def _go(self, mono_s: float) -> None:
        rates = [self._rate(joint) for joint in self._joints]
        if self._settings.command is CommandMode.RATE:
            self._machine.command(mono_s, Rates(*rates))
        else:
            now = self._machine.true_motion(mono_s)
            goal = [self._goal(joint, now[n]) for n, joint in enumerate(self._joints)]
            self._machine.command(mono_s, DriverMotion(*goal, *rates))

    @property
    def _joints(self) -> tuple[JointMap, JointMap]:
        return self._settings.first, self._settings.second

    def _goal(self, joint: JointMap, now_deg: float) -> float:
        if joint.write is None or joint.write not in self._holding:
            return now_deg
        words = [self._holding.get(joint.write + n, 0) for n in range(joint.type.count)]
        return joint.scale().angle_deg(decode(words, joint.type, self._settings.word_order))

    def _rate(self, joint: JointMap) -> float:
        at = joint.write_rate
        if at is None:
            return 0.0
        words = [self._holding.get(at + n, 0) for n in range(joint.rate_type.count)]
        return joint.scale().rate_deg_s(decode(words, joint.rate_type, self._settings.word_order))

    def _turn(self, joint: JointMap) -> Turn:
        up, down = (joint.down, joint.up) if joint.reversed else (joint.up, joint.down)
        if up is not None and self._coils.get(up, False):
            return Turn.UP
        return Turn.DOWN if down is not None and self._coils.get(down, False) else Turn.OFF

    def _angle_words(self, mono_s: float) -> dict[int, int]:
        look = self._machine.look(mono_s)
        angles = look.first_deg, look.second_deg
        return {
            joint.read + n: word
            for joint, angle_deg in zip(self._joints, angles, strict=True)
            for n, word in enumerate(
                encode(joint.scale().written(angle_deg), joint.type, self._settings.word_order)
            )
        }


def _span(data: bytes) -> range:
    begin, count = int.from_bytes(data[:2], "big"), int.from_bytes(data[2:4], "big")
    if not 1 <= count <= 2000:
        raise ValueError(f"expected 1 to 2000 of them, got {count}")
    return range(begin, begin + count)


def _word(data: bytes) -> int:
    return int.from_bytes(data, "big")


def _words(words: list[int]) -> bytes:
    data = b"".join(word.to_bytes(2, "big") for word in words)
    return bytes([len(data)]) + data


def _bits(states: list[bool]) -> bytes:
    size = (len(states) + 7) // 8
    packed = sum(state << number for number, state in enumerate(states))
    return bytes([size]) + packed.to_bytes(size, "little")
