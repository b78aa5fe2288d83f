"""Which contact is on, from turn to turn, and how it ended."""

from dataclasses import replace

import pytest

from tests.pilot.flight import START_UTC_S, contact
from tests.service.turns import ASSIGNMENT, LATE, Listener, turn_at
from trunnion.mount.joints import Motion
from trunnion.pilot.phase import Phase
from trunnion.service.contact_log import ContactLog
from trunnion.service.records.values import Outcome
from trunnion.track.beam import Beam

BEAM = Beam(half_power_deg=3.1, tolerance_deg=0.27)


def test_a_contact_begins_with_its_first_turn_and_ends_with_its_time() -> None:
    listener = Listener()
    log = ContactLog(BEAM, listener)
    for since_s in (9.9, 10.3, 40.1, 69.9, 70.1):
        log.note(turn_at(since_s, 0.1))
    ((begun_s, name),) = listener.begun
    assert begun_s == pytest.approx(10.3)
    assert name == "evening"
    (flown,) = listener.ended
    assert flown.outcome is Outcome.DONE
    assert flown.end_utc_s == ASSIGNMENT.end_s
    assert flown.last_phase is Phase.TRACKING
    assert flown.score.seconds == pytest.approx(59.6)


def test_being_prepared_for_is_not_being_on() -> None:
    listener = Listener()
    log = ContactLog(BEAM, listener)
    log.note(turn_at(3.0, None, phase=Phase.SLEWING))
    assert (listener.begun, log.score) == ([], None)


def test_errors_are_scored_with_the_time_from_turn_to_turn() -> None:
    log = ContactLog(BEAM, Listener())
    for since_s, error_deg in ((11.0, 0.2), (11.1, 0.2), (11.3, 1.9)):
        log.note(turn_at(since_s, error_deg))
    assert log.score is not None
    assert log.score.worst_error_deg == 1.9
    assert log.score.outside_beam_s == pytest.approx(0.2)
    assert log.score.outside_tolerance_s == pytest.approx(0.2)


def test_a_contact_that_is_planned_away_is_cut_short() -> None:
    listener = Listener()
    log = ContactLog(BEAM, listener)
    log.note(turn_at(11.0, 0.1))
    log.note(turn_at(12.0, None, assignment=None, phase=Phase.STOWING))
    assert [each.outcome for each in listener.ended] == [Outcome.CUT_SHORT]
    log.close(START_UTC_S + 13.0)
    assert len(listener.ended) == 1


def test_a_contact_that_is_planned_anew_goes_on() -> None:
    listener = Listener()
    log = ContactLog(BEAM, listener)
    log.note(turn_at(11.0, 0.1))
    anew = replace(ASSIGNMENT, begin_s=START_UTC_S + 11.5)
    log.note(turn_at(12.0, 0.1, assignment=anew))
    assert (len(listener.begun), listener.ended) == (1, [])


def test_one_contact_follows_another_without_a_pause() -> None:
    listener = Listener()
    log = ContactLog(BEAM, listener)
    other = contact("night", 70.0, 30.0, Motion(41.3, 33.1, 0.2, 0.1))
    log.note(turn_at(69.9, 0.1))
    log.note(turn_at(70.2, 0.1, assignment=other))
    log.close(START_UTC_S + 71.3)
    assert [name for _, name in listener.begun] == ["evening", "night"]
    assert [each.outcome for each in listener.ended] == [Outcome.DONE, Outcome.CUT_SHORT]


def test_an_intervention_counts_once_while_it_lasts() -> None:
    log = ContactLog(BEAM, Listener())
    for since_s, interventions in ((11.0, ()), (11.1, (LATE,)), (11.2, (LATE,)), (11.3, ())):
        log.note(turn_at(since_s, 0.1, interventions=interventions))
    log.note(turn_at(11.4, 0.1, interventions=(LATE,)))
    assert log.score is not None
    assert log.score.interventions == 2
