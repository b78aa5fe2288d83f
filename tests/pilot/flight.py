"""A mount that does exactly what it is told, and a pilot flown on it turn by turn."""

from collections.abc import Sequence
from dataclasses import dataclass, field

from trunnion.mount.clearance import Clearance
from trunnion.mount.hinges import Hinges
from trunnion.mount.joints import Joints, Motion, Reading
from trunnion.mount.mount import JointLimits, Mount
from trunnion.pilot.decision import Decision, Situation
from trunnion.pilot.departure import Facts, Timing
from trunnion.pilot.phase import Phase, Wish
from trunnion.pilot.pilot import Pilot
from trunnion.sky.errors import NoPosition
from trunnion.sky.fixed import FixedDirection
from trunnion.sky.look import Look
from trunnion.track.path import Assignment

START_UTC_S = 1_796_083_217.3
"""An instant like any other, so that no zero hides a mistake."""

MOUNT = Mount(
    Hinges.azimuth_elevation(),
    JointLimits(-271.0, 268.0, 6.3, 2.9),
    JointLimits(1.5, 91.0, 4.7, 2.1),
    Joints(12.7, 88.3),
)
CLEARANCE = Clearance(3.1, None)
START_PLACE = Joints(-133.9, 41.7)
FACTS = Facts(MOUNT, CLEARANCE, tolerance_deg=0.23, timing=Timing(lead_s=17.0, dwell_s=41.0))


@dataclass(frozen=True)
class LinearPath:
    """Joints that move evenly, from a given place at a given time."""

    epoch_s: float
    start: Motion
    lost_after_s: float = float("inf")

    def at(self, utc_s: float) -> Motion:
        since_s = utc_s - self.epoch_s
        if since_s > self.lost_after_s:
            raise NoPosition("expected an orbit, got a decayed one")
        first_deg, second_deg, first_rate, second_rate = self.start
        return Motion(
            first_deg + first_rate * since_s,
            second_deg + second_rate * since_s,
            first_rate,
            second_rate,
        )

    def look(self, utc_s: float) -> Look:
        first_deg, second_deg, first_rate, second_rate = self.at(utc_s)
        return Look(first_deg % 360.0, second_deg, None, first_rate, second_rate, None)


def contact(
    name: str, begin_in_s: float, length_s: float, start: Motion, lost_after_s: float = float("inf")
) -> Assignment:
    """A contact that begins so many seconds after the start of the flight."""
    begin_s = START_UTC_S + begin_in_s
    return Assignment(
        name,
        FixedDirection(start.first_deg, start.second_deg),
        begin_s,
        begin_s + length_s,
        LinearPath(begin_s, start, lost_after_s),
        priority=1,
    )


@dataclass
class Flight:
    """A pilot and its perfectly obedient mount, from `START_UTC_S` on."""

    assignments: Sequence[Assignment] = ()
    ordered: Motion | None = None
    place: Joints = START_PLACE
    pilot: Pilot = field(default_factory=lambda: Pilot(FACTS))
    utc_s: float = START_UTC_S
    wish: Wish = Wish.FOLLOW_PLAN
    must_stow: bool = False
    is_stopped: bool = False
    decisions: list[tuple[float, Decision]] = field(default_factory=list)

    def turn(self, dt_s: float = 0.1) -> Decision:
        """One turn, `dt_s` after the one before."""
        self.utc_s += dt_s
        mono_s = self.utc_s - 1_000_000.0
        decision = self.pilot.decide(
            Situation(
                self.utc_s,
                mono_s,
                Reading(mono_s, *self.place),
                self.ordered,
                self.assignments,
                self.wish,
                self.must_stow,
                self.is_stopped,
            )
        )
        self.ordered = decision.demand
        if decision.demand is not None:
            self.place = decision.demand.joints
        self.decisions.append((self.utc_s - START_UTC_S, decision))
        return decision

    def fly(self, seconds: float, dt_s: float = 0.1) -> Decision:
        """Turns for so many seconds; the last decision."""
        until_s = self.utc_s + seconds
        decision = self.turn(dt_s)
        while self.utc_s < until_s:
            decision = self.turn(dt_s)
        return decision

    def fly_until(self, phase: Phase, limit_s: float = 600.0) -> Decision:
        """Turns until the pilot says this phase; fails after `limit_s`."""
        until_s = self.utc_s + limit_s
        while self.utc_s < until_s:
            decision = self.turn()
            if decision.phase is phase:
                return decision
        raise AssertionError(f"expected {phase} within {limit_s} s, last got {decision.phase}")
