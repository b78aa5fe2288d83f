"""When the motors lose their power after a stop."""

from math import inf, nextafter

from tests.safety.bench_mount import LIMITS
from trunnion.mount.joints import Reading
from trunnion.safety.power import PowerJudge
from trunnion.safety.rest import BRAKING_MARGIN, REACTION_S
from trunnion.safety.stillness import STILL_S

STOP_S = 812.6
LONGEST_S = REACTION_S + BRAKING_MARGIN * max(
    LIMITS.mount.first.rate_deg_s / LIMITS.mount.first.acceleration_deg_s2,
    LIMITS.mount.second.rate_deg_s / LIMITS.mount.second.acceleration_deg_s2,
)


def cut_after_s(rate_deg_s: float, seen_for_s: float = 99.0) -> float:
    """How long after the stop the power goes, of a mount that moves on like this."""
    judge = PowerJudge(LIMITS)
    reading = None
    for step in range(400):
        since_s = 0.05 * step
        if since_s < seen_for_s:
            reading = Reading(STOP_S + since_s - 0.013, 201.7, 41.3 + rate_deg_s * since_s)
        if judge.must_cut(STOP_S + since_s, reading, is_stopped=True):
            return since_s
    raise AssertionError("expected a power cut, got none")


def test_a_mount_at_rest_loses_it_as_soon_as_that_is_known() -> None:
    assert STILL_S <= cut_after_s(0.0) < STILL_S + 0.1


def test_a_mount_that_moves_on_loses_it_when_it_should_have_come_to_rest() -> None:
    assert LONGEST_S < cut_after_s(3.1) < LONGEST_S + 0.1


def test_a_mount_that_nothing_is_heard_of_loses_it_then_too() -> None:
    assert LONGEST_S < cut_after_s(0.0, seen_for_s=0.1) < LONGEST_S + 0.1
    assert LONGEST_S < cut_after_s(0.0, seen_for_s=0.0) < LONGEST_S + 0.1


def test_without_a_stop_it_stays_and_the_next_stop_is_counted_from_its_own_begin() -> None:
    judge = PowerJudge(LIMITS)
    assert not judge.must_cut(STOP_S, Reading(STOP_S, 201.7, 41.3), is_stopped=True)
    later_s = STOP_S + 2.0 * LONGEST_S
    reading = Reading(later_s, 201.7, 41.3)
    assert not judge.must_cut(later_s, reading, is_stopped=False)
    assert not judge.must_cut(later_s + 0.1, reading, is_stopped=True)
    assert not judge.must_cut(later_s + 0.1 + 0.9 * LONGEST_S, reading, is_stopped=True)
    assert judge.must_cut(later_s + 0.2 + LONGEST_S, reading, is_stopped=True)


def test_the_last_moment_is_its_own() -> None:
    judge = PowerJudge(LIMITS)
    assert not judge.must_cut(0.0, None, is_stopped=True)
    assert not judge.must_cut(LONGEST_S, None, is_stopped=True)
    assert judge.must_cut(nextafter(LONGEST_S, inf), None, is_stopped=True)
