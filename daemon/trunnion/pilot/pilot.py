"""What to do now: the state machine between a programme of contacts and one demand a turn.

The phase follows from the situation alone (time, programme, wishes, where the mount stands), not
from a history of events, so a pilot that was started in the middle of a contact does what one
that has been running for a week would do. Memory serves only to keep an errand once begun.
"""

from bisect import bisect_right
from enum import Enum
from typing import NamedTuple

from trunnion.mount.joints import Joints, Motion, Reading
from trunnion.mount.motion import approach
from trunnion.mount.sphere import separation_deg
from trunnion.pilot.decision import Decision, Situation
from trunnion.pilot.departure import Departure, Facts, Pause, plan_departure
from trunnion.pilot.phase import Phase, Wish
from trunnion.pilot.route import Route, is_at_rest_at
from trunnion.pilot.sunlit import Sunlit
from trunnion.sky.errors import SkyError
from trunnion.sky.look import Look
from trunnion.track.path import Assignment
from trunnion.track.transit import NoWay, transit

REVIEW_S = 1.0
"""A way that may need a detour, or a departure, is thought over this often, not every turn."""

LONGEST_STEP_S = 0.25
"""After a stall the demand moves on as if this little time had passed, and then catches up."""

CLOSE_DEG = 2.0
"""A path nearer than this in both joints is chased straight, without looking for a detour."""


class _Kind(Enum):
    CONTACT = "contact"
    AHEAD = "ahead"
    STOW = "stow"
    HOLD = "hold"


class _Errand(NamedTuple):
    kind: _Kind
    assignment: Assignment | None = None

    def is_same(self, other: "_Errand") -> bool:
        """Whether it is for the same end: the same contact may have been planned anew."""
        return self.kind is other.kind and _contact(self) == _contact(other)


class _Blocked(NamedTuple):
    """An errand that cannot be done, why, and until when (monotonic) that is taken for granted."""

    errand: _Errand
    until_s: float
    trouble: str

    def holds(self, errand: _Errand, mono_s: float) -> bool:
        return mono_s < self.until_s and errand.is_same(self.errand)

    def decision(self) -> Decision:
        return Decision(Phase.HOLDING, None, self.errand.assignment, trouble=self.trouble)


