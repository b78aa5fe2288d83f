"""Whether UTC runs evenly: held against the monotonic clock, which nobody sets."""

from collections.abc import Iterator

from trunnion.safety.hazard import Hazard
from trunnion.safety.limits import SafetyLimits
from trunnion.safety.verdict import Rule


class ClockWatch:
    """Remembers how far apart both clocks were in the turn before."""

    def __init__(self, limits: SafetyLimits) -> None:
        self._limits = limits
        self._apart_s: float | None = None

    def find(self, mono_s: float, utc_s: float | None) -> Iterator[Hazard]:
        """A step since the turn before; a clock that is steered gently makes none."""
        before_s, self._apart_s = self._apart_s, None if utc_s is None else utc_s - mono_s
        if before_s is None or self._apart_s is None:
            return
        step_s = self._apart_s - before_s
        if not abs(step_s) <= self._limits.clock_max_step_s:
            yield Hazard(Rule.CLOCK_STEPPED, f"the clock was set by {step_s:+.1f} s")
