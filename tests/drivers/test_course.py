"""The simulated joint's course: within its bounds, soonest, exact, and free of overshoot."""

from itertools import pairwise
from math import sqrt

import pytest
from hypothesis import given
from hypothesis import strategies as st

from trunnion_drivers.simulator.course import (
    Bounds,
    Course,
    Leg,
    course_to_goal,
    course_to_rate,
    resting_course,
)

BOUNDS = Bounds(rate_deg_s=5.3, acceleration_deg_s2=2.9)
BEGIN_S = 71.3

angles = st.floats(-300.0, 300.0)
rates = st.floats(-BOUNDS.rate_deg_s, BOUNDS.rate_deg_s)
slower_rates = st.floats(-4.9, 4.9)


def arrival_s(course: Course) -> float:
    return course.legs[-1].begin_s


def instants(course: Course) -> list[float]:
    span_s = arrival_s(course) - BEGIN_S + 1.0
    return [BEGIN_S + span_s * n / 200 for n in range(201)]


@given(angles, rates, angles, rates)
def test_rate_and_acceleration_stay_within_their_bounds(
    angle: float, rate: float, goal: float, goal_rate: float
) -> None:
    course = course_to_goal(Leg(BEGIN_S, angle, rate), goal, goal_rate, BOUNDS)
    assert all(abs(leg.acceleration_deg_s2) <= BOUNDS.acceleration_deg_s2 for leg in course.legs)
    assert all(abs(course.at(t)[1]) <= BOUNDS.rate_deg_s + 1e-6 for t in instants(course))


@given(angles, rates, angles, rates)
def test_legs_join_without_a_jump_and_in_order(
    angle: float, rate: float, goal: float, goal_rate: float
) -> None:
    course = course_to_goal(Leg(BEGIN_S, angle, rate), goal, goal_rate, BOUNDS)
    for leg, after in pairwise(course.legs):
        assert leg.begin_s <= after.begin_s
        assert leg.at(after.begin_s) == pytest.approx(
            (after.angle_deg, after.rate_deg_s), rel=1e-6, abs=1e-5
        )


@given(angles, rates, angles, slower_rates)
def test_a_goal_slower_than_the_mount_is_reached_and_then_followed_exactly(
    angle: float, rate: float, goal: float, goal_rate: float
) -> None:
    course = course_to_goal(Leg(BEGIN_S, angle, rate), goal, goal_rate, BOUNDS)
    later_s = arrival_s(course) + 3.7
    expected = goal + goal_rate * (later_s - BEGIN_S)
    assert course.at(later_s) == pytest.approx((expected, goal_rate), abs=1e-9)


@given(angles, angles)
def test_from_rest_to_rest_it_never_leaves_the_span(angle: float, goal: float) -> None:
    course = course_to_goal(Leg(BEGIN_S, angle, 0.0), goal, 0.0, BOUNDS)
    low, high = sorted((angle, goal))
    assert all(low - 1e-9 <= course.at(t)[0] <= high + 1e-9 for t in instants(course))


@given(angles, angles)
def test_from_rest_to_rest_it_takes_the_least_time(angle: float, goal: float) -> None:
    """Trapezoid or triangle of speed: the textbook times of uniform acceleration."""
    course = course_to_goal(Leg(BEGIN_S, angle, 0.0), goal, 0.0, BOUNDS)
    way, top, acceleration = abs(goal - angle), BOUNDS.rate_deg_s, BOUNDS.acceleration_deg_s2
    ramps = top * top / acceleration
    least = way / top + top / acceleration if way > ramps else 2.0 * sqrt(way / acceleration)
    assert arrival_s(course) - BEGIN_S == pytest.approx(least, abs=1e-7)


@given(angles, rates, rates)
def test_a_rate_is_reached_at_full_acceleration_and_kept(
    angle: float, rate: float, wanted: float
) -> None:
    course = course_to_rate(Leg(BEGIN_S, angle, rate), wanted, BOUNDS)
    ramp_s = abs(wanted - rate) / BOUNDS.acceleration_deg_s2
    assert arrival_s(course) - BEGIN_S == pytest.approx(ramp_s, abs=1e-9)
    assert course.at(BEGIN_S + ramp_s + 9.1)[1] == wanted


def test_a_goal_that_runs_away_is_chased_at_the_highest_rate() -> None:
    course = course_to_goal(Leg(BEGIN_S, 3.1, 0.0), 20.3, 7.7, BOUNDS)
    assert course.at(BEGIN_S + 100.0)[1] == pytest.approx(BOUNDS.rate_deg_s)


def test_rest_is_rest() -> None:
    assert resting_course(BEGIN_S, 33.3).at(BEGIN_S + 1e6) == (33.3, 0.0)
