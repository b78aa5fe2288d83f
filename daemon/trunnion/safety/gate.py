"""The gate: the last thing between anybody's wish and the mount. It believes nobody.

Pure: the time is an argument, and its small memory is the last order, the last readings and how
long each hazard has lasted. What it lets through is within the travel, the rates and the
accelerations, clear of floor, mask and keep-outs at its end, on the way there from where the mount
says it is, and within the stopping distance behind it. What follows from a hazard stands in the
policy.
"""

from collections.abc import Iterable, Iterator, Mapping

from trunnion.mount.joints import Joints, Motion, Reading
from trunnion.safety.belief import Belief
from trunnion.safety.clock_watch import ClockWatch
from trunnion.safety.hazard import Hazard
from trunnion.safety.lasting import Lasting
from trunnion.safety.limits import SafetyLimits
from trunnion.safety.obedience import Obedience
from trunnion.safety.orders import Examined, Mounted, examine
from trunnion.safety.places import find_at, has_room
from trunnion.safety.policy import POLICY, Policy
from trunnion.safety.recovery import examine_return
from trunnion.safety.rest import Rest
from trunnion.safety.stillness import Stillness
from trunnion.safety.sunshine import Sunshine
from trunnion.safety.surroundings import find_around
from trunnion.safety.verdict import Action, Halt, Intervention, Move, Rule, Verdict
from trunnion.safety.world import World

LONGEST_STEP_S = 0.25
"""After a late turn an order moves on as if this little time had passed, not by a leap."""

AT_STOW_DEG = 1.0
"""This near to its stow position the mount counts as stowed."""


