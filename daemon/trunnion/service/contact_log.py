"""Which contact is on, how well it is being pointed, and how it ended."""

from typing import NamedTuple, Protocol

from trunnion.pilot.phase import Phase
from trunnion.service.records.values import Outcome
from trunnion.service.score import Score
from trunnion.service.turn import Turn
from trunnion.track.beam import Beam
from trunnion.track.path import Assignment


class Flown(NamedTuple):
    """One assignment as it was flown: the last phase, the score, how it ended."""

    assignment: Assignment
    begin_utc_s: float
    end_utc_s: float
    outcome: Outcome
    score: Score
    last_phase: Phase


class ContactListener(Protocol):
    """Somebody who wants to know of contacts; must neither block nor raise."""

    def contact_begins(self, utc_s: float, assignment: Assignment) -> None:
        """The first turn of an assignment."""
        ...

    def contact_ends(self, flown: Flown) -> None:
        """The assignment is over, or was taken away."""
        ...


class ContactLog:
    """Observes the turns; tells its listener of the contacts in them."""

    def __init__(self, beam: Beam, listener: ContactListener) -> None:
        self._beam = beam
        self._listener = listener
        self._on: Assignment | None = None
        self._begin_utc_s = 0.0
        self._score = Score(beam.half_width_deg, beam.tolerance_deg)
        self._last: Turn | None = None

    @property
    def score(self) -> Score | None:
        """How the contact that is on fares; None outside contacts."""
        return self._score if self._on is not None else None

    def note(self, turn: Turn) -> None:
        """Take in one turn."""
        on = contact_on(turn)
        if self._on is not None and not _is_same(self._on, on):
            self._end(turn.utc_s)
        if on is not None and self._on is None:
            self._begin(on, turn.utc_s)
        self._on = on
        if on is not None:
            self._count(turn)
        self._last = turn

    def close(self, utc_s: float) -> None:
        """Nothing more will come."""
        if self._on is not None:
            self._end(utc_s)
            self._on = None

    def _begin(self, on: Assignment, utc_s: float) -> None:
        self._begin_utc_s = utc_s
        self._score = Score(self._beam.half_width_deg, self._beam.tolerance_deg)
        self._last = None
        self._listener.contact_begins(utc_s, on)

    def _end(self, utc_s: float) -> None:
        ended = self._on
        if ended is None:
            return
        is_over = utc_s >= ended.end_s
        self._listener.contact_ends(
            Flown(
                ended,
                self._begin_utc_s,
                min(utc_s, ended.end_s),
                Outcome.DONE if is_over else Outcome.CUT_SHORT,
                self._score,
                self._last.decision.phase if self._last is not None else Phase.STARTING,
            )
        )
        self._on = None

    def _count(self, turn: Turn) -> None:
        dt_s = turn.mono_s - self._last.mono_s if self._last is not None else 0.0
        if turn.decision.error_deg is not None:
            self._score.add(turn.utc_s, turn.decision.error_deg, dt_s)
        before = _rules(self._last) if self._last is not None else frozenset()
        self._score.interventions += len(_rules(turn) - before)


def contact_on(turn: Turn) -> Assignment | None:
    """The assignment that is on in this turn, whatever the mount is doing."""
    assignment = turn.decision.assignment
    if assignment is None or not assignment.begin_s <= turn.utc_s < assignment.end_s:
        return None
    return assignment


def _is_same(one: Assignment, other: Assignment | None) -> bool:
    """Whether it is the same stretch of the same contact, planned anew or not."""
    return other is not None and one.contact == other.contact and abs(one.end_s - other.end_s) < 1.0


def _rules(turn: Turn) -> frozenset[object]:
    return frozenset(each.rule for each in turn.verdict.interventions)
