"""The settings of a mount behind Modbus: which register, coil and input is what."""

from enum import Enum
from typing import Annotated, Self
from urllib.parse import urlsplit

from pydantic import Field, field_validator, model_validator

from trunnion_drivers.brake import BrakeSettings
from trunnion_drivers.control.command import CommandMode
from trunnion_drivers.control.settings import ControlSettings
from trunnion_drivers.modbus.registers import RegisterType, WordOrder
from trunnion_drivers.scale import Scale
from trunnion_drivers.serial_port.settings import LineSettings
from trunnion_drivers.settings import Settings

Address = Annotated[int, Field(ge=0, le=0xFFFF)]
NotZero = Annotated[float, Field(gt=0.0, le=1e9)]
AnyType = Annotated[RegisterType, Field(strict=False)]

_LONGEST_BLOCK = 120


class Table(Enum):
    """Where the angles are read."""

    INPUT = "input"
    HOLDING = "holding"


class JointMap(Settings):
    """One joint's addresses (from 0) and scales.

    `read` is the angle; `write` the goal and `write_rate` its rate, both holding registers; `up`
    and `down` the coils of a motor that is switched.
    """

    read: Address
    type: AnyType = RegisterType.I32
    write: Address | None = None
    write_rate: Address | None = None
    rate_type: AnyType = RegisterType.I16
    up: Address | None = None
    down: Address | None = None
    units_per_deg: NotZero = 1.0
    zero_deg: Annotated[float, Field(ge=-1080.0, le=1080.0)] = 0.0
    reversed: bool = False
    rate_units_per_deg_s: NotZero = 1.0

    def scale(self) -> Scale:
        """The scale it describes."""
        return Scale(self.units_per_deg, self.zero_deg, self.reversed, self.rate_units_per_deg_s)


class HaltMap(Settings):
    """What brings the mount to rest: a coil, or a holding register, and what is written there."""

    coil: Address | None = None
    register_address: Annotated[Address | None, Field(alias="register")] = None
    value: Annotated[int, Field(ge=0, le=0xFFFF)] = 1

    @model_validator(mode="after")
    def _must_be_one(self) -> Self:
        if (self.coil is None) == (self.register_address is None):
            raise ValueError("expected either a coil or a register")
        return self


class StopMap(Settings):
    """The discrete input of the hardware stop, and its state while the stop is pressed.

    A normally closed switch reads false when it is pressed, and when its wire is broken.
    """

    input: Address
    pressed_when: bool = False


class BrakeMap(BrakeSettings):
    """The coil of the brake, its state while the brake holds, and its times.

    A brake that is held off by current, as it should be, is engaged when its coil is false.
    """

    coil: Address
    engaged_when: bool = False


class ModbusSettings(LineSettings):
    """A server by its URL, `tcp://host:port` or a serial device, and its map.

    `rs485` lets the kernel's driver switch the serial device's direction with RTS.
    `go` is a coil written after every goal, `power` one that is true while the actuators have
    power; `brake` the coil of a brake; `watchdog` a holding register that counts up with every
    order; `limits` the discrete inputs that are true at a limit switch.
    """

    url: Annotated[str, Field(min_length=1)]
    rs485: bool = False
    unit: Annotated[int, Field(ge=1, le=247)] = 1
    reply_within_s: Annotated[float, Field(gt=0.0, le=10.0)] = 0.3
    command: Annotated[CommandMode, Field(strict=False)] = CommandMode.POSITION
    follows_rate: bool = False
    word_order: Annotated[WordOrder, Field(strict=False)] = WordOrder.HIGH_FIRST
    table: Annotated[Table, Field(strict=False)] = Table.INPUT
    first: JointMap
    second: JointMap
    halt: HaltMap
    go: Address | None = None
    power: Address | None = None
    brake: BrakeMap | None = None
    watchdog: Address | None = None
    stop_input: StopMap | None = None
    limits: Annotated[tuple[Address, ...], Field(max_length=16)] = ()
    control: ControlSettings = ControlSettings()

    @field_validator("url")
    @classmethod
    def _must_be_known(cls, url: str) -> str:
        if "://" in url:
            parts = urlsplit(url)
            if parts.scheme != "tcp" or not parts.hostname:
                raise ValueError(f"expected a serial device or tcp://host:port, got {url!r}")
        return url

    @model_validator(mode="after")
    def _must_have_what_its_mode_needs(self) -> Self:
        needed = _NEEDED[self.command]
        for name, joint in (("first", self.first), ("second", self.second)):
            missing = [key for key in needed if getattr(joint, key) is None]
            if missing:
                raise ValueError(
                    f"{name}: expected {' and '.join(missing)} for command {self.command.value}"
                )
        if self.rs485 and self.is_tcp:
            raise ValueError("rs485 needs a serial device")
        if abs(self.first.read - self.second.read) > _LONGEST_BLOCK:
            raise ValueError(f"expected both angles within {_LONGEST_BLOCK} registers")
        return self

    @property
    def is_tcp(self) -> bool:
        """Whether it is reached over TCP."""
        return self.url.startswith("tcp://")


_NEEDED = {
    CommandMode.POSITION: ("write",),
    CommandMode.RATE: ("write_rate",),
    CommandMode.ON_OFF: ("up", "down"),
}
