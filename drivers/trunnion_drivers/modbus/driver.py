"""A mount behind Modbus RTU or TCP, by the map in the station file."""

from collections.abc import Mapping
from contextlib import suppress
from itertools import count
from threading import Thread
from typing import TYPE_CHECKING, Self

from trunnion_drivers.control.command import Command, CommandMode
from trunnion_drivers.control.steered import SteeredDriver
from trunnion_drivers.interface.errors import (
    BadSettings,
    DriverError,
    LinkLost,
    SettingProblem,
    WrongState,
)
from trunnion_drivers.interface.values import (
    Capabilities,
    Clock,
    DriverMotion,
    DriverReading,
    MountFacts,
)
from trunnion_drivers.modbus.orders import (
    Writes,
    angle_block,
    angles_deg,
    writes_for,
    writes_for_halt,
)
from trunnion_drivers.modbus.registers import blocks, runs
from trunnion_drivers.modbus.settings import ModbusSettings
from trunnion_drivers.settings import checked

if TYPE_CHECKING:
    from trunnion_drivers.modbus.client import ModbusLink

_REGISTER_RANGE = 0x10000


class ModbusDriver(SteeredDriver):
    """Speaks Modbus; what the controller cannot do itself the control laws do."""

    def __init__(self, settings: ModbusSettings, facts: MountFacts, clock: Clock) -> None:
        steering = settings.control.steering(
            settings.command, facts, follows_rate=settings.follows_rate
        )
        super().__init__(steering, facts, clock)
        self._settings = settings
        self._link = _link(settings)
        self._beats = count(1)
        self.capabilities = Capabilities(
            follows_rate=settings.follows_rate or settings.command is CommandMode.RATE,
            cuts_power=settings.power is not None,
            reports_stop_input=settings.stop_input is not None,
            reports_limits=bool(settings.limits),
            has_brake=settings.brake is not None,
        )
        if settings.brake is not None:
            self.brake_timing = settings.brake.timing()

    @classmethod
    def from_settings(cls, settings: Mapping[str, object], facts: MountFacts, clock: Clock) -> Self:
        """Build the driver; opens nothing. Raises BadSettings."""
        read = checked(ModbusSettings, settings)
        _travel_must_fit(read, facts)
        return cls(read, facts, clock)

    def _open(self) -> None:
        self._link.open()
        try:
            if self._settings.power is not None:
                self._link.write_coil(self._settings.power, is_on=True)
        except DriverError as error:
            self._link.close()
            raise LinkLost(f"{self._settings.url}: connected, but {error}") from error
        self._start_anew()

    def _close(self) -> None:
        self._link.close()

    def _look(self) -> DriverReading:
        settings = self._settings
        begin, length = angle_block(settings)
        asked_s = self._clock.monotonic_s()
        words = self._link.registers(settings.table, begin, length)
        taken_s = 0.5 * (asked_s + self._clock.monotonic_s())
        stop, inputs = settings.stop_input, self._inputs()
        return DriverReading(
            taken_s,
            *angles_deg(settings, begin, words),
            stop_pressed=stop is not None and inputs[stop.input] is stop.pressed_when,
            at_limit=any(inputs[address] for address in settings.limits),
        )

    def _inputs(self) -> dict[int, bool]:
        """Every discrete input that the map names, by address."""
        stop = self._settings.stop_input
        wanted = [*self._settings.limits, *([stop.input] if stop else [])]
        return {
            address: state
            for run in runs(wanted)
            for address, state in zip(run, self._link.inputs(run.start, len(run)), strict=True)
        }

    def _tell(self, command: Command) -> None:
        writes = writes_for(self._settings, command)
        if self._settings.watchdog is not None:
            beat = {self._settings.watchdog: next(self._beats) % _REGISTER_RANGE}
            writes = writes._replace(registers={**writes.registers, **beat})
        self._write(writes)

    def _rest(self) -> None:
        self._write(writes_for_halt(self._settings))

    def _halt_at_once(self) -> bool:
        """In a thread of its own, behind the one exchange that may be under way."""
        Thread(target=self._halt_quietly, name="modbus stop", daemon=True).start()
        return True

    def _halt_quietly(self) -> None:
        with suppress(DriverError):
            self._rest()

    def _cut_power(self) -> None:
        if self._settings.power is not None:
            self._link.write_coil(self._settings.power, is_on=False)

    def _engage_brake(self) -> None:
        self._set_brake(is_engaged=True)

    def _release_brake(self) -> None:
        self._set_brake(is_engaged=False)

    def _set_brake(self, *, is_engaged: bool) -> None:
        brake = self._settings.brake
        if brake is not None:
            self._link.write_coil(brake.coil, is_on=is_engaged is brake.engaged_when)

    def _write(self, writes: Writes) -> None:
        for address, words in blocks(writes.registers):
            self._link.write_registers(address, words)
        for address, is_on in writes.coils.items():
            self._link.write_coil(address, is_on=is_on)


def _link(settings: ModbusSettings) -> "ModbusLink":
    try:
        from trunnion_drivers.modbus.client import ModbusLink
    except ModuleNotFoundError as error:
        reason = f"needs the package {error.name}: pip install 'trunnion[modbus]'"
        raise BadSettings((SettingProblem("kind", reason),)) from error
    return ModbusLink(settings)


def _travel_must_fit(settings: ModbusSettings, facts: MountFacts) -> None:
    """Raise BadSettings where a register cannot hold the ends of the travel."""
    first, second = facts.first, facts.second
    try:
        for motion in (
            DriverMotion(first.lower_deg, second.lower_deg, -first.rate_deg_s, -second.rate_deg_s),
            DriverMotion(first.upper_deg, second.upper_deg, first.rate_deg_s, second.rate_deg_s),
        ):
            writes_for(settings.model_copy(update={"go": None}), motion)
    except WrongState as error:
        reason = f"too narrow for the travel: {error}"
        raise BadSettings((SettingProblem("first", reason),)) from error
