"""A mount that is off its path has the rest planned anew; one that follows its path has not."""

import pytest

from tests.pilot.flight import START_UTC_S
from tests.service.turns import ASSIGNMENT, turn_at
from trunnion.mount.joints import Reading
from trunnion.pilot.phase import Phase
from trunnion.service.departure_watch import EVERY_S, PATIENCE_S, DepartureWatch
from trunnion.service.turn import Turn

BEGIN_S = 12.0
AGE_S = 0.031


def off_by(since_s: float, first_deg: float, phase: Phase = Phase.ACQUIRING) -> Turn:
    """A turn whose first joint is so far from where the path had it when it was read."""
    turn = turn_at(since_s, error_deg=first_deg, phase=phase)
    planned = ASSIGNMENT.path.at(START_UTC_S + since_s - AGE_S)
    reading = Reading(turn.mono_s - AGE_S, planned.first_deg + first_deg, planned.second_deg)
    return turn._replace(reading=reading)


def due_at(watch: DepartureWatch, turns: list[Turn]) -> list[float]:
    """Seconds since the first turn at which the rest was to be planned anew."""
    found = []
    for turn in turns:
        watch.note(turn)
        if watch.is_due(turn.mono_s):
            found.append(turn.mono_s - turns[0].mono_s)
    return found


def seconds(length_s: float) -> list[float]:
    return [BEGIN_S + 0.1 * tenth for tenth in range(round(10 * length_s) + 1)]


def test_a_mount_off_its_path_is_given_some_time_and_then_planned_for() -> None:
    turns = [off_by(since_s, 37.0) for since_s in seconds(EVERY_S + 2 * PATIENCE_S)]
    due_s = due_at(DepartureWatch(0.3), turns)
    assert due_s == pytest.approx([PATIENCE_S, PATIENCE_S + EVERY_S], abs=0.11)


def test_a_whole_turn_away_is_far_away() -> None:
    turns = [off_by(since_s, 360.0) for since_s in seconds(PATIENCE_S + 1.0)]
    assert len(due_at(DepartureWatch(0.3), turns)) == 1


def test_a_target_that_the_path_itself_misses_is_no_departure() -> None:
    turns = [off_by(since_s, 0.2) for since_s in seconds(30.0)]
    assert all(turn.decision.phase is Phase.ACQUIRING for turn in turns)
    assert due_at(DepartureWatch(0.3), turns) == []


@pytest.mark.parametrize("phase", [Phase.TRACKING, Phase.STOWING, Phase.HOLDING, Phase.SLEWING])
def test_outside_the_chase_of_a_contact_nothing_is_planned_anew(phase: Phase) -> None:
    turns = [off_by(since_s, 37.0, phase) for since_s in seconds(30.0)]
    assert due_at(DepartureWatch(0.3), turns) == []


def test_coming_back_to_the_path_in_between_starts_the_patience_anew() -> None:
    turns = [off_by(s, 37.0 if s < BEGIN_S + 2.0 or s > BEGIN_S + 2.5 else 0.0) for s in seconds(5)]
    assert due_at(DepartureWatch(0.3), turns) == []
