"""A simulated machine as a Modbus server, by the same map that its driver has."""

from collections.abc import Mapping

from trunnion_drivers.bench.modbus_frames import Framing
from trunnion_drivers.bench.modbus_server import ModbusServer
from trunnion_drivers.control.command import CommandMode, Rates, Switches, Turn
from trunnion_drivers.interface.values import DriverMotion
from trunnion_drivers.modbus.registers import decode, encode
from trunnion_drivers.modbus.settings import JointMap, ModbusSettings
from trunnion_drivers.simulator.machine import SimulatedMachine


class ModbusPeer:
    """The machine's tables behind a server."""

    def __init__(
        self, settings: ModbusSettings, machine: SimulatedMachine, framing: Framing
    ) -> None:
        self._server = ModbusServer(settings.unit, framing)
        self._tables = MachineTables(settings, machine)

    def hear(self, mono_s: float, come: bytes) -> bytes:
        """Answer every whole request that is for this unit."""
        self._tables.mono_s = mono_s
        return self._server.hear(come, self._tables)

    def says_unasked(self, _mono_s: float) -> bytes:
        """A server never does."""
        return b""


class MachineTables:
    """What is read is the machine's state at `mono_s`; what is written commands it."""

    def __init__(self, settings: ModbusSettings, machine: SimulatedMachine) -> None:
        self.mono_s = 0.0
        self._settings = settings
        self._joints = settings.first, settings.second
        self._machine = machine
        self._holding: dict[int, int] = {}
        self._coils: dict[int, bool] = {}
        if settings.power is not None:
            self._coils[settings.power] = True

    def coil(self, address: int) -> bool:
        """What was written last."""
        return self._coils.get(address, False)

    def input(self, address: int) -> bool:
        """The stop input and the limit switches; KeyError for any other."""
        look, stop = self._machine.look(self.mono_s), self._settings.stop_input
        if stop is not None and address == stop.input:
            return look.stop_pressed is stop.pressed_when
        if address not in self._settings.limits:
            raise KeyError(address)
        return look.at_limit

    def holding(self, address: int) -> int:
        """An angle, or what was written last."""
        return self._angle_words().get(address, self._holding.get(address, 0))

    def input_register(self, address: int) -> int:
        """An angle, or zero."""
        return self._angle_words().get(address, 0)

    def set_coils(self, states: Mapping[int, bool]) -> None:
        """Halt, cut the power, go, or switch the motors."""
        self._coils |= states
        for address, is_on in states.items():
            self._obey(address, is_on=is_on)
        contacts = {at for joint in self._joints for at in (joint.up, joint.down)}
        if self._settings.command is CommandMode.ON_OFF and contacts & states.keys():
            self._machine.command(self.mono_s, Switches(*map(self._turn, self._joints)))

    def set_holding(self, words: Mapping[int, int]) -> None:
        """Halt, or take a goal; without a coil for it, go there at once."""
        self._holding |= words
        halt = self._settings.halt
        if halt.register_address is not None and words.get(halt.register_address) == halt.value:
            self._machine.halt(self.mono_s)
        goals = {at for joint in self._joints for at in (joint.write, joint.write_rate)}
        if self._settings.go is None and goals & words.keys():
            self._go()

    def _obey(self, address: int, *, is_on: bool) -> None:
        settings = self._settings
        if address == settings.halt.coil and is_on is bool(settings.halt.value):
            self._machine.halt(self.mono_s)
        elif address == settings.power:
            self._machine.cut_power(self.mono_s, is_cut=not is_on)
        elif settings.brake is not None and address == settings.brake.coil:
            self._machine.brake(self.mono_s, is_engaged=is_on is settings.brake.engaged_when)
        elif address == settings.go and is_on:
            self._go()

    def _go(self) -> None:
        rates = [self._rate(joint) for joint in self._joints]
        if self._settings.command is CommandMode.RATE:
            self._machine.command(self.mono_s, Rates(*rates))
        else:
            now = self._machine.true_motion(self.mono_s)
            goal = [self._goal(joint, now[n]) for n, joint in enumerate(self._joints)]
            self._machine.command(self.mono_s, DriverMotion(*goal, *rates))

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
        if up is not None and self.coil(up):
            return Turn.UP
        return Turn.DOWN if down is not None and self.coil(down) else Turn.OFF

    def _angle_words(self) -> dict[int, int]:
        look = self._machine.look(self.mono_s)
        angles = look.first_deg, look.second_deg
        return {
            joint.read + n: word
            for joint, angle_deg in zip(self._joints, angles, strict=True)
            for n, word in enumerate(
                encode(joint.scale().written(angle_deg), joint.type, self._settings.word_order)
            )
        }
