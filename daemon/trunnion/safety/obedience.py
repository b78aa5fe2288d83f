"""Whether the mount does what it is ordered to: behind, frozen, or the wrong way."""

from collections.abc import Iterator
from typing import NamedTuple

from trunnion.mount.joints import Motion, Reading
from trunnion.safety.hazard import Hazard
from trunnion.safety.limits import SafetyLimits
from trunnion.safety.verdict import Rule

SAME_READINGS = 3
"""So many readings in a row have to be the same before one may be frozen."""

JOINT_NAMES = ("first", "second")


class _Mark(NamedTuple):
    """Where a joint was ordered to be and where it was, when something last became of it."""

    ordered_deg: float
    read_deg: float


class _Joint:
    """What one joint has done since its orders began."""

    def __init__(self, limits: SafetyLimits) -> None:
        self._most_deg = limits.slip_deg + 2.0 * limits.encoder_error_deg
        self._way: _Mark | None = None
        self._same: _Mark | None = None
        self._readings = 0

    def moves_away(self, ordered_deg: float, read_deg: float) -> bool:
        """Whether it has moved away from where it was ordered to be, further than allowed.

        Judged over distance, not over time: the slowest motion the wrong way shows in the end.
        """
        if self._way is None:
            self._way = _Mark(ordered_deg, read_deg)
        done_deg = read_deg - self._way.read_deg
        gap_deg, was_deg = ordered_deg - read_deg, self._way.ordered_deg - self._way.read_deg
        if abs(done_deg) <= self._most_deg:
            return False
        if done_deg * gap_deg < 0.0 and abs(gap_deg) > abs(was_deg) + self._most_deg:
            return True
        self._way = _Mark(ordered_deg, read_deg)
        return False

    def begin_anew(self) -> None:
        """Judge its way from here on: the orders did not go on where they had led."""
        self._way = None

    def led_aside(self, expected_deg: float, ordered_deg: float) -> bool:
        """Whether an order lies farther from where the last one led than any slip."""
        return abs(ordered_deg - expected_deg) > self._most_deg

    def is_frozen(self, ordered_deg: float, read_deg: float, *, is_new: bool) -> bool:
        """Whether reading after reading is the same while the orders have moved on."""
        if self._same is None or read_deg != self._same.read_deg:
            self._same, self._readings = _Mark(ordered_deg, read_deg), 0
        self._readings += is_new
        moved_deg = abs(ordered_deg - self._same.ordered_deg)
        return moved_deg > self._most_deg and self._readings >= SAME_READINGS


class Obedience:
    """Holds readings against orders from the first order on, until the mount is halted."""

    def __init__(self, limits: SafetyLimits) -> None:
        self._limits = limits
        self.forget()

    def forget(self) -> None:
        """The orders have ended; what follows begins anew."""
        self._joints = (_Joint(self._limits), _Joint(self._limits))
        self._taken_s: float | None = None
        self._last: tuple[Motion, float] | None = None

    def find(self, ordered: Motion, ordered_s: float, reading: Reading) -> Iterator[Hazard]:
        """Everything wrong with this reading, given what was ordered in the turn before, and when.

        Since then the mount may have gone on at the rate that was ordered, or not.
        """
        self._notice_jumps(ordered, ordered_s)
        since_s = max(0.0, reading.taken_s - ordered_s)
        is_new, self._taken_s = reading.taken_s != self._taken_s, reading.taken_s
        for number in (0, 1):
            read_deg = reading[number + 1]
            ordered_deg = _nearest(read_deg, ordered[number], ordered[number + 2] * since_s)
            joint, name = self._joints[number], JOINT_NAMES[number]
            if joint.moves_away(ordered_deg, read_deg):
                yield Hazard(Rule.WRONG_WAY, f"the {name} joint moves away from its orders")
            if joint.is_frozen(ordered_deg, read_deg, is_new=is_new):
                finding = f"the {name} joint says {read_deg:.2f}° again and again while sent on"
                yield Hazard(Rule.FROZEN, finding)
            behind_deg = abs(ordered_deg - read_deg)
            if behind_deg > self._limits.stall_error_deg:
                finding = f"the {name} joint is {behind_deg:.1f}° from where it was ordered to be"
                yield Hazard(Rule.STALLED, finding)

    def _notice_jumps(self, ordered: Motion, ordered_s: float) -> None:
        """After a turn that came late the mount has gone on, and is led back: no disobedience."""
        if self._last is not None:
            last, last_s = self._last
            for number, joint in enumerate(self._joints):
                expected_deg = last[number] + last[number + 2] * (ordered_s - last_s)
                if joint.led_aside(expected_deg, ordered[number]):
                    joint.begin_anew()
        self._last = ordered, ordered_s


def _nearest(read_deg: float, ordered_deg: float, run_deg: float) -> float:
    """Where on its run, from the order on, a joint is held to be."""
    if run_deg < 0.0:
        return min(max(read_deg, ordered_deg + run_deg), ordered_deg)
    return min(max(read_deg, ordered_deg), ordered_deg + run_deg)
