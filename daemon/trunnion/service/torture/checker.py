"""The judge: looks at the true joints and at what the operator was told, and at nothing else.

Written apart from the gate, and knows nothing of it. Each check stands for one guarantee.
"""

from collections import deque
from collections.abc import Callable, Iterable, Iterator
from math import inf
from typing import NamedTuple

from trunnion.mount.joints import Joints
from trunnion.mount.mount import JointLimits
from trunnion.mount.sphere import separation_deg
from trunnion.pilot.phase import Wish
from trunnion.service.torture import allowance
from trunnion.service.torture.flight import TRANSMIT_FLOOR_DEG, Instant
from trunnion.service.torture.mishap import Mishap
from trunnion.service.torture.mishap import MishapKind as Kind
from trunnion.service.torture.process import TICK_S, TOLERANCE_DEG
from trunnion.service.torture.scenario import Scenario

RESTING_DEG_S = 1e-6
STILL_DEG = 1e-3
REACTION_S = 0.5
"""Two turns, and the latency of the mount."""
WATCHDOG_S = 2.0
"""The simulated mount ends a motion by itself that is not renewed for so long."""
POWER_REACTION_S = 2.0
"""A mount gets so long, and time to brake, before a stop takes the power of its motors."""
RETURN_DEG = 1.2
"""A mount that comes back inside moves so far in a second at most: 0.5° as ordered, and more for
steel that swings round its orders, which come from readings that are a little wrong."""
READING_MAX_AGE_S = 1.0
CONTACT_LOST_DEG = 1.0
NOTICED_DEG = 2.5
"""A joint that should rest has moved so far at most when it is stopped for good."""
SHORT_S = 1.1
SOON_S, LATE_S = 25.0, 90.0
"""On target again so long after a short mishap, or after a longer one."""


class Violation(NamedTuple):
    """What was promised and not kept, and when."""

    since_s: float
    guarantee: str
    sentence: str


