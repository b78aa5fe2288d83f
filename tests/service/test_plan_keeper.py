"""The plan in force: kept until a better one is there."""

from dataclasses import dataclass, field
from pathlib import Path

import pytest

from tests.service.stations import write_plan, write_station
from trunnion.mount.joints import Joints
from trunnion.service.briefing import Briefing, brief
from trunnion.service.briefing_order import BriefingOrder
from trunnion.service.clock import VirtualClock
from trunnion.service.plan_keeper import AGAIN_AFTER_S, PlanKeeper
from trunnion.service.planner import Outcome, PlannerDied
from trunnion.sky.instants import parse_utc

PLACE = Joints(41.3, 61.7)
GOOD = "{id: good, target: beacon, from: 2026-12-01T00:24:00Z, until: 2026-12-01T00:28:00Z}"
ON = "{id: on, target: beacon, from: 2026-12-01T00:01:00Z, until: 2026-12-01T00:09:00Z}"
ODD = "{id: odd, target: QUILON-1, from: 2026-12-01T00:50:00Z, until: 2026-12-01T00:51:00Z}"


@dataclass
class Desk:
    """A planner that works when the test says so, in the same process."""

    asked: list[BriefingOrder] = field(default_factory=list)
    waiting: Outcome[Briefing] | None = None
    is_busy: bool = False
    is_closed: bool = False

    def ask(self, order: BriefingOrder) -> None:
        self.asked.append(order)
        self.is_busy = True

    def work(self) -> None:
        try:
            self.waiting = Outcome(brief(self.asked[-1]), None)
        except Exception as error:  # noqa: BLE001 - as the child does
            self.waiting = Outcome(None, error)

    def collect(self) -> Outcome[Briefing] | None:
        outcome, self.waiting = self.waiting, None
        self.is_busy = self.is_busy and outcome is None
        return outcome

    def close(self) -> None:
        self.is_closed = True


@dataclass
class Rig:
    folder: Path
    desk: Desk = field(default_factory=Desk)
    told: list[str] = field(default_factory=list)

    def __post_init__(self) -> None:
        self.clock = VirtualClock(parse_utc("2026-12-01T00:03:17Z"))
        station = write_station(self.folder)
        self.keeper = PlanKeeper(station, None, self.clock, self.told.append, self.desk)

    def plan(self, *contacts: str) -> None:
        write_plan(self.folder, *contacts)
        self.keeper.plan_anew()
        self.keeper.see_to_it(PLACE)
        while self.desk.is_busy:
            self.desk.work()
            self.keeper.see_to_it(PLACE)


@pytest.fixture
def rig(tmp_path: Path) -> Rig:
    return Rig(tmp_path)


def test_before_the_first_plan_there_is_none_and_then_it_is_made_from_where_the_mount_stands(
    rig: Rig,
) -> None:
    assert rig.keeper.assignments is None
    rig.keeper.see_to_it(PLACE)
    assert rig.keeper.is_planning
    assert rig.keeper.assignments is None
    (order,) = rig.desk.asked
    assert (order.place, order.now_s) == (PLACE, parse_utc("2026-12-01T00:03:17Z"))


def test_after_a_start_the_contact_that_is_on_is_planned_first_and_then_the_rest(rig: Rig) -> None:
    write_plan(rig.folder, ON, GOOD, ODD)
    rig.keeper.see_to_it(PLACE)
    rig.desk.work()
    rig.keeper.see_to_it(PLACE)
    assert rig.keeper.assignments is not None
    assert [each.contact for each in rig.keeper.assignments] == ["on"]
    assert (rig.keeper.is_whole, rig.keeper.is_planning, rig.told) == (False, True, [])
    rig.desk.work()
    rig.keeper.see_to_it(PLACE)
    assert [each.contact for each in rig.keeper.assignments] == ["on", "good"]
    assert (rig.keeper.is_whole, rig.keeper.is_planning, len(rig.told)) == (True, False, 1)
    rig.keeper.plan_anew()
    rig.keeper.see_to_it(PLACE)
    assert rig.desk.asked[-1].begun_by_s is None