class Gate:
    """Judges one demand a turn."""

    def __init__(self, limits: SafetyLimits, policy: Mapping[Rule, Policy] = POLICY) -> None:
        self._limits = limits
        self._policy = policy
        self._belief = Belief(limits)
        self._obedience = Obedience(limits)
        self._rest = Rest(limits)
        self._stillness = Stillness(limits)
        self._sunshine = Sunshine(limits)
        self._clock = ClockWatch(limits)
        self._lasting = Lasting(policy)
        self._ordered: Motion | None = None
        self._ordered_s = 0.0
        self._judged_s: float | None = None
        self._latch: str | None = None
        self._was_stopped = False
        self._is_still = False

    def judge(
        self, mono_s: float, demand: Motion | None, reading: Reading | None, world: World
    ) -> Verdict:
        """The order that leaves in this turn; a demand of None asks for rest."""
        dt_s = self._elapsed_s(mono_s)
        self._see_to_the_stop(world)
        hazards = list(self._find(mono_s, reading, world, is_motion_asked=demand is not None))
        examined = self._examine(demand, dt_s, hazards, world)
        hazards += examined.hazards
        self._ordered_s = mono_s
        return self._verdict(examined.motion, self._lasting.acting_at(mono_s, hazards))

    def _elapsed_s(self, mono_s: float) -> float:
        last_s, self._judged_s = self._judged_s, mono_s
        return 0.0 if last_s is None else min(max(mono_s - last_s, 0.0), LONGEST_STEP_S)

    def _see_to_the_stop(self, world: World) -> None:
        """Once it is reset, begin anew: meanwhile people may have worked on the mount."""
        is_stopped = world.emergency is not None
        if is_stopped or self._was_stopped:
            self._latch = None
        if self._was_stopped and not is_stopped:
            self._belief.forget()
            self._rest.forget()
            self._stillness.forget()
        self._was_stopped = is_stopped

    # -- what is wrong --------------------------------------------------------------------------

    def _find(
        self, mono_s: float, reading: Reading | None, world: World, *, is_motion_asked: bool
    ) -> Iterator[Hazard]:
        if self._latch is not None:
            yield Hazard(Rule.EMERGENCY_STOP, f"emergency stop: {self._latch}")
        yield from find_around(world, self._limits, self._lasting.acting)
        yield from self._sunshine.find(world)
        yield from self._clock.find(mono_s, world.utc_s)
        yield from self._belief.find(mono_s, reading)
        self._is_still = self._ordered is not None or self._stands_still()
        is_on_time = world.lateness_s <= self._limits.turn_max_lateness_s
        yield from self._find_in_motion(mono_s, can_be_told=world.is_link_up and is_on_time)
        if is_motion_asked and not self._is_still:
            yield Hazard(Rule.UNSETTLED, "the mount is not known to be at rest yet")

    def _find_in_motion(self, mono_s: float, *, can_be_told: bool) -> Iterator[Hazard]:
        """Whether the mount moves as it was told in the turn before."""
        reading, measured = self._belief.reading, self._belief.measured
        if reading is None or measured is None:
            return
        if self._is_to_stow(self._lasting.acting) and not self._is_stowed(reading):
            yield Hazard(Rule.STOW_OVERDUE, "the mount was to go to stow and is not there")
        if self._ordered is None or not can_be_told:
            self._obedience.forget()
        if self._ordered is not None or not can_be_told:
            self._rest.forget()
        if not can_be_told:
            return
        if self._ordered is not None:
            yield from self._obedience.find(self._ordered, self._ordered_s, reading)
        else:
            yield from self._rest.find(mono_s, reading, measured)

    def _is_to_stow(self, acting: Iterable[Rule]) -> bool:
        return any(self._policy[rule].action is Action.STOW for rule in acting)

    def _stands_still(self) -> bool:
        reading = self._belief.reading
        return reading is not None and self._stillness.is_still(reading)

    def _is_stowed(self, reading: Reading) -> bool:
        stow = self._limits.mount.stow
        return (
            abs(reading.first_deg - stow.first_deg) <= AT_STOW_DEG
            and abs(reading.second_deg - stow.second_deg) <= AT_STOW_DEG
        )

    def _examine(
        self, demand: Motion | None, dt_s: float, hazards: list[Hazard], world: World
    ) -> Examined:
        reading, measured = self._belief.reading, self._belief.measured
        if reading is None or measured is None:
            return Examined(None)
        place, limits = reading.joints, self._sunshine.limits_in(world)
        is_roomy = has_room(place, limits)
        forgiven_deg = 0.0 if world.may_recover else limits.encoder_error_deg
        outside = None if is_roomy else find_at(place, limits, forgiven_deg)
        sunlit = _in_the_beam(outside)
        if demand is None or not self._is_still or self._is_halting(hazards):
            return Examined(None, sunlit)
        now = Mounted(self._ordered or Motion(*place), reading, measured)
        if outside is None:
            return examine(demand, now, dt_s, limits, has_room=is_roomy)
        may_return = world.may_recover or bool(sunlit)
        examined = examine_return(demand, now, dt_s, limits, outside, may_recover=may_return)
        return examined._replace(hazards=(*sunlit, *examined.hazards))

    def _is_halting(self, hazards: Iterable[Hazard]) -> bool:
        """Whether the mount is halted anyhow, before its demand has been looked at."""
        policies = [self._policy[hazard.rule] for hazard in hazards]
        return any(each.action is Action.HALT and each.after_s == 0.0 for each in policies)

    # -- what follows from it -------------------------------------------------------------------

    def _verdict(self, motion: Motion | None, acting: tuple[Hazard, ...]) -> Verdict:
        if acting:
            return self._with_interventions(motion, acting)
        self._ordered = motion
        return Verdict(Halt() if motion is None else Move(motion))

    def _with_interventions(self, motion: Motion | None, acting: tuple[Hazard, ...]) -> Verdict:
        interventions = tuple(map(self._intervention, acting))
        worst = max(each.action for each in interventions)
        if worst is Action.LATCH and not self._was_stopped:
            self._latch = self._cause(acting)
        self._ordered = motion if worst < Action.HALT else None
        return Verdict(
            Halt() if self._ordered is None else Move(self._ordered),
            interventions,
            wants_stow=self._is_to_stow(hazard.rule for hazard in acting),
            latch=self._latch,
            must_cut_power=any(hazard.rule is Rule.SLIPPED for hazard in acting),
            way_out=self._way_out(acting),
        )

    def _way_out(self, acting: tuple[Hazard, ...]) -> Joints | None:
        reading = self._belief.reading
        if reading is None or not any(each.rule is Rule.SUN_IN_BEAM for each in acting):
            return None
        return self._sunshine.way_out(reading.joints)

    def _cause(self, acting: tuple[Hazard, ...]) -> str:
        latching = (each for each in acting if self._policy[each.rule].action is Action.LATCH)
        return next(latching).finding

    def _intervention(self, hazard: Hazard) -> Intervention:
        action, until = self._policy[hazard.rule].action, self._policy[hazard.rule].until
        sentence = f"{hazard.finding} ({hazard.rule.value}): {_DONE[action]} {until}"
        return Intervention(hazard.rule, action, sentence)


def _in_the_beam(outside: Hazard | None) -> tuple[Hazard, ...]:
    """The Sun is what moves: a mount in its circle may leave without anybody's leave."""
    if outside is None or outside.rule is not Rule.SUN:
        return ()
    return (Hazard(Rule.SUN_IN_BEAM, f"the beam is {outside.finding}"),)


_DONE = {
    Action.SLOW: "slowed down",
    Action.STOW: "going to stow",
    Action.HALT: "halted",
    Action.LATCH: "stopped for good",
}
