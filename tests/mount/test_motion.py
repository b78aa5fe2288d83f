"""How joints move: within their limits, to the goal, and not past it."""

from math import cos, sin

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from tests.mount.mounts import MOUNT
from trunnion.mount.joints import Motion
from trunnion.mount.motion import approach, slew_time_s, stopping_distance_deg
from trunnion.mount.mount import JointLimits

firsts, seconds = st.floats(-270.0, 267.0), st.floats(1.6, 90.9)
places = st.tuples(firsts, seconds).map(lambda place: Motion(*place))  # at rest
steps = st.sampled_from([0.0, 0.02, 0.1, 0.13, 0.25, 1.0])
uneven_steps = st.lists(steps, min_size=1, max_size=7).filter(any)


def assert_within_limits(before: Motion, after: Motion, dt_s: float) -> None:
    for joint, limits in enumerate((MOUNT.first, MOUNT.second)):
        rate, next_rate = before[2 + joint], after[2 + joint]
        assert abs(next_rate) <= limits.rate_deg_s + 1e-9
        assert abs(next_rate - rate) <= limits.acceleration_deg_s2 * dt_s + 1e-9
        change_deg = after[joint] - before[joint]
        assert abs(change_deg) <= limits.rate_deg_s * dt_s * (1 + 1e-9) + 1e-9


@settings(max_examples=25)
@given(places, places, uneven_steps)
def test_a_goal_at_rest_is_reached_exactly_and_not_passed(
    start: Motion, goal: Motion, uneven: list[float]
) -> None:
    now, longest_s, taken_s, turn = start, 200.0, 0.0, 0
    while now != goal and taken_s < longest_s:
        dt_s = uneven[turn % len(uneven)]
        after = approach(now, goal, MOUNT, dt_s)
        assert_within_limits(now, after, dt_s)
        for joint in (0, 1):
            low, high = sorted((start[joint], goal[joint]))
            assert low - 1e-9 <= after[joint] <= high + 1e-9
        now, taken_s, turn = after, taken_s + dt_s, turn + 1
    assert now == goal


@settings(max_examples=25)
@given(places, st.floats(0.01, 0.05), st.floats(0.0, 6.28), uneven_steps)
def test_a_moving_goal_is_followed_exactly_once_caught(
    start: Motion, frequency: float, phase: float, uneven: list[float]
) -> None:
    def goal_at(since_s: float) -> Motion:
        turned = frequency * since_s + phase
        return Motion(
            61.3 * sin(turned),
            45.1 + 19.7 * cos(turned),
            61.3 * frequency * cos(turned),
            -19.7 * frequency * sin(turned),
        )

    now, since_s, turn, was_caught = start, 0.0, 0, False
    while since_s < 200.0:
        dt_s = uneven[turn % len(uneven)]
        since_s, turn = since_s + dt_s, turn + 1
        after = approach(now, goal_at(since_s), MOUNT, dt_s)
        assert_within_limits(now, after, dt_s)
        now = after
        assert now == goal_at(since_s) or not was_caught
        was_caught = was_caught or now == goal_at(since_s)
    assert was_caught


@given(st.floats(-6.3, 6.3), st.floats(-4.7, 4.7))
def test_a_joint_in_motion_stops_within_its_stopping_distance(
    first_rate: float, second_rate: float
) -> None:
    now = Motion(3.7, 41.9, first_rate, second_rate)
    goal = Motion(
        3.7 + (1 if first_rate >= 0 else -1) * stopping_distance_deg(first_rate, MOUNT.first),
        41.9 + (1 if second_rate >= 0 else -1) * stopping_distance_deg(second_rate, MOUNT.second),
    )
    for _ in range(60):
        now = approach(now, goal, MOUNT, 0.1)
    assert now == pytest.approx(goal, abs=1e-6)


def test_no_time_no_motion() -> None:
    now = Motion(-41.3, 17.9, 1.1, -0.7)
    assert approach(now, Motion(20.7, 33.1), MOUNT, 0.0) == now


@pytest.mark.parametrize(
    ("distance_deg", "seconds"),
    # uniform acceleration: 2 sqrt(d/a) below v²/a = 13.686°, else d/v + v/a
    [(10.7, 3.841695), (-10.7, 3.841695), (151.3, 26.188287)],
)
def test_slew_time_from_rest_to_rest(distance_deg: float, seconds: float) -> None:
    limits = JointLimits(-271.0, 268.0, 6.3, 2.9)
    assert slew_time_s(distance_deg, limits) == pytest.approx(seconds, abs=1e-6)


@settings(max_examples=25)
@given(st.floats(0.5, 300.0))
def test_approach_takes_no_longer_than_the_slew_time_and_a_step(distance_deg: float) -> None:
    now, goal, dt_s, turns = Motion(-140.0, 40.0), Motion(-140.0 + distance_deg, 40.0), 0.05, 0
    while now != goal:
        now, turns = approach(now, goal, MOUNT, dt_s), turns + 1
    assert turns * dt_s <= slew_time_s(distance_deg, MOUNT.first) + 3 * dt_s
