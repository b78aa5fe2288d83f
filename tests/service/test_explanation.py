"""Every intervention tells what was asked, which rule, what was done, until when; everywhere."""

import logging
from pathlib import Path
from typing import NamedTuple

import pytest

from tests.pilot.flight import START_UTC_S
from tests.safety.bench_mount import CALM, Bench
from tests.service.stations import station_with
from tests.service.test_recorder import Book
from tests.service.test_status import health_at
from tests.service.turns import ASSIGNMENT
from trunnion.mount.joints import Motion, Reading
from trunnion.pilot.decision import Decision
from trunnion.pilot.phase import Phase
from trunnion.safety.policy import POLICY
from trunnion.safety.verdict import Rule
from trunnion.safety.world import World
from trunnion.service.explanation import explained
from trunnion.service.recorder import Recorder
from trunnion.service.records.values import EventKind
from trunnion.service.status import describe
from trunnion.service.turn import Turn

HIGHER = Motion(201.8, 41.4, 0.0, 0.0)
BELOW_THE_FLOOR = Motion(201.7, 4.2, 0.0, 0.0)


class Story(NamedTuple):
    """What is asked in which surroundings, the rule that acts, and what must be told."""

    rule: Rule
    demand: Motion | None
    world: World
    asked: str
    done: str


STORIES = (
    Story(
        Rule.TURN_LATE,
        HIGHER,
        CALM._replace(lateness_s=0.83),
        "tracking evening, asked for 201.8°/41.4°: the control turn came 0.83 s late",
        "halted",
    ),
    Story(
        Rule.FLOOR,
        BELOW_THE_FLOOR,
        CALM,
        "tracking evening, asked for 201.7°/4.2°: ",
        "halted",
    ),
    Story(
        Rule.LINK_DOWN,
        None,
        CALM._replace(is_link_up=False),
        "tracking evening, asked for rest: the mount does not answer as it should",
        "halted",
    ),
)


def turn_of(story: Story) -> Turn:
    """The turn in which the real gate acts."""
    bench = Bench().settle()
    for _ in range(400):
        verdict = bench.turn(story.demand, story.world)
        if any(each.rule is story.rule for each in verdict.interventions):
            reading = Reading(bench.mono_s - 0.031, *bench.place)
            decision = Decision(Phase.TRACKING, story.demand, ASSIGNMENT)
            return Turn(START_UTC_S, bench.mono_s, reading, story.world, decision, verdict)
    raise AssertionError(f"{story.rule} never acted")


def tells_all(sentence: str, story: Story) -> bool:
    """Whether all four parts are there."""
    end = f"({story.rule.value}): {story.done} {POLICY[story.rule].until}"
    return sentence.startswith(story.asked) and sentence.endswith(end)


@pytest.mark.parametrize("story", STORIES, ids=lambda story: story.rule.value)
def test_log_records_and_status_tell_all_four_parts(
    story: Story, tmp_path: Path, caplog: pytest.LogCaptureFixture
) -> None:
    turn, book = turn_of(story), Book()
    with caplog.at_level(logging.WARNING):
        Recorder(book).note(turn)
    acting = [each for each in turn.verdict.interventions if each.rule is story.rule]
    assert tells_all(explained(turn, acting[0]), story), explained(turn, acting[0])
    assert any(tells_all(message, story) for message in caplog.messages)
    on_record = [each for each in book.entries if isinstance(each, tuple)]
    assert any(
        kind is EventKind.INTERVENTION and tells_all(sentence, story)
        for kind, sentence in on_record
    )
    status = describe(station_with(tmp_path), turn, None, health_at(turn.utc_s))
    told = status["interventions"]
    assert isinstance(told, list)
    assert any(tells_all(sentence, story) for sentence in told)


def test_its_end_goes_on_record_with_how_long_it_lasted() -> None:
    late = turn_of(STORIES[0])
    book = Book()
    recorder = Recorder(book)
    recorder.note(late)
    calm = late._replace(mono_s=late.mono_s + 3.75, utc_s=late.utc_s - 900.0)
    recorder.note(calm._replace(verdict=late.verdict._replace(interventions=())))
    last = book.entries[-1]
    assert isinstance(last, tuple)
    assert last[0] is EventKind.INTERVENTION
    assert last[1].startswith("over after 3.8 s: tracking evening, asked for 201.8°/41.4°")
