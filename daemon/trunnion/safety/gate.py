"""The gate: the last thing between anybody's wish and the mount. It believes nobody.

Pure: the time is an argument, and its small memory is the last order and the last readings. What it
lets through is within the travel, the rates and the accelerations, clear of floor, mask and
keep-outs at its end, on the way there from where the mount says it is, and within the stopping
distance behind it.
"""

from math import isfinite

from trunnion.mount.joints import Motion, Reading
from trunnion.mount.motion import approach
from trunnion.safety.hazard import Hazard
from trunnion.safety.limits import SafetyLimits
from trunnion.safety.places import find_at, find_on_the_way, stopping_place
from trunnion.safety.policy import POLICY
from trunnion.safety.readings import ReadingWatch
from trunnion.safety.surroundings import find_around
from trunnion.safety.verdict import Action, Halt, Intervention, Move, Rule, Verdict
from trunnion.safety.world import World

LONGEST_STEP_S = 0.25
"""After a late turn an order moves on as if this little time had passed, not by a leap."""

NOTICEABLE_DEG_S = 0.1
"""Less than this a measured rate may differ from the ordered one by the encoder's noise alone."""

_BLIND = frozenset(
    {Rule.NO_READING, Rule.READING_OLD, Rule.READING_IMPOSSIBLE, Rule.READING_JUMPED}
)
"""With one of these nobody knows where the mount is, and no order can be judged."""


