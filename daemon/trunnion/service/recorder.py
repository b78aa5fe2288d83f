"""What of the turns goes on record: samples, contacts, and every change worth a sentence."""

import logging
from collections.abc import Mapping
from typing import NamedTuple, Protocol

from trunnion.pilot.phase import Phase
from trunnion.safety.verdict import Move, Rule
from trunnion.service.contact_log import Flown, contact_on
from trunnion.service.explanation import explained
from trunnion.service.records.values import ContactStart, EventKind, Outcome, Sample
from trunnion.service.score import Score
from trunnion.service.turn import Turn
from trunnion.track.path import Assignment

_log = logging.getLogger(__name__)


class Book(Protocol):
    """The part of the records' writer that is needed here; no method blocks or raises."""

    def begin_contact(self, start: ContactStart) -> None:
        """A contact begins."""
        ...

    def sample(self, sample: Sample) -> None:
        """One control turn of the contact under way."""
        ...

    def end_contact(self, utc_s: float, outcome: Outcome, summary: Mapping[str, object]) -> None:
        """The contact under way ends."""
        ...

    def event(self, utc_s: float, kind: EventKind, sentence: str) -> None:
        """Something happened that is worth a sentence."""
        ...


class _Begun(NamedTuple):
    """An intervention, and when it began."""

    mono_s: float
    sentence: str


class Recorder:
    """Observes the turns, and listens to the contacts in them."""

    def __init__(self, records: Book) -> None:
        self._records = records
        self._phase: Phase | None = None
        self._trouble: str | None = None
        self._in_force: dict[Rule, _Begun] = {}

    def note(self, turn: Turn) -> None:
        """Take in one turn."""
        self._note_phase(turn)
        self._note_interventions(turn)
        if contact_on(turn) is not None:
            self._records.sample(_sample(turn))

    def contact_begins(self, utc_s: float, assignment: Assignment) -> None:
        """The first turn of an assignment."""
        _log.info("contact %s begins: %s", assignment.contact, assignment.target.name)
        self._records.begin_contact(
            ContactStart(
                utc_s,
                assignment.contact,
                assignment.target.name,
                assignment.begin_s,
                assignment.end_s,
            )
        )

    def contact_ends(self, flown: Flown) -> None:
        """The assignment is over, or was taken away."""
        summary = summary_of(flown.score)
        _log.info(
            "contact %s ends: %s, worst error %.3f°",
            flown.assignment.contact,
            flown.outcome.value,
            flown.score.worst_error_deg,
        )
        self._records.end_contact(flown.end_utc_s, flown.outcome, summary)

    def _note_phase(self, turn: Turn) -> None:
        phase, trouble = turn.decision.phase, turn.decision.trouble
        if phase is not self._phase:
            _log.info("%s", phase.value)
            self._records.event(turn.utc_s, EventKind.STATE, phase.value)
        if trouble is not None and trouble != self._trouble:
            _log.warning("%s", trouble)
            self._records.event(turn.utc_s, EventKind.TROUBLE, trouble)
        self._phase, self._trouble = phase, trouble

    def _note_interventions(self, turn: Turn) -> None:
        acting = {each.rule: each for each in turn.verdict.interventions}
        for rule in (each for each in acting if each not in self._in_force):
            begun = self._in_force[rule] = _Begun(turn.mono_s, explained(turn, acting[rule]))
            _log.warning("%s", begun.sentence)
            self._records.event(turn.utc_s, EventKind.INTERVENTION, begun.sentence)
        for rule in [each for each in self._in_force if each not in acting]:
            begun = self._in_force.pop(rule)
            over = f"over after {turn.mono_s - begun.mono_s:.1f} s: {begun.sentence}"
            _log.info("%s", over)
            self._records.event(turn.utc_s, EventKind.INTERVENTION, over)


def summary_of(score: Score) -> dict[str, object]:
    """A score as the records, `rehearse` and `status` tell it."""
    return {
        "seconds": round(score.seconds, 3),
        "worst_error_deg": score.worst_error_deg if score.seconds else None,
        "rms_error_deg": score.rms_error_deg,
        "outside_beam_s": round(score.outside_beam_s, 3),
        "outside_tolerance_s": round(score.outside_tolerance_s, 3),
        "interventions": score.interventions,
    }


def _sample(turn: Turn) -> Sample:
    order = turn.verdict.order
    return Sample(
        turn.utc_s,
        turn.mono_s,
        turn.decision.phase.value,
        turn.decision.look,
        turn.decision.error_deg,
        turn.decision.demand,
        order.motion if isinstance(order, Move) else None,
        turn.reading,
        tuple(each.rule.name for each in turn.verdict.interventions),
    )
