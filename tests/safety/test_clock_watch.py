"""UTC against the monotonic clock."""

from math import nan

from tests.safety.bench_mount import LIMITS
from trunnion.safety.clock_watch import ClockWatch
from trunnion.safety.verdict import Rule

MONO_S, UTC_S = 913.4, 1.8e9 + 0.3


def rules_after(step_s: float, then_s: float | None = None) -> list[Rule]:
    watch = ClockWatch(LIMITS)
    assert not list(watch.find(MONO_S, UTC_S))
    utc_s = UTC_S + 0.7 + step_s if then_s is None else then_s
    return [hazard.rule for hazard in watch.find(MONO_S + 0.7, utc_s)]


def test_steps_are_seen_both_ways_and_steering_is_not() -> None:
    most_s = LIMITS.clock_max_step_s
    assert rules_after(1.1 * most_s) == [Rule.CLOCK_STEPPED]
    assert rules_after(-1.1 * most_s) == [Rule.CLOCK_STEPPED]
    assert rules_after(0.9 * most_s) == rules_after(-0.9 * most_s) == []


def test_a_clock_that_is_no_number_counts_as_stepped() -> None:
    assert rules_after(0.0, nan) == [Rule.CLOCK_STEPPED]


def test_an_unknown_clock_is_not_held_against_anything() -> None:
    watch = ClockWatch(LIMITS)
    assert not list(watch.find(MONO_S, None))
    assert not list(watch.find(MONO_S + 0.7, UTC_S))
