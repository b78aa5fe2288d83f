"""Turns as they come out of the control turn, made by hand."""

from dataclasses import dataclass, field

from tests.pilot.flight import START_UTC_S, contact
from trunnion.mount.joints import Motion, Reading
from trunnion.pilot.decision import Decision
from trunnion.pilot.phase import Phase
from trunnion.safety.verdict import Action, Halt, Intervention, Move, Rule, Verdict
from trunnion.safety.world import World
from trunnion.service.contact_log import Flown
from trunnion.service.turn import Turn
from trunnion.track.path import Assignment

ASSIGNMENT = contact("evening", 10.0, 60.0, Motion(171.3, 41.9, -0.37, 0.29))
CALM = World(emergency=None, is_link_up=True, lateness_s=0.0)
LATE = Intervention(Rule.TURN_LATE, Action.HALT, "the control turn came late")


def turn_at(
    since_s: float,
    error_deg: float | None = None,
    assignment: Assignment | None = ASSIGNMENT,
    phase: Phase = Phase.TRACKING,
    interventions: tuple[Intervention, ...] = (),
    trouble: str | None = None,
) -> Turn:
    """A turn so many seconds after the start; it halts where there are interventions."""
    utc_s, mono_s = START_UTC_S + since_s, 500.0 + since_s
    motion = Motion(171.3, 41.9, 0.1, -0.2)
    look = assignment.path.look(utc_s) if assignment and error_deg is not None else None
    return Turn(
        utc_s,
        mono_s,
        Reading(mono_s - 0.031, 171.2, 41.8),
        CALM,
        Decision(phase, motion, assignment, look, error_deg, trouble=trouble),
        Verdict(Halt() if interventions else Move(motion), interventions),
    )


@dataclass
class Listener:
    """Keeps what it is told of contacts."""

    begun: list[tuple[float, str]] = field(default_factory=list)
    ended: list[Flown] = field(default_factory=list)

    def contact_begins(self, utc_s: float, assignment: Assignment) -> None:
        self.begun.append((utc_s - START_UTC_S, assignment.contact))

    def contact_ends(self, flown: Flown) -> None:
        self.ended.append(flown)