class Pilot:
    """Decides, turn by turn, where the joints should be."""

    def __init__(self, facts: Facts) -> None:
        self._sunlit = Sunlit(facts)
        self._facts = facts
        self._errand = _Errand(_Kind.HOLD)
        self._route: Route | None = None
        self._blocked: _Blocked | None = None
        self._departure: Departure | None = None
        self._departure_case: tuple[Assignment, Joints] | None = None
        self._review_s = float("-inf")
        self._last_mono_s: float | None = None

    def decide(self, now: Situation) -> Decision:
        """The demand of this turn, and how the contact that is on fares whatever is being done."""
        self._facts = self._sunlit.facts(now.sun)
        scheduled = _scheduled(now)
        decision = self._decide(now, scheduled, self._elapsed_s(now.mono_s))
        if decision.look is not None or scheduled is None or scheduled.begin_s > now.utc_s:
            return decision
        return self._with_contact(decision, scheduled, now)

    def _decide(self, now: Situation, scheduled: Assignment | None, dt_s: float) -> Decision:
        if now.reading is None or now.is_stopped:
            self._take_up(_Errand(_Kind.HOLD))
            return Decision(Phase.HALTED if now.is_stopped else Phase.STARTING, None)
        if now.way_back is not None:
            self._take_up(_Errand(_Kind.HOLD))
            return Decision(Phase.RECOVERING, Motion(*now.way_back))
        base = now.ordered or Motion(*now.reading.joints)
        try:
            self._take_up(self._choose(now, scheduled, base))
            if self._blocked is not None and self._blocked.holds(self._errand, now.mono_s):
                return self._blocked.decision()
            return self._fly(now, base, dt_s, now.reading)
        except (NoWay, SkyError) as problem:
            self._route = None
            self._blocked = _Blocked(self._errand, now.mono_s + REVIEW_S, str(problem))
            return self._blocked.decision()

    def _elapsed_s(self, mono_s: float) -> float:
        last_s, self._last_mono_s = self._last_mono_s, mono_s
        return 0.0 if last_s is None else min(max(mono_s - last_s, 0.0), LONGEST_STEP_S)

    def _take_up(self, errand: _Errand) -> None:
        if not errand.is_same(self._errand):
            self._route = None
            self._review_s = float("-inf")
        self._errand = errand

    # -- what to do -----------------------------------------------------------------------------

    def _choose(self, now: Situation, upcoming: Assignment | None, base: Motion) -> _Errand:
        if now.wish is Wish.STAND:
            return _Errand(_Kind.HOLD)
        if now.must_stow or now.wish is Wish.STOW:
            return _Errand(_Kind.STOW)
        if now.wish is Wish.HOLD:
            return _Errand(_Kind.HOLD)
        if upcoming is None:
            self._departure = None
            return _Errand(_Kind.STOW)
        if upcoming.begin_s <= now.utc_s:
            return _Errand(_Kind.CONTACT, upcoming)
        return self._between(upcoming, now, base)

    def _between(self, upcoming: Assignment, now: Situation, base: Motion) -> _Errand:
        ahead = _Errand(_Kind.AHEAD, upcoming)
        if self._errand.is_same(ahead):
            return ahead
        departure = self._departure_for(upcoming, now, base)
        is_time = departure.pause is Pause.GO or now.utc_s >= departure.leave_s
        return ahead if is_time else _Errand(_Kind.STOW)

    def _departure_for(self, upcoming: Assignment, now: Situation, base: Motion) -> Departure:
        """Thought over when the case has changed, at most once in `REVIEW_S`."""
        case = (upcoming, self._facts.mount.stow if self._is_stowed(base) else base.joints)
        is_known = self._departure is not None and (
            case == self._departure_case or not self._is_due(now.mono_s)
        )
        if self._departure is None or not is_known:
            start = upcoming.path.at(upcoming.begin_s).joints
            self._departure_case = case
            self._departure = plan_departure(
                case[1], start, upcoming.begin_s, now.utc_s, self._facts
            )
        return self._departure

    def _is_due(self, mono_s: float) -> bool:
        if mono_s < self._review_s:
            return False
        self._review_s = mono_s + REVIEW_S
        return True

    def _is_stowed(self, base: Motion) -> bool:
        return is_at_rest_at(base, self._facts.mount.stow)

    # -- how to do it ---------------------------------------------------------------------------

    def _fly(self, now: Situation, base: Motion, dt_s: float, reading: Reading) -> Decision:
        kind, assignment = self._errand
        if kind is _Kind.HOLD:
            return Decision(Phase.HOLDING, None)
        if kind is _Kind.STOW:
            demand, is_there = self._go_to(self._facts.mount.stow, base, dt_s)
            phase = Phase.STOWED if is_there else Phase.STOWING
            return Decision(phase, demand, departure_s=self._departure and self._departure.leave_s)
        assert assignment is not None  # noqa: S101 - both other errands are made with one
        if kind is _Kind.AHEAD:
            return self._go_ahead(assignment, base, dt_s)
        return self._follow(assignment, now, base, dt_s, reading)

    def _go_ahead(self, assignment: Assignment, base: Motion, dt_s: float) -> Decision:
        start = assignment.path.at(assignment.begin_s).joints
        demand, is_there = self._go_to(start, base, dt_s)
        return Decision(Phase.WAITING if is_there else Phase.SLEWING, demand, assignment)

    def _follow(
        self, assignment: Assignment, now: Situation, base: Motion, dt_s: float, reading: Reading
    ) -> Decision:
        goal = assignment.path.at(now.utc_s)
        demand = self._detour(goal.joints, now.mono_s, base, dt_s) or approach(
            base, goal, self._facts.mount, dt_s
        )
        look, error_deg = self._pointing_error(assignment, now, reading)
        is_on_target = error_deg <= self._facts.tolerance_deg
        phase = Phase.TRACKING if is_on_target else Phase.ACQUIRING
        return Decision(phase, demand, assignment, look, error_deg)

    def _go_to(self, goal: Joints, base: Motion, dt_s: float) -> tuple[Motion, bool]:
        if self._route is None or self._route.goal != goal:
            self._route = Route(
                transit(base.joints, goal, self._facts.mount, self._facts.clearance)
            )
        if self._route.is_done(base):
            return Motion(*goal), True
        return self._route.step(base, self._facts.mount, dt_s), False

    def _detour(self, goal: Joints, mono_s: float, base: Motion, dt_s: float) -> Motion | None:
        """Fly the corners of a way that is not clear straight ahead; None when it is."""
        if self._route is not None and not self._route.is_done(base):
            return self._route.step(base, self._facts.mount, dt_s)
        self._route = None
        if _are_close(base.joints, goal) or not self._is_due(mono_s):
            return None
        *corners, _ = transit(base.joints, goal, self._facts.mount, self._facts.clearance)
        if not corners:
            return None
        self._route = Route(corners)
        return self._route.step(base, self._facts.mount, dt_s)

    def _with_contact(self, decision: Decision, assignment: Assignment, now: Situation) -> Decision:
        """The same decision, with what the contact that is on is missing by it."""
        if now.reading is None:
            return decision._replace(assignment=assignment)
        try:
            look, error_deg = self._pointing_error(assignment, now, now.reading)
        except SkyError:
            return decision._replace(assignment=assignment)
        return decision._replace(assignment=assignment, look=look, error_deg=error_deg)

    def _pointing_error(
        self, assignment: Assignment, now: Situation, reading: Reading
    ) -> tuple[Look, float]:
        """The target now, and its distance from the boresight when the joints were read."""
        age_s = now.mono_s - reading.taken_s
        then = assignment.path.look(now.utc_s - age_s)
        azimuth_deg, elevation_deg = self._facts.mount.hinges.boresight(reading.joints)
        error_deg = separation_deg(then.azimuth_deg, then.elevation_deg, azimuth_deg, elevation_deg)
        return (then if age_s == 0.0 else assignment.path.look(now.utc_s)), error_deg


def _scheduled(now: Situation) -> Assignment | None:
    """The assignment that is on, or else the next one."""
    index = bisect_right(now.assignments, now.utc_s, key=lambda each: each.end_s)
    return now.assignments[index] if index < len(now.assignments) else None


def _contact(errand: _Errand) -> str | None:
    return errand.assignment.contact if errand.assignment is not None else None


def _are_close(one: Joints, other: Joints) -> bool:
    return (
        abs(one.first_deg - other.first_deg) < CLOSE_DEG
        and abs(one.second_deg - other.second_deg) < CLOSE_DEG
    )