class Checker:
    """Takes in the instants of one flight, in order."""

    def __init__(self, scenario: Scenario) -> None:
        self._scenario = scenario
        self._mishaps = scenario.mishaps
        self._before: Instant | None = None
        self._stopped_s: float | None = None
        self._rest: Instant | None = None
        self._runs_from: dict[Mishap, float] = {}
        self._held: Instant | None = None
        self._rests_from: tuple[float, Joints] | None = None
        self.deepest_deg = -inf
        """How far the true beam came below what is allowed, all excuses granted."""
        mount = scenario.mount
        self._braking_s = max(_braking_s(mount.first), _braking_s(mount.second))
        self._begins_outside = self._is_outside = not self._is_inside(scenario.start)
        self._trail: deque[tuple[float, Joints]] = deque()

    def note(self, now: Instant) -> Iterator[Violation]:
        """What this instant violates."""
        self._keep_track(now)
        for guarantee, check in self._checks():
            sentence = check(now)
            if sentence is not None:
                yield Violation(now.since_s, guarantee, sentence)
        self._before = now

    def _checks(self) -> Iterable[tuple[str, Callable[[Instant], str | None]]]:
        return (
            ("1 travel", self._in_travel),
            ("2 sky", self._in_the_clear),
            ("2 Sun", self._off_the_sun),
            ("3 stop holds", self._stop_holds),
            ("3 stop rests", self._rests_when_stopped),
            ("3 stop takes the power", self._rests_without_power),
            ("3 reset starts nothing", self._rests_after_reset),
            ("4 blind", self._rests_when_blind),
            ("5 disobedience", self._latches_disobedience),
            ("5 rests", self._notices_slipping),
            ("6 outside", self._stays_outside),
            ("7 stow", self._stows),
            ("8 transmit", self._transmits_on_target),
            ("records", self._goes_on_record),
            ("comes back", self._comes_back),
            ("no false alarm", self._no_false_alarm),
        )

    def _keep_track(self, now: Instant) -> None:
        if self._is_outside and self._is_inside(now.true.joints):
            self._is_outside = False
        was_stopped = self._before is not None and self._before.stopped is not None
        if now.stopped is None:
            self._stopped_s = None
        elif not was_stopped:
            self._stopped_s = now.since_s
            self._rest = None

    # -- where it is ----------------------------------------------------------------------------

    def _in_travel(self, now: Instant) -> str | None:
        if allowance.is_unruly(self._scenario, now.since_s) or self._is_outside:
            return None
        excused_deg = allowance.excused_deg(self._scenario, now.since_s)
        mount = self._scenario.mount
        for angle_deg, joint in ((now.true[0], mount.first), (now.true[1], mount.second)):
            if not _is_within(angle_deg, joint, excused_deg):
                return f"a joint at {angle_deg:.3f}°, its travel is {joint}"
        return None

    def _in_the_clear(self, now: Instant) -> str | None:
        if allowance.is_unruly(self._scenario, now.since_s) or self._is_outside:
            return None
        excused_deg = allowance.excused_deg(self._scenario, now.since_s)
        clearance = self._scenario.clearance
        azimuth_deg, elevation_deg = self._scenario.mount.hinges.boresight(now.true.joints)
        lowest_deg = min(
            clearance.lowest_deg((azimuth_deg + aside_deg) % 360.0)
            for aside_deg in (-excused_deg, 0.0, excused_deg)
        )
        self.deepest_deg = max(self.deepest_deg, lowest_deg - excused_deg - elevation_deg)
        if elevation_deg < lowest_deg - excused_deg:
            return f"beam at {azimuth_deg:.2f}°/{elevation_deg:.3f}°, lowest is {lowest_deg:.3f}°"
        corners = (
            ((azimuth_deg + aside_deg) % 360.0, elevation_deg + above_deg)
            for aside_deg in (-excused_deg, excused_deg)
            for above_deg in (-excused_deg, excused_deg)
        )
        if all(clearance.keep_out(*corner) is not None for corner in corners):
            return f"beam at {azimuth_deg:.2f}°/{elevation_deg:.2f}°, in a keep-out"
        return None

    def _off_the_sun(self, now: Instant) -> str | None:
        sun = self._scenario.sun
        if sun is None or allowance.is_unruly(self._scenario, now.since_s) or self._is_outside:
            return None
        apart_deg = sun.apart_deg(*self._scenario.mount.hinges.boresight(now.true.joints))
        if apart_deg < sun.keep_out_deg - allowance.excused_deg(self._scenario, now.since_s):
            return f"beam {apart_deg:.2f}° from the Sun, {sun.keep_out_deg:.2f}° are kept"
        return None

    # -- stops ----------------------------------------------------------------------------------

    def _stop_holds(self, now: Instant) -> str | None:
        before = self._before
        if before is None or before.stopped is None or now.stopped is not None:
            return None
        if self._was(now, Kind.RESET) or self._was(now, Kind.DISK_FULL, 1e9):
            return None
        return f"a stop was lifted by nobody: {before.stopped}"

    def _rests_when_stopped(self, now: Instant) -> str | None:
        if self._stopped_s is None or allowance.is_unruly(self._scenario, now.since_s):
            return None
        if now.since_s - self._stopped_s < self._rest_after_s(now.since_s):
            return None
        if self._rest is None:
            self._rest = now
        moved_deg = _apart_deg(now.true.joints, self._rest.true.joints)
        if _is_moving(now) or moved_deg > self._still_deg(now):
            return f"{moved_deg:.3f}° of motion while stopped"
        return None

    def _rests_without_power(self, now: Instant) -> str | None:
        """Even a joint that obeys no halt rests in the end: its motor has no power any more."""
        longest_s = POWER_REACTION_S + 2.5 * self._braking_s
        if self._stopped_s is None or now.since_s - self._stopped_s < longest_s:
            return None
        if allowance.is_any_on(self._scenario, allowance.HINDERING, now.since_s, longest_s):
            return None
        return "a joint moves long after a stop, so it has power" if _is_moving(now) else None

    def _rests_after_reset(self, now: Instant) -> str | None:
        before = self._before
        if before is None or now.stopped is not None or now.wish is not Wish.STAND:
            self._held = None
            return None
        if before.stopped is not None:
            self._held = now
        if self._held is None or allowance.is_unruly(self._scenario, now.since_s):
            return None
        moved_deg = _apart_deg(now.true.joints, self._held.true.joints)
        is_new = now.since_s - self._held.since_s > self._rest_after_s(now.since_s)
        if is_new and _is_moving(now) and not self._was(now, Kind.RECOVER, 120.0):
            return f"{moved_deg:.3f}° of motion after a reset, and nobody asked for it"
        return None

    def _rest_after_s(self, since_s: float) -> float:
        """How long a halt may take by now."""
        scenario = self._scenario
        grace_s = WATCHDOG_S + self._braking_s + REACTION_S
        is_deaf = allowance.is_any_on(scenario, allowance.DEAFENING, since_s, grace_s)
        slow_s = sum(abs(m.amount) * 4 for m in scenario.mishaps if m.kind is Kind.SLOW_CALLS)
        deaf_s = max(
            (m.lasts_s for m in scenario.mishaps if m.kind in allowance.DEAFENING), default=0.0
        )
        return REACTION_S + self._braking_s + (WATCHDOG_S + deaf_s + slow_s if is_deaf else 0.0)

    # -- what is not as it should be ------------------------------------------------------------

    def _rests_when_blind(self, now: Instant) -> str | None:
        blind_s = allowance.lasts_since(self._scenario, allowance.BLINDING, now.since_s)
        grace_s = READING_MAX_AGE_S + WATCHDOG_S + self._braking_s + REACTION_S
        if blind_s < grace_s or allowance.is_unruly(self._scenario, now.since_s):
            return None
        if self._was(now, Kind.SLOW_CALLS, 1e9) or self._was(now, Kind.STALL, 5.0):
            return None
        return f"moving blindly for {blind_s:.1f} s" if _is_moving(now) else None

    def _latches_disobedience(self, now: Instant) -> str | None:
        if self._off_target_deg(now) < CONTACT_LOST_DEG:
            self._runs_from.clear()  # along with the target nobody can tell it from obedience
            return None
        for mishap in self._scenario.mishaps:
            if mishap.kind not in allowance.RUNNING or not mishap.is_on(now.since_s):
                continue
            angle_deg = now.true[mishap.joint]
            ran_deg = abs(angle_deg - self._runs_from.setdefault(mishap, angle_deg))
            if now.stopped is None and ran_deg > self._runaway_deg(mishap.joint) + self._blind_deg(
                mishap.joint
            ):
                return f"joint {mishap.joint + 1} ran {ran_deg:.1f}° and nothing was stopped"
        return None

    def _notices_slipping(self, now: Instant) -> str | None:
        """A joint that should rest and creeps is stopped for good, unless nobody can see it."""
        is_to_rest = now.wish in {Wish.STAND, Wish.HOLD} and now.stopped is None
        slips = allowance.is_any_on(self._scenario, _SLIPPING, now.since_s)
        if not (is_to_rest and slips) or any(
            self._was(now, kind, 30.0) for kind in _MOVING | _HIDING
        ):
            self._rests_from = None
            return None
        since_s, place = self._rests_from = self._rests_from or (now.since_s, now.true.joints)
        if now.since_s - since_s < self._rest_after_s(now.since_s):
            self._rests_from = since_s, now.true.joints
        crept_deg = _apart_deg(now.true.joints, place)
        is_unseen = crept_deg > NOTICED_DEG and _is_moving(now)
        return f"a brake slipped by {crept_deg:.1f}°, unnoticed" if is_unseen else None

    def _off_target_deg(self, now: Instant) -> float:
        """How far the true beam is off the target of the contact that is followed."""
        if now.wish is not Wish.FOLLOW_PLAN:
            return inf
        place = self._scenario.mount.hinges.boresight(now.true.joints)
        looks = (arc.look(now.utc_s) for arc in self._scenario.contacts if arc.is_on(now.utc_s))
        return min((separation_deg(look[0], look[1], *place) for look in looks), default=inf)

    def _runaway_deg(self, joint: int) -> float:
        """How far a joint may run before it is noticed, at rest or under way."""
        mount = self._scenario.mount
        limits = mount.second if joint else mount.first
        return limits.rate_deg_s * (2.0 + 1.5 * _braking_s(limits)) + 3.0

    def _blind_deg(self, joint: int) -> float:
        """How far it may run while nobody sees it."""
        mount = self._scenario.mount
        rate_deg_s = (mount.second if joint else mount.first).rate_deg_s
        return sum(
            rate_deg_s * (each.lasts_s + 4.0)
            for each in self._scenario.mishaps
            if each.kind in _HIDING
        )

    def _stays_outside(self, now: Instant) -> str | None:
        if not self._is_outside or allowance.is_unruly(self._scenario, now.since_s):
            return None
        if any(each.kind is Kind.RECOVER and each.at_s <= now.since_s for each in self._mishaps):
            return self._returns_slowly(now)
        moved_deg = _apart_deg(now.true.joints, self._scenario.start)
        is_still = moved_deg <= self._still_deg(now)
        return None if is_still else f"moved {moved_deg:.2f}° from outside"

    def _still_deg(self, now: Instant) -> float:
        """What counts as no motion: wind bends an antenna whose joints stand still, and lets go."""
        return STILL_DEG + allowance.bent_deg(self._scenario, now.since_s, grace_s=inf)

    def _returns_slowly(self, now: Instant) -> str | None:
        """Told to come back inside: by the shortest way, slowly, never further out."""
        place, last = now.true.joints, self._trail[-1][1] if self._trail else self._scenario.start
        self._trail.append((now.since_s, place))
        while self._trail[0][0] < now.since_s - 1.0 - 0.5 * TICK_S:
            self._trail.popleft()  # a dead process shows no instants, and the mount moves on
        moved_deg = _apart_deg(place, self._trail[0][1])
        bent_deg = allowance.bent_deg(self._scenario, now.since_s)
        if moved_deg > RETURN_DEG + bent_deg:
            return f"comes back inside by {moved_deg:.2f}° in a second"
        mount = self._scenario.mount
        for joint, before_deg, now_deg in zip(
            (mount.first, mount.second), last, place, strict=True
        ):
            if _beyond_deg(now_deg, joint) > _beyond_deg(before_deg, joint) + STILL_DEG + bent_deg:
                return f"led further out, to {place}"
        return None

    def _is_inside(self, place: Joints) -> bool:
        mount = self._scenario.mount
        return (
            _is_within(place.first_deg, mount.first, 0.0)
            and _is_within(place.second_deg, mount.second, 0.0)
            and self._scenario.clearance.is_clear(*mount.hinges.boresight(place))
        )

    def _stows(self, now: Instant) -> str | None:
        mount = self._scenario.mount
        longest_s = 20.0 + 3.0 * sum(
            (joint.upper_deg - joint.lower_deg) / joint.rate_deg_s + _braking_s(joint)
            for joint in (mount.first, mount.second)
        )
        lasts_s = allowance.lasts_since(self._scenario, allowance.STOWING, now.since_s)
        if lasts_s < longest_s or allowance.is_unruly(self._scenario, now.since_s):
            return None
        return "still moving when it should be in stow" if _is_moving(now) else None

    def _transmits_on_target(self, now: Instant) -> str | None:
        if not now.may_transmit:
            return None
        if now.stopped is not None:
            return "transmitting is permitted while stopped"
        excused_deg = allowance.excused_deg(self._scenario, now.since_s)
        azimuth_deg, elevation_deg = self._scenario.mount.hinges.boresight(now.true.joints)
        if elevation_deg < TRANSMIT_FLOOR_DEG - excused_deg:
            return f"transmitting is permitted at {elevation_deg:.2f}°"
        if any(each.kind in _STRAYING for each in self._scenario.mishaps):
            return None
        for arc in self._scenario.contacts:
            if arc.begin_s <= now.utc_s - TICK_S and now.utc_s - TICK_S < arc.end_s:
                look = arc.look(now.utc_s)
                rate_deg_s = abs(look.azimuth_rate_deg_s) + abs(look.elevation_rate_deg_s)
                error_deg = separation_deg(look[0], look[1], azimuth_deg, elevation_deg)
                if error_deg <= TOLERANCE_DEG + 2.0 * excused_deg + rate_deg_s:
                    return None
                return f"transmitting is permitted {error_deg:.2f}° off target"
        return "transmitting is permitted outside all contacts"

    # -- what must not be lost ------------------------------------------------------------------

    def _goes_on_record(self, now: Instant) -> str | None:
        if self._was(now, Kind.TORN_LATCH, 5.0):
            return None
        return now.records_trouble

    def _comes_back(self, now: Instant) -> str | None:
        scenario = self._scenario
        if self._begins_outside or not allowance.has_only(scenario, allowance.HARMLESS):
            return None
        if any(each.kind in allowance.STOWING for each in scenario.mishaps):
            return None
        for arc in scenario.contacts:
            if not arc.end_s - 2 * TICK_S <= now.utc_s < arc.end_s:
                continue
            if any(not _is_long_over(each.end_s, each.lasts_s, now) for each in scenario.mishaps):
                return None
            look = arc.look(now.utc_s)
            place = scenario.mount.hinges.boresight(now.true.joints)
            error_deg = separation_deg(look[0], look[1], *place)
            if error_deg > CONTACT_LOST_DEG:
                return f"{arc.name} ends {error_deg:.1f}° off target, and all faults are over"
        return None

    def _no_false_alarm(self, now: Instant) -> str | None:
        if now.stopped is None or not allowance.has_only(self._scenario, allowance.HARMLESS):
            return None
        return f"stopped although nothing was broken: {now.stopped}"

    def _was(self, now: Instant, kind: Kind, within_s: float = 0.3) -> bool:
        return any(
            each.kind is kind and 0.0 <= now.since_s - each.at_s <= within_s + each.lasts_s
            for each in self._scenario.mishaps
        )


