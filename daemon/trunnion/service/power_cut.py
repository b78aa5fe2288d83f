"""Sees to it that a stopped mount loses the power of its motors, where it has such an output."""

from collections.abc import Callable
from typing import Protocol

from trunnion.safety.power import PowerJudge
from trunnion.service.link.status import LinkStatus
from trunnion.service.turn import Turn


class Powering(Protocol):
    """The part of the link that the power needs."""

    @property
    def status(self) -> LinkStatus:
        """How the link fares, and whether the power is cut."""
        ...

    def cut_power(self) -> None:
        """Take the power from the motors where the mount can, until released."""
        ...


class PowerCut:
    """Told of every turn, after the stop that it may have led to was taken in."""

    def __init__(self, judge: PowerJudge, link: Powering, tell: Callable[[str], None]) -> None:
        self._judge = judge
        self._link = link
        self._tell = tell
        self._was_cut = False

    def see_to_it(self, turn: Turn, *, is_stopped: bool) -> None:
        """Cut the power if the mount is at rest, or should be."""
        is_due = self._judge.must_cut(turn.mono_s, turn.reading, is_stopped=is_stopped)
        if is_due or turn.verdict.must_cut_power:
            self._link.cut_power()
        is_cut = self._link.status.is_power_cut
        if is_cut and not self._was_cut:
            self._tell("the motors are without power until the stop is reset")
        self._was_cut = is_cut
