"""The beat of the control turn."""

import pytest
from hypothesis import given
from hypothesis import strategies as st

from trunnion.service.cadence import Beat, Cadence
from trunnion.service.clock import VirtualClock

PERIOD_S = 0.125  # a power of two, so that deadlines are exact in binary


def started(monotonic_s: float = 3.5) -> tuple[VirtualClock, Cadence]:
    clock = VirtualClock(1_893_456_123.75, monotonic_s)
    return clock, Cadence(clock, PERIOD_S)


def test_beats_on_absolute_deadlines() -> None:
    clock, cadence = started()
    times_s = []
    for _ in range(4):
        assert cadence.wait().lateness_s == 0.0
        times_s.append(clock.monotonic_s())
        clock.sleep(0.03)
    assert times_s == [3.5, 3.625, 3.75, 3.875]


def test_a_turn_that_overruns_is_followed_at_once_and_then_in_step_again() -> None:
    clock, cadence = started()
    cadence.wait()
    clock.sleep(1.5 * PERIOD_S)
    assert cadence.wait() == Beat(1, 0.5 * PERIOD_S, 0)
    assert cadence.wait() == Beat(2, 0.0, 0)
    assert clock.monotonic_s() == 3.5 + 2 * PERIOD_S


def test_a_stall_shows_whole_and_is_followed_by_one_beat() -> None:
    clock, cadence = started()
    cadence.wait()
    clock.sleep(7.5 * PERIOD_S)
    assert cadence.wait() == Beat(7, 6.5 * PERIOD_S, 6)
    assert cadence.wait() == Beat(8, 0.0, 0)
    assert cadence.missed_in_all == 6


def test_a_step_of_utc_changes_nothing() -> None:
    clock, cadence = started()
    cadence.wait()
    clock.step_utc(-3600.0)
    assert cadence.wait() == Beat(1, 0.0, 0)


@pytest.mark.parametrize("period_s", [0.0, -0.1, float("nan")])
def test_a_period_that_is_none_is_refused(period_s: float) -> None:
    with pytest.raises(ValueError, match="expected a period above 0 s"):
        Cadence(VirtualClock(0.0), period_s)


@given(
    period_s=st.floats(0.01, 1.0),
    start_s=st.floats(0.0, 1e7),
    turns_s=st.lists(st.floats(0.0, 5.0), min_size=1, max_size=50),
)
def test_never_two_beats_for_one_deadline_and_every_deadline_counted(
    period_s: float, start_s: float, turns_s: list[float]
) -> None:
    clock = VirtualClock(0.0, start_s)
    cadence = Cadence(clock, period_s)
    numbers, missed = [], 0
    for turn_s in turns_s:
        beat = cadence.wait()
        numbers.append(beat.number)
        missed += beat.missed
        assert clock.monotonic_s() >= start_s + beat.number * period_s - 1e-6
        assert clock.monotonic_s() < start_s + (beat.number + 1) * period_s + 1e-6
        clock.sleep(turn_s)
    assert numbers == sorted(set(numbers))
    assert missed == cadence.missed_in_all == numbers[-1] + 1 - len(numbers)
