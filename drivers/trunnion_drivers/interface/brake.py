"""When a brake is engaged and released. Pure; standard library only.

It is a brake that holds what rests: it is engaged at rest after a halt, and released, with a time
to let go, before any motion. Only where the power is cut does it catch what may still move, after
the motors are off: a stop of category 0 of IEC 60204-1, 9.2.2.
"""

from dataclasses import dataclass
from enum import Enum

from trunnion_drivers.interface.values import DriverReading


@dataclass(frozen=True, slots=True)
class BrakeTiming:
    """How long it takes to let go (s), and what counts as rest: this little (deg) for so long (s).

    The encoders' noise must be less than `still_deg`, or the brake is never engaged.
    """

    settle_s: float = 0.3
    still_deg: float = 0.02
    still_s: float = 2.0


class _Brake(Enum):
    UNKNOWN = "unknown"
    ENGAGED = "engaged"
    RELEASED = "released"


class Brake:
    """What is known of one mount's brake. Of a link just opened nothing is known."""

    def __init__(self, timing: BrakeTiming) -> None:
        self._timing = timing
        self._state = _Brake.UNKNOWN
        self._released_s = 0.0
        self._is_halted = True
        self._rest: DriverReading | None = None

    @property
    def must_be_released(self) -> bool:
        """Whether it has to be released before a motion."""
        return self._state is not _Brake.RELEASED

    def note_release(self, mono_s: float) -> None:
        """It was told to let go."""
        self._state, self._released_s = _Brake.RELEASED, mono_s
        self._rest = None

    def note_engagement(self) -> None:
        """It was told to hold."""
        self._state = _Brake.ENGAGED

    def note_doubt(self) -> None:
        """It was told something, and may not have heard."""
        self._state = _Brake.UNKNOWN

    def has_let_go(self, mono_s: float) -> bool:
        """Whether a motion may begin."""
        is_released = self._state is _Brake.RELEASED
        return is_released and mono_s - self._released_s >= self._timing.settle_s

    def note_halt(self) -> None:
        """The mount was told to come to rest."""
        self._is_halted = True

    def note_motion(self) -> None:
        """The mount was told to move."""
        self._is_halted, self._rest = False, None

    def is_due(self, reading: DriverReading) -> bool:
        """Whether it is to be engaged now: the mount was halted, and is read at rest."""
        if not self._is_halted or self._state is _Brake.ENGAGED:
            return False
        if self._rest is None or self._has_moved(self._rest, reading):
            self._rest = reading
        return reading.taken_s - self._rest.taken_s >= self._timing.still_s

    def _has_moved(self, before: DriverReading, after: DriverReading) -> bool:
        first_deg = after.first_deg - before.first_deg
        second_deg = after.second_deg - before.second_deg
        return max(abs(first_deg), abs(second_deg)) > self._timing.still_deg
