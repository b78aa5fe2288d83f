"""Notices that the mount is not where the plan took it to be, so that the rest is planned anew."""

from trunnion.mount.joints import Joints
from trunnion.pilot.phase import Phase
from trunnion.service.turn import Turn
from trunnion.sky.errors import SkyError

PATIENCE_S = 3.0
"""A mount that is off its path for less than this comes back to it sooner than a plan is made."""

EVERY_S = 20.0
"""Least time between two plans for this reason."""


class DepartureWatch:
    """Observes the turns of contacts.

    A target outside the beam is no departure where the plan itself says so: what counts is where
    the joints are, beside where the path has them.
    """

    def __init__(self, tolerance_deg: float) -> None:
        self._tolerance_deg = tolerance_deg
        self._off_since_s: float | None = None
        self._quiet_until_s = float("-inf")

    def note(self, turn: Turn) -> None:
        """Take in one turn."""
        if not self._is_off(turn):
            self._off_since_s = None
        elif self._off_since_s is None:
            self._off_since_s = turn.mono_s

    def is_due(self, mono_s: float) -> bool:
        """Whether the rest is to be planned anew now; once, and not again for a while."""
        since_s = self._off_since_s
        if since_s is None or mono_s < max(since_s + PATIENCE_S, self._quiet_until_s):
            return False
        self._quiet_until_s = mono_s + EVERY_S
        return True

    def _is_off(self, turn: Turn) -> bool:
        decision, reading = turn.decision, turn.reading
        if decision.phase is not Phase.ACQUIRING or decision.assignment is None or reading is None:
            return False
        age_s = turn.mono_s - reading.taken_s
        try:
            planned = decision.assignment.path.at(turn.utc_s - age_s).joints
        except SkyError:
            return False
        return _distance_deg(planned, reading.joints) > self._tolerance_deg


def _distance_deg(one: Joints, other: Joints) -> float:
    """Of the joint that is further off; a whole turn away is far away."""
    return max(abs(one.first_deg - other.first_deg), abs(one.second_deg - other.second_deg))
