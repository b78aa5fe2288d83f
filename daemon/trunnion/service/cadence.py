"""The beat of the control turn: absolute deadlines, skipped and counted where missed."""

from math import floor
from typing import NamedTuple

from trunnion.service.clock import Clock


class Beat(NamedTuple):
    """One beat: which deadline it serves, how late it came, what was skipped.

    `lateness_s` counts from the first deadline that was not yet served, so that a stall shows
    whole; `missed` is the number of deadlines skipped since the beat before.
    """

    number: int
    lateness_s: float
    missed: int


class Cadence:
    """Beats at `start + number × period` on the monotonic clock.

    Lateness never accumulates, and a stall is followed by one beat, never by a burst.
    """

    def __init__(self, clock: Clock, period_s: float) -> None:
        if not period_s > 0.0:
            raise ValueError(f"expected a period above 0 s, got {period_s}")
        self._clock = clock
        self._period_s = period_s
        self._start_s = clock.monotonic_s()
        self._number = -1
        self._missed_in_all = 0

    @property
    def missed_in_all(self) -> int:
        """Deadlines skipped since the start."""
        return self._missed_in_all

    def wait(self) -> Beat:
        """Sleep until the next deadline; the first one is the moment of construction."""
        wanted = self._number + 1
        due_s = self._start_s + wanted * self._period_s
        self._clock.sleep_until(due_s)
        now_s = self._clock.monotonic_s()
        self._number = max(wanted, floor((now_s - self._start_s) / self._period_s))
        missed = self._number - wanted
        self._missed_in_all += missed
        return Beat(self._number, max(0.0, now_s - due_s), missed)