def test_where_nothing_is_on_the_mount_waits_for_the_whole_plan(rig: Rig) -> None:
    write_plan(rig.folder, GOOD)
    rig.keeper.see_to_it(PLACE)
    rig.desk.work()
    rig.keeper.see_to_it(PLACE)
    assert rig.keeper.assignments is None
    rig.desk.work()
    rig.keeper.see_to_it(PLACE)
    assert rig.keeper.assignments is not None
    assert [each.contact for each in rig.keeper.assignments] == ["good"]


def test_a_plan_is_asked_for_once(rig: Rig) -> None:
    for _ in range(3):
        rig.keeper.see_to_it(PLACE)
    assert len(rig.desk.asked) == 1


def test_a_plan_is_taken_up_when_it_is_made(rig: Rig) -> None:
    rig.plan(GOOD)
    assert rig.keeper.assignments is not None
    assert [each.contact for each in rig.keeper.assignments] == ["good"]
    assert (rig.told, rig.keeper.trouble, rig.keeper.is_planning) == ([], None, False)


def test_a_plan_that_cannot_be_read_does_not_replace_the_one_in_force(rig: Rig) -> None:
    rig.plan(GOOD)
    before = rig.keeper.assignments
    rig.plan("{id: bad, target: sun, form: 2026}")
    assert rig.keeper.assignments is before
    assert rig.keeper.trouble is not None
    assert "form" in rig.keeper.trouble
    assert rig.told == [rig.keeper.trouble]
    rig.plan(GOOD)
    assert rig.keeper.trouble is None


def test_a_contact_that_cannot_be_served_is_told_and_the_others_are_taken_up(rig: Rig) -> None:
    rig.plan(GOOD, ODD)
    assert rig.keeper.assignments is not None
    assert [each.contact for each in rig.keeper.assignments] == ["good"]
    (sentence,) = rig.told
    assert sentence.startswith("contact odd cannot be served: expected a known target")


def test_a_planner_that_died_is_asked_again_after_a_while_and_told_once_each(rig: Rig) -> None:
    rig.keeper.see_to_it(PLACE)
    rig.desk.waiting = Outcome(None, PlannerDied("expected an answer, got EOFError()"))
    for _ in range(3):
        rig.keeper.see_to_it(PLACE)
    assert (len(rig.desk.asked), len(rig.told)) == (1, 1)
    rig.clock.sleep(AGAIN_AFTER_S - 0.1)
    rig.keeper.see_to_it(PLACE)
    assert len(rig.desk.asked) == 1
    rig.clock.sleep(0.2)
    for _ in range(3):
        rig.keeper.see_to_it(PLACE)
    assert len(rig.desk.asked) == 2
    rig.plan(GOOD)
    assert rig.keeper.trouble is None
    rig.clock.sleep(10.0 * AGAIN_AFTER_S)
    asked = len(rig.desk.asked)
    rig.keeper.see_to_it(PLACE)
    assert len(rig.desk.asked) == asked


@pytest.mark.parametrize("step_s", [-3607.3, -0.9, 0.7, 86_411.9])
def test_a_clock_that_was_set_has_it_planned_anew_once(rig: Rig, step_s: float) -> None:
    rig.plan(GOOD)
    asked = len(rig.desk.asked)
    rig.clock.sleep(777.7)
    rig.clock.step_utc(0.3)
    rig.keeper.see_to_it(PLACE)
    assert len(rig.desk.asked) == asked
    rig.clock.step_utc(step_s)
    for _ in range(3):
        rig.keeper.see_to_it(PLACE)
    assert len(rig.desk.asked) == asked + 1
    assert rig.desk.asked[-1].now_s == rig.clock.utc_s()


def test_a_plan_that_cannot_be_read_is_not_read_again_and_again(rig: Rig) -> None:
    rig.plan("{id: bad, target: sun, form: 2026}")
    asked = len(rig.desk.asked)
    rig.clock.sleep(10.0 * AGAIN_AFTER_S)
    rig.keeper.see_to_it(PLACE)
    assert len(rig.desk.asked) == asked


def test_closing_drops_what_is_being_made(rig: Rig) -> None:
    rig.keeper.close()
    assert rig.desk.is_closed