class Gate:
    """Judges one demand a turn."""

    def __init__(self, limits: SafetyLimits) -> None:
        self._limits = limits
        self._watch = ReadingWatch(limits)
        self._ordered: Motion | None = None
        self._judged_s: float | None = None

    def judge(
        self, mono_s: float, demand: Motion | None, reading: Reading | None, world: World
    ) -> Verdict:
        """The order that leaves in this turn; a demand of None asks for rest."""
        dt_s = self._elapsed_s(mono_s)
        hazards = [
            *find_around(world, self._limits),
            *self._watch.find(mono_s, reading, self._ordered),
        ]
        motion: Motion | None = None
        is_blind = any(hazard.rule in _BLIND for hazard in hazards)
        if demand is not None and reading is not None and not is_blind:
            motion, found = self._examine(demand, reading, dt_s, may_recover=world.may_recover)
            hazards += found
        return self._verdict(motion, hazards)

    def _elapsed_s(self, mono_s: float) -> float:
        last_s, self._judged_s = self._judged_s, mono_s
        return 0.0 if last_s is None else min(max(mono_s - last_s, 0.0), LONGEST_STEP_S)

    def _examine(
        self, demand: Motion, reading: Reading, dt_s: float, *, may_recover: bool
    ) -> tuple[Motion | None, list[Hazard]]:
        """The motion nearest to the demand that may leave, if any, and what kept it from more."""
        if not isfinite(sum(demand)):
            return None, [Hazard(Rule.NOT_FINITE, f"asked for {demand}")]
        outside = find_at(reading.joints, self._limits, self._limits.encoder_error_deg)
        if outside is not None:
            return self._examine_return(demand, reading, outside, may_recover=may_recover)
        base = self._ordered or Motion(*reading.joints)
        motion = approach(base, demand, self._limits.mount, dt_s)
        found = (
            [] if motion == demand else [Hazard(Rule.RATE, "asked for more than a joint can do")]
        )
        forbidden = self._find_before(motion, reading)
        if forbidden is None and motion != demand:
            forbidden = find_at(demand.joints, self._limits)
        if forbidden is not None:
            return None, [*found, forbidden]
        beyond = self._find_beyond(motion)
        if beyond is None:
            return motion, found
        found.append(Hazard(Rule.STOPPING, f"could not stop in time: {beyond.finding}"))
        braking = approach(
            base, Motion(*stopping_place(base, self._limits)), self._limits.mount, dt_s
        )
        if self._find_before(braking, reading) is not None:
            return None, [*found, beyond]
        return braking, found

    def _find_beyond(self, motion: Motion) -> Hazard | None:
        """What forbids the place where the joints would rest if they braked from now on.

        From the order's own rate, and from the rate that the readings show: a mount that runs ahead
        of its orders, or after them, needs its own room.
        """
        beyond = find_at(stopping_place(motion, self._limits), self._limits)
        measured = self._watch.measured()
        if beyond is not None or measured is None or not _is_faster(measured, motion):
            return beyond
        place = stopping_place(measured, self._limits)
        return find_at(place, self._limits, self._limits.encoder_error_deg)

    def _find_before(self, motion: Motion, reading: Reading) -> Hazard | None:
        """What forbids the order itself, or the way to it from where the mount says it is.

        A mount that reads just outside a limit, by no more than its encoder's error, may be there.
        """
        return find_on_the_way(reading.joints, motion.joints, self._limits)

    def _examine_return(
        self, demand: Motion, reading: Reading, outside: Hazard, *, may_recover: bool
    ) -> tuple[Motion | None, list[Hazard]]:
        """A mount outside its limits moves only back inside, slowly, and only with leave."""
        hazard = Hazard(Rule.OUTSIDE, f"the mount is outside its limits: {outside.finding}")
        slowest = self._limits.recovery_rate_deg_s
        is_slow = (
            abs(demand.first_rate_deg_s) <= slowest and abs(demand.second_rate_deg_s) <= slowest
        )
        if not (may_recover and is_slow and self._leads_inside(demand, reading)):
            return None, [hazard]
        return demand, []

    def _leads_inside(self, demand: Motion, reading: Reading) -> bool:
        """Whether a demand brings every joint nearer to its travel, and the beam no lower."""
        limits = self._limits.mount
        for was_deg, will_deg, joint in (
            (reading.first_deg, demand.first_deg, limits.first),
            (reading.second_deg, demand.second_deg, limits.second),
        ):
            was_out = max(joint.lower_deg - was_deg, was_deg - joint.upper_deg, 0.0)
            if max(joint.lower_deg - will_deg, will_deg - joint.upper_deg, 0.0) > was_out:
                return False
        _, was_elevation = limits.hinges.boresight(reading.joints)
        _, will_elevation = limits.hinges.boresight(demand.joints)
        return will_elevation >= was_elevation

    def _verdict(self, motion: Motion | None, hazards: list[Hazard]) -> Verdict:
        if not hazards:
            self._ordered = motion
            return Verdict(Halt() if motion is None else Move(motion))
        policies = [POLICY[hazard.rule] for hazard in hazards]
        worst = max((policy.action for policy in policies), default=Action.SLOW)
        order = Halt() if motion is None or worst >= Action.HALT else Move(motion)
        self._ordered = order.motion if isinstance(order, Move) else None
        latching = [hazard for hazard in hazards if POLICY[hazard.rule].action is Action.LATCH]
        return Verdict(
            order,
            tuple(_intervention(hazard) for hazard in hazards),
            wants_stow=any(policy.action is Action.STOW for policy in policies),
            latch=latching[0].finding if latching else None,
        )


def _is_faster(measured: Motion, ordered: Motion) -> bool:
    """Whether a joint moves noticeably faster than it was told to, and so needs more room."""
    return (
        abs(measured.first_rate_deg_s) > abs(ordered.first_rate_deg_s) + NOTICEABLE_DEG_S
        or abs(measured.second_rate_deg_s) > abs(ordered.second_rate_deg_s) + NOTICEABLE_DEG_S
    )


_DONE = {
    Action.SLOW: "slowed down",
    Action.STOW: "going to stow",
    Action.HALT: "halted",
    Action.LATCH: "stopped for good",
}


def _intervention(hazard: Hazard) -> Intervention:
    action, _, until = POLICY[hazard.rule]
    sentence = f"{hazard.finding} ({hazard.rule.value}): {_DONE[action]} {until}"
    return Intervention(hazard.rule, action, sentence)
