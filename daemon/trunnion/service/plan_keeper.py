"""The plan in force: made in a child process, kept until a better one is there.

A plan that cannot be read does not replace the one that is being flown. After a start the contact
that is on is planned first: the rest of a day takes seconds, which the contact would lose.
"""

from collections.abc import Callable
from math import inf
from pathlib import Path
from typing import TYPE_CHECKING, Protocol

from trunnion.mount.joints import Joints
from trunnion.service.briefing_order import BriefingOrder, brief_elsewhere
from trunnion.service.clock import Clock
from trunnion.service.planner import Outcome, Planner, PlannerDied
from trunnion.service.standing_correction import CorrectionInForce
from trunnion.track.path import Assignment

if TYPE_CHECKING:
    from trunnion.service.briefing import Briefing


SOON_S = 60.0
"""A contact that begins so soon counts as on after a start."""

CLOCK_STEP_S = 0.5
"""A clock that was set by more since has other contacts before and behind it."""

AGAIN_AFTER_S = 15.0
"""After a planner that died, by want of memory for one, the plan is asked for again."""


class MakesPlans(Protocol):
    """The part of the planner that is needed here."""

    @property
    def is_busy(self) -> bool:
        """Whether an order is being worked on."""
        ...

    def ask(self, order: BriefingOrder) -> None:
        """Begin on this order; what was asked before is dropped."""
        ...

    def collect(self) -> "Outcome[Briefing] | None":
        """The outcome of the newest order, once."""
        ...

    def close(self) -> None:
        """Drop what is under way."""
        ...


class PlanKeeper:
    """Has plans made, and takes them up; for the thread of the control turn.

    Plans are made in a child process unless another planner is handed in.
    """

    def __init__(
        self,
        station: Path,
        plan: Path | None,
        clock: Clock,
        tell: Callable[[str], None],
        planner: MakesPlans | None = None,
    ) -> None:
        self._station = station
        self._plan = plan
        self._clock = clock
        self._tell = tell
        self._planner = planner or Planner[BriefingOrder, "Briefing"](brief_elsewhere)
        self._is_wanted = True
        self._is_hurried, self._is_whole = True, False
        self._assignments: tuple[Assignment, ...] | None = None
        self._trouble: str | None = None
        self._again_s = inf
        self._asked_offset_s: float | None = None

    @property
    def assignments(self) -> tuple[Assignment, ...] | None:
        """Who has the mount when; None before the first plan was made."""
        return self._assignments

    @property
    def is_whole(self) -> bool:
        """Whether these are all of the plan's, or at first those alone that are on."""
        return self._is_whole

    @property
    def trouble(self) -> str | None:
        """Why the newest plan was not taken up; None while all is well."""
        return self._trouble

    @property
    def is_planning(self) -> bool:
        """Whether a plan is being made."""
        return self._planner.is_busy

    def plan_anew(self) -> None:
        """Read the files again, at the next occasion; may be called from any thread."""
        self._is_wanted = True

    def see_to_it(self, place: Joints, correction: CorrectionInForce | None = None) -> None:
        """Have a plan made from where the mount stands, if one is wanted; take up what is made."""
        if self._is_wanted or self._is_due():
            self._ask(place, correction)
        outcome = self._planner.collect()
        if outcome is None:
            return
        was_hurried, self._is_hurried = self._is_hurried, False
        if outcome.result is None:
            self._trouble = f"the plan was not taken up: {outcome.error}"
            self._tell(self._trouble)
            if isinstance(outcome.error, PlannerDied):
                self._again_s = self._clock.monotonic_s() + AGAIN_AFTER_S
        elif was_hurried:
            self._assignments = outcome.result.assignments or None
            self._ask(place, correction)
        else:
            self._take_up(outcome.result)

    def close(self) -> None:
        """Drop what is being made."""
        self._planner.close()

    def _is_due(self) -> bool:
        is_again = self._clock.monotonic_s() >= self._again_s
        asked_s = self._asked_offset_s
        return is_again or (asked_s is not None and abs(self._offset_s() - asked_s) > CLOCK_STEP_S)

    def _offset_s(self) -> float:
        return self._clock.utc_s() - self._clock.monotonic_s()

    def _ask(self, place: Joints, correction: CorrectionInForce | None) -> None:
        self._is_wanted, self._again_s = False, inf
        self._asked_offset_s = self._offset_s()
        now_s = self._clock.utc_s()
        begun_by_s = now_s + SOON_S if self._is_hurried else None
        self._planner.ask(
            BriefingOrder(self._station, self._plan, now_s, place, correction, begun_by_s)
        )

    def _take_up(self, briefing: "Briefing") -> None:
        self._assignments, self._is_whole = briefing.assignments, True
        self._trouble = None
        for each in briefing.contacts:
            if each.trouble is not None:
                self._tell(f"contact {each.contact.id} cannot be served: {each.trouble}")
