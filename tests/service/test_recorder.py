"""What of the turns goes on record."""

from collections.abc import Mapping
from dataclasses import dataclass, field

from tests.pilot.flight import START_UTC_S
from tests.service.turns import ASSIGNMENT, LATE, turn_at
from trunnion.mount.joints import Motion
from trunnion.pilot.phase import Phase
from trunnion.service.contact_log import Flown
from trunnion.service.recorder import Recorder
from trunnion.service.records.values import ContactStart, EventKind, Outcome, Sample
from trunnion.service.score import Score


@dataclass
class Book:
    """Takes the place of the records, and keeps everything in order."""

    entries: list[object] = field(default_factory=list)

    def begin_contact(self, start: ContactStart) -> None:
        self.entries.append(start)

    def sample(self, sample: Sample) -> None:
        self.entries.append(sample)

    def end_contact(self, utc_s: float, outcome: Outcome, summary: Mapping[str, object]) -> None:
        self.entries.append((utc_s, outcome, summary))

    def event(self, utc_s: float, kind: EventKind, sentence: str) -> None:
        self.entries.append((kind, sentence))


def test_a_turn_of_a_contact_leaves_a_sample_with_demand_order_reading_and_rules() -> None:
    book = Book()
    recorder = Recorder(book)
    recorder.note(turn_at(11.0, 0.1))
    recorder.note(turn_at(11.1, 0.1, interventions=(LATE,)))
    samples = [each for each in book.entries if isinstance(each, Sample)]
    assert [each.order for each in samples] == [Motion(171.3, 41.9, 0.1, -0.2), None]
    assert [each.rules for each in samples] == [(), ("TURN_LATE",)]
    assert samples[0].reading is not None
    assert samples[0].look is not None
    assert samples[0].demand == Motion(171.3, 41.9, 0.1, -0.2)


def test_outside_contacts_there_are_no_samples() -> None:
    book = Book()
    Recorder(book).note(turn_at(3.0, phase=Phase.SLEWING))
    assert not any(isinstance(each, Sample) for each in book.entries)


def test_a_change_of_phase_a_trouble_and_an_intervention_are_told_once() -> None:
    book = Book()
    recorder = Recorder(book)
    recorder.note(turn_at(1.0, phase=Phase.SLEWING))
    recorder.note(turn_at(1.1, phase=Phase.SLEWING, trouble="no clear way"))
    recorder.note(turn_at(1.2, phase=Phase.SLEWING, trouble="no clear way"))
    recorder.note(turn_at(1.3, phase=Phase.WAITING, interventions=(LATE,)))
    recorder.note(turn_at(1.4, phase=Phase.WAITING, interventions=(LATE,)))
    recorder.note(turn_at(1.5, phase=Phase.WAITING))
    recorder.note(turn_at(1.6, phase=Phase.WAITING, interventions=(LATE,)))
    told = f"waiting evening, asked for 171.3°/41.9°: {LATE.sentence}"
    assert book.entries == [
        (EventKind.STATE, "slewing"),
        (EventKind.TROUBLE, "no clear way"),
        (EventKind.STATE, "waiting"),
        (EventKind.INTERVENTION, told),
        (EventKind.INTERVENTION, f"over after 0.2 s: {told}"),
        (EventKind.INTERVENTION, told),
    ]


def test_a_contact_is_put_on_record_from_its_plan_to_its_summary() -> None:
    book = Book()
    recorder = Recorder(book)
    recorder.contact_begins(START_UTC_S + 11.0, ASSIGNMENT)
    score = Score(1.6, 0.31)
    score.add(START_UTC_S + 12.0, 0.25, 0.5)
    recorder.contact_ends(
        Flown(
            ASSIGNMENT, START_UTC_S + 11.0, START_UTC_S + 70.0, Outcome.DONE, score, Phase.TRACKING
        )
    )
    start, end = book.entries
    assert isinstance(start, ContactStart)
    assert (start.contact, start.target) == ("evening", "fixed:171.3,41.9")
    assert (start.planned_begin_s, start.planned_end_s) == (ASSIGNMENT.begin_s, ASSIGNMENT.end_s)
    assert isinstance(end, tuple)
    assert end[1] is Outcome.DONE
    assert end[2] == {
        "seconds": 0.5,
        "worst_error_deg": 0.25,
        "rms_error_deg": 0.25,
        "outside_beam_s": 0.0,
        "outside_tolerance_s": 0.0,
        "interventions": 0,
    }
