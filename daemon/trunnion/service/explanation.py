"""An intervention explained whole: what was asked, which rule, what was done, until when."""

from trunnion.mount.joints import Motion
from trunnion.safety.verdict import Intervention
from trunnion.service.turn import Turn


def explained(turn: Turn, intervention: Intervention) -> str:
    """The sentence of log, records and status.

    The gate's own sentence tells rule, deed and end; what was asked of the mount stands before it.
    """
    decision = turn.decision
    contact = f" {decision.assignment.contact}" if decision.assignment is not None else ""
    doing = f"{decision.phase.value}{contact}"
    if intervention.sentence.startswith("asked for"):
        return f"{doing}, {intervention.sentence}"
    return f"{doing}, asked for {_place(decision.demand)}: {intervention.sentence}"


def explanations(turn: Turn) -> list[str]:
    """All of a turn."""
    return [explained(turn, each) for each in turn.verdict.interventions]


def _place(demand: Motion | None) -> str:
    return "rest" if demand is None else f"{demand.first_deg:.1f}°/{demand.second_deg:.1f}°"
