"""A dialect as a value: what to send for each command, and what may come back."""

from collections.abc import Mapping
from dataclasses import dataclass
from enum import Enum

from trunnion_drivers.control.command import CommandMode, Turn
from trunnion_drivers.dialect.message import Message
from trunnion_drivers.scale import Scales
from trunnion_drivers.serial_port.settings import LineSettings


class Verb(Enum):
    """What a controller can be told."""

    READ = "read"
    HALT = "halt"
    MOVE = "move"
    START = "start"
    CUT_POWER = "cut_power"
    ENGAGE_BRAKE = "engage_brake"
    RELEASE_BRAKE = "release_brake"
    FIRST_UP = "first_up"
    FIRST_DOWN = "first_down"
    FIRST_OFF = "first_off"
    SECOND_UP = "second_up"
    SECOND_DOWN = "second_down"
    SECOND_OFF = "second_off"


SWITCHING: Mapping[Verb, tuple[int, Turn]] = {
    Verb.FIRST_UP: (0, Turn.UP),
    Verb.FIRST_DOWN: (0, Turn.DOWN),
    Verb.FIRST_OFF: (0, Turn.OFF),
    Verb.SECOND_UP: (1, Turn.UP),
    Verb.SECOND_DOWN: (1, Turn.DOWN),
    Verb.SECOND_OFF: (1, Turn.OFF),
}
"""Which joint (0 or 1) each switching verb turns, and which way."""


@dataclass(frozen=True, slots=True)
class Step:
    """One message, and the answer that must follow, if any."""

    send: Message
    reply: Message | None


@dataclass(frozen=True, slots=True)
class Flags:
    """What the bits of `{flags}` mean, as masks."""

    at_limit: int = 0
    stop_pressed: int = 0
    stop_released: int = 0
    faults: tuple[tuple[str, int], ...] = ()

    @property
    def has_stop(self) -> bool:
        """Whether a bit tells of the hardware stop."""
        return bool(self.stop_pressed or self.stop_released)

    def is_stopped(self, bits: int) -> bool:
        """Whether these bits say that the stop is pressed."""
        is_held_up = not self.stop_released or bool(bits & self.stop_released)
        return bool(bits & self.stop_pressed) or not is_held_up

    def words(self, bits: int) -> str | None:
        """The faults that these bits tell of."""
        return ", ".join(words for words, mask in self.faults if bits & mask) or None


@dataclass(frozen=True, slots=True)
class Dialect:
    """Everything about one kind of controller."""

    name: str
    verbs: Mapping[Verb, tuple[Step, ...]]
    refusals: tuple[Message, ...]
    reports: tuple[Message, ...]
    scales: Scales
    flags: Flags
    line: LineSettings
    reply_within_s: float
    pause_s: float
    has_echo: bool
    command: CommandMode
    follows_rate: bool
    is_text: bool
    end: bytes

    def steps(self, verb: Verb) -> tuple[Step, ...]:
        """The messages of this verb; none where the controller does not know it."""
        return self.verbs.get(verb, ())
