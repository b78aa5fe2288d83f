"""Planning in a child process."""

import time
from collections.abc import Callable

import pytest

from tests.service.planner_work import dawdle, die, double, refuse
from trunnion.service.planner import Outcome, Planner, PlannerDied


def outcome_of(planner: Planner[float, float]) -> Outcome[float]:
    """Wait for a real child process; no virtual clock reaches it."""
    until_s = time.monotonic() + 60.0
    while time.monotonic() < until_s:
        if outcome := planner.collect():
            return outcome
        time.sleep(0.01)
    raise AssertionError("expected an outcome within 60 s")


def test_the_child_answers() -> None:
    planner = Planner(double)
    planner.ask(20.7)
    assert outcome_of(planner) == Outcome(41.4, None)
    assert planner.collect() is None
    assert not planner.is_busy


@pytest.mark.parametrize(("work", "error"), [(refuse, ValueError), (die, PlannerDied)])
def test_what_went_wrong_in_the_child_is_told(
    work: Callable[[float], float], error: type[Exception]
) -> None:
    planner = Planner(work)
    planner.ask(7.3)
    outcome = outcome_of(planner)
    assert outcome.result is None
    assert isinstance(outcome.error, error)


def test_the_newest_order_counts() -> None:
    planner = Planner(dawdle)
    planner.ask(50.3)
    planner.ask(0.13)
    assert outcome_of(planner) == Outcome(0.13, None)


def test_closing_ends_the_child() -> None:
    planner = Planner(dawdle)
    planner.ask(50.3)
    planner.close()
    assert not planner.is_busy
    assert planner.collect() is None
