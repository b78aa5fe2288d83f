"""What the service manager hears of the turns: that they are completed, and what the mount does."""

from trunnion.service.notify import Notifier, Watchdog, watchdog_timeout_s
from trunnion.service.turn import Turn


class ServiceManagerReport:
    """Observes the turns."""

    def __init__(self, notifier: Notifier, longest_age_s: float) -> None:
        self._watchdog = Watchdog(notifier, longest_age_s, watchdog_timeout_s())
        self._notifier = notifier
        self._told: str | None = None

    def note(self, turn: Turn) -> None:
        """Take in one turn."""
        self._watchdog.turn_completed(turn.mono_s, turn.reading)
        assignment = turn.decision.assignment
        status = turn.decision.phase.value + (f" {assignment.contact}" if assignment else "")
        if status != self._told:
            self._told = status
            self._notifier.status(status)
