"""The sections of a dialect file, key by key."""

from typing import Annotated

from pydantic import Field, field_validator

from trunnion_drivers.control.command import CommandMode
from trunnion_drivers.dialect.checksum import ChecksumKind
from trunnion_drivers.dialect.notation import Coding
from trunnion_drivers.scale import Scale
from trunnion_drivers.serial_port.settings import LineSettings
from trunnion_drivers.settings import Settings

Text = Annotated[str, Field(max_length=200)]
NotZero = Annotated[float, Field(gt=0.0, le=1e9)]
Seconds = Annotated[float, Field(gt=0.0, le=10.0)]
Mask = Annotated[int, Field(ge=1, le=0xFFFFFFFF)]


class ScaleSection(Settings):
    """How one joint's numbers stand for degrees."""

    units_per_deg: NotZero = 1.0
    zero_deg: Annotated[float, Field(ge=-1080.0, le=1080.0)] = 0.0
    reversed: bool = False
    rate_units_per_deg_s: NotZero = 1.0

    def scale(self) -> Scale:
        """The scale it describes."""
        return Scale(self.units_per_deg, self.zero_deg, self.reversed, self.rate_units_per_deg_s)


class ChecksumSection(Settings):
    """The checksum of every message that has a `{checksum}`.

    It covers the bytes before it, from byte `first_byte` (counted from 0) on.
    """

    kind: Annotated[ChecksumKind, Field(strict=False)]
    first_byte: Annotated[int, Field(ge=0, le=100)] = 0
    written: Text


class StepSection(Settings):
    """One message, and the answer that must follow; none for a message without one."""

    send: Text
    reply: Text | None = None


Steps = Annotated[tuple[StepSection, ...], Field(max_length=8)]


class CommandsSection(Settings):
    """What the controller is told, step by step.

    `read` may be empty where the controller reports by itself. `halt` brings both joints to rest.
    A mount that goes to positions, or moves at rates, needs `move`; one that is switched needs the
    six others. `start` is sent after the port is opened, `cut_power` takes the actuators' power.
    A brake has both `engage_brake` and `release_brake`.
    """

    read: Steps = ()
    halt: Steps = ()
    move: Steps = ()
    start: Steps = ()
    cut_power: Steps = ()
    engage_brake: Steps = ()
    release_brake: Steps = ()
    first_up: Steps = ()
    first_down: Steps = ()
    first_off: Steps = ()
    second_up: Steps = ()
    second_down: Steps = ()
    second_off: Steps = ()


class FlagsSection(Settings):
    """The bits of the field `{flags}`: as masks, and the controller's faults by words of one's own.

    `stop_released` is a bit that is set while the stop is not pressed.
    """

    at_limit: Mask | None = None
    stop_pressed: Mask | None = None
    stop_released: Mask | None = None
    faults: dict[str, Mask] = Field(default_factory=dict)


class DialectSection(Settings):
    """A whole dialect file."""

    format: Annotated[int, Field(ge=1, le=1)]
    name: Annotated[str, Field(min_length=1, max_length=100)]
    coding: Annotated[Coding, Field(strict=False)]
    begin: Text = ""
    end: Text = ""
    checksum: ChecksumSection | None = None
    line: LineSettings = LineSettings()
    reply_within_s: Seconds = 0.3
    pause_s: Annotated[float, Field(ge=0.0, le=1.0)] = 0.0
    echo: bool = False
    command: Annotated[CommandMode, Field(strict=False)] = CommandMode.POSITION
    follows_rate: bool = False
    first: ScaleSection = ScaleSection()
    second: ScaleSection = ScaleSection()
    flags: FlagsSection = FlagsSection()
    commands: CommandsSection
    refusals: Annotated[tuple[Text, ...], Field(max_length=16)] = ()
    reports: Annotated[tuple[Text, ...], Field(max_length=8)] = ()

    @field_validator("commands")
    @classmethod
    def _must_stop(cls, commands: CommandsSection) -> CommandsSection:
        if not commands.halt:
            raise ValueError(
                "expected a command `halt`: a driver that cannot stop the mount is not loaded"
            )
        return commands
