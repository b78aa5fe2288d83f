"""The operator's correction in force: for one contact, or kept for all until it is cleared.

It is kept on disk while it may be of use: a restart in mid-contact goes on with it.
"""

from collections.abc import Callable, Sequence

from trunnion.service.clock import Clock
from trunnion.service.errors import ServiceError
from trunnion.service.standing_correction import CorrectionInForce, StandingCorrection
from trunnion.track.correction import Correction
from trunnion.track.path import Assignment


class NothingToCorrect(ServiceError):  # noqa: N818 - named for what it means
    """No contact is on or ahead that a correction could be for."""


class Corrections:
    """Given and cleared from any thread; ended by the control turn with the contact."""

    def __init__(
        self,
        clock: Clock,
        assignments: Callable[[], Sequence[Assignment] | None],
        plan_anew: Callable[[], None],
        standing: StandingCorrection | None = None,
        is_plan_whole: Callable[[], bool] = lambda: True,
    ) -> None:
        self._clock = clock
        self._assignments = assignments
        self._plan_anew = plan_anew
        self._standing = standing
        self._is_plan_whole = is_plan_whole
        self._trouble: str | None = None
        self._in_force = standing.read(clock.utc_s()) if standing is not None else None

    @property
    def in_force(self) -> CorrectionInForce | None:
        """The correction that planning takes into account; None for none."""
        return self._in_force

    @property
    def trouble(self) -> str | None:
        """Why the disk does not hold what was last asked for; None while it does."""
        return self._trouble

    def give(self, correction: Correction, *, is_kept: bool) -> CorrectionInForce:
        """Correct the contact that is on, or else the next one; or all, where it is kept.

        It replaces the one before. Raises NothingToCorrect.
        """
        contact = None if is_kept else self._next().contact
        given = CorrectionInForce(correction, contact)
        self._in_force = given
        self._plan_anew()
        if self._standing is not None:
            self._trouble = self._standing.keep(given, self._end_s(contact))
        return given

    def clear(self) -> None:
        """Correct nothing any more."""
        self._forget()
        if self._standing is not None:
            self._trouble = self._standing.clear()

    def end_with_the_contact(self) -> str | None:
        """Clear a correction whose contact is over; returns that contact.

        Touches no disk: what is kept there ends with the contact by itself.
        """
        now = self._in_force
        if now is None or now.contact is None or not self._is_plan_whole():
            return None
        if now.contact in {each.contact for each in self._ahead()}:
            return None
        self._forget()
        return now.contact

    def _end_s(self, contact: str | None) -> float | None:
        return max((each.end_s for each in self._ahead() if each.contact == contact), default=None)

    def _forget(self) -> None:
        self._in_force = None
        self._plan_anew()

    def _next(self) -> Assignment:
        ahead = self._ahead()
        if not ahead and not self._is_plan_whole():
            raise NothingToCorrect("the plan is still being made: ask again in a few seconds")
        if not ahead:
            raise NothingToCorrect("no contact is on or ahead: keep it, or wait for a contact")
        return ahead[0]

    def _ahead(self) -> list[Assignment]:
        """What is on or still to come, in order of time."""
        utc_s = self._clock.utc_s()
        return [each for each in self._assignments() or () if each.end_s > utc_s]