_MOVING = allowance.STOWING | {Kind.RECOVER, Kind.CLOCK_UNTRUSTED}
"""With one of these a mount that is told to hold moves all the same."""

_SLIPPING = frozenset({Kind.SLIPPING})

_HIDING = allowance.BLINDING | {
    Kind.OLD_READINGS,
    Kind.SLOW_CALLS,
    Kind.STALL,
    Kind.FROZEN,
    Kind.DEATH,
    Kind.TORN_LATCH,
    Kind.DEAF,
    Kind.REFUSING,
}
"""While one of these lasts, nobody can see what a joint does."""

_STRAYING = frozenset({Kind.BAD_PLAN, Kind.NEW_PLAN, Kind.NO_PLAN, Kind.CLOCK_STEP})
"""With one of these the contacts as drawn do not say what the target is."""


def _is_long_over(end_s: float, lasts_s: float, now: Instant) -> bool:
    wait_s = SOON_S if lasts_s <= SHORT_S else LATE_S
    return now.since_s - end_s >= wait_s


def _braking_s(joint: JointLimits) -> float:
    return joint.rate_deg_s / joint.acceleration_deg_s2


def _is_within(angle_deg: float, joint: JointLimits, excused_deg: float) -> bool:
    return joint.lower_deg - excused_deg <= angle_deg <= joint.upper_deg + excused_deg


def _beyond_deg(angle_deg: float, joint: JointLimits) -> float:
    return max(joint.lower_deg - angle_deg, angle_deg - joint.upper_deg, 0.0)


def _is_moving(now: Instant) -> bool:
    first, second = now.true.first_rate_deg_s, now.true.second_rate_deg_s
    return max(abs(first), abs(second)) > RESTING_DEG_S


def _apart_deg(one: Joints, other: Joints) -> float:
    return max(abs(one.first_deg - other.first_deg), abs(one.second_deg - other.second_deg))
