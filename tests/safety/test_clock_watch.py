"""UTC held against the monotonic clock."""

import pytest

from tests.safety.bench_mount import LIMITS
from trunnion.safety.clock_watch import ClockWatch

UTC_S = 1_796_083_217.25


@pytest.mark.parametrize("step_s", [-0.51, 0.51, 3600.0, float("nan")])
def test_a_step_is_found_in_the_turn_after_it_and_no_longer(step_s: float) -> None:
    watch = ClockWatch(LIMITS)
    assert list(watch.find(71.0, UTC_S)) == []
    assert len(list(watch.find(71.1, UTC_S + 0.1 + step_s))) == 1
    if step_s == step_s:
        assert list(watch.find(71.2, UTC_S + 0.2 + step_s)) == []


@pytest.mark.parametrize("step_s", [-0.5, 0.5])
def test_a_small_one_is_none(step_s: float) -> None:
    watch = ClockWatch(LIMITS)
    assert list(watch.find(71.0, UTC_S)) == []
    assert list(watch.find(73.0, UTC_S + 2.0 + step_s)) == []


def test_an_unknown_time_is_held_against_nothing() -> None:
    watch = ClockWatch(LIMITS)
    assert list(watch.find(71.0, UTC_S)) == []
    assert list(watch.find(71.1, None)) == []
    assert list(watch.find(71.2, UTC_S + 99.0)) == []


def test_the_finding_says_by_how_much_and_which_way() -> None:
    watch = ClockWatch(LIMITS)
    list(watch.find(71.0, UTC_S))
    (hazard,) = watch.find(71.5, UTC_S - 3.25 + 0.5)
    assert hazard.finding == "the clock was set by -3.2 s"
