"""What can go wrong with a simulated mount, as a value; and when, as a function of time."""

from collections.abc import Callable, Sequence
from dataclasses import dataclass, field, fields
from enum import Enum
from functools import lru_cache, reduce
from typing import Any, TypeAlias


class LinkFault(Enum):
    """What is wrong with the way to the mount."""

    NONE = "none"
    LOST = "lost"
    """The cable is pulled: no call works, and it cannot be opened."""
    SILENT = "silent"
    """The mount takes neither question nor order."""
    DEAF = "deaf"
    """Orders vanish without a word; questions are answered."""
    GARBLED = "garbled"
    """Answers arrive damaged."""
    REFUSING = "refusing"
    """Every order to move is refused; halting works."""


class JointFault(Enum):
    """What is wrong with one joint."""

    NONE = "none"
    JAMMED = "jammed"
    """It stands still at once and does not move."""
    REVERSED = "reversed"
    """It moves the wrong way."""
    RUNNING_AWAY = "running away"
    """It moves up at half its rate, whatever it is told; only a halt or a power cut stops it."""
    UNSTOPPABLE = "unstoppable"
    """The same, and a halt does not stop it either."""
    SLIPPING = "slipping"
    """It obeys, but told to rest it creeps up at a twentieth of its rate, power or not."""


class EncoderFault(Enum):
    """What is wrong with one joint's encoder."""

    NONE = "none"
    FROZEN = "frozen"
    """It shows the same angle for ever."""
    DEAD = "dead"
    """It shows no number."""


@dataclass(frozen=True, slots=True)
class Faults:
    """Everything that is wrong at one moment; nothing, by default.

    Pairs are first and second joint. `offsets_deg` is how far the encoders have lost their zero;
    `reading_age_s` how long ago a reading was true that is answered now; `call_lasts_s` how long
    every call blocks. `stop_pressed` and `words` are what the mount reports; a pressed stop also
    stops it. `has_no_power` lets it coast to rest and stay there.
    """

    link: LinkFault = LinkFault.NONE
    joints: tuple[JointFault, JointFault] = (JointFault.NONE, JointFault.NONE)
    encoders: tuple[EncoderFault, EncoderFault] = (EncoderFault.NONE, EncoderFault.NONE)
    offsets_deg: tuple[float, float] = (0.0, 0.0)
    reading_age_s: float = 0.0
    call_lasts_s: float = 0.0
    stop_pressed: bool = False
    has_no_power: bool = False
    words: str | None = None
    wind_m_s: float = 0.0


HEALTHY = Faults()

FaultSchedule: TypeAlias = Callable[[float], Faults]
"""What is wrong at a monotonic second; asked at every call, in order of time."""


def healthy(_mono_s: float) -> Faults:
    """Nothing ever goes wrong."""
    return HEALTHY


@dataclass(frozen=True, slots=True)
class Episode:
    """These faults from one monotonic second until another."""

    begin_s: float
    end_s: float
    faults: Faults = field(default=HEALTHY)


def timetable(episodes: Sequence[Episode]) -> FaultSchedule:
    """All episodes; where two say different things of one part, the later in the list holds."""

    @lru_cache(maxsize=64)
    def together(present: tuple[Faults, ...]) -> Faults:
        return reduce(_and_then, present, HEALTHY)

    def faults_at(mono_s: float) -> Faults:
        return together(tuple(e.faults for e in episodes if e.begin_s <= mono_s < e.end_s))

    return faults_at


def _and_then(earlier: Faults, later: Faults) -> Faults:
    """Both at once; what the later says of a part counts."""
    return Faults(
        **{
            part.name: _said_of(*(getattr(each, part.name) for each in (HEALTHY, earlier, later)))
            for part in fields(Faults)
        }
    )


def _said_of(sound: Any, earlier: Any, later: Any) -> Any:
    if isinstance(sound, tuple):
        return tuple(map(_said_of, sound, earlier, later))
    return earlier if later == sound else later
