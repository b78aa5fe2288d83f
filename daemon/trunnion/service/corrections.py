"""The operator's correction in force: for one contact, or kept for all until it is cleared.

It lives in memory: a daemon that starts anew corrects nothing.
"""

from collections.abc import Callable, Sequence
from typing import NamedTuple

from trunnion.service.clock import Clock
from trunnion.service.errors import ServiceError
from trunnion.track.correction import Correction
from trunnion.track.path import Assignment


class NothingToCorrect(ServiceError):  # noqa: N818 - named for what it means
    """No contact is on or ahead that a correction could be for."""


class CorrectionInForce(NamedTuple):
    """A correction, and the contact that it is for; None for all until it is cleared."""

    correction: Correction
    contact: str | None

    def holds_for(self, contact: str) -> bool:
        """Whether this contact's target is corrected."""
        return self.contact is None or self.contact == contact


class Corrections:
    """Given and cleared from any thread; ended by the control turn with the contact."""

    def __init__(
        self,
        clock: Clock,
        assignments: Callable[[], Sequence[Assignment] | None],
        plan_anew: Callable[[], None],
    ) -> None:
        self._clock = clock
        self._assignments = assignments
        self._plan_anew = plan_anew
        self._in_force: CorrectionInForce | None = None

    @property
    def in_force(self) -> CorrectionInForce | None:
        """The correction that planning takes into account; None for none."""
        return self._in_force

    def give(self, correction: Correction, *, is_kept: bool) -> CorrectionInForce:
        """Correct the contact that is on, or else the next one; or all, where it is kept.

        It replaces the one before. Raises NothingToCorrect.
        """
        contact = None if is_kept else self._contact()
        self._in_force = CorrectionInForce(correction, contact)
        self._plan_anew()
        return self._in_force

    def clear(self) -> None:
        """Correct nothing any more."""
        self._in_force = None
        self._plan_anew()

    def end_with_the_contact(self) -> str | None:
        """Clear a correction whose contact is over; returns that contact."""
        now = self._in_force
        if now is None or now.contact is None or now.contact in self._ahead():
            return None
        self.clear()
        return now.contact

    def _contact(self) -> str:
        ahead = self._ahead()
        if not ahead:
            raise NothingToCorrect("no contact is on or ahead: keep it, or wait for a contact")
        return ahead[0]

    def _ahead(self) -> list[str]:
        """The contacts that are on or still to come, in order of time."""
        utc_s = self._clock.utc_s()
        return [each.contact for each in self._assignments() or () if each.end_s > utc_s]
