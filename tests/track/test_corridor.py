"""Corridors against a linear programme, and what is flown in them against their walls."""

import numpy as np
import pytest
from hypothesis import assume, given, settings
from hypothesis import strategies as st
from scipy.optimize import linprog

from trunnion.mount.arrays import FloatArray
from trunnion.mount.mount import JointLimits
from trunnion.track.corridor import RESERVE, passable_states
from trunnion.track.following import follow
from trunnion.track.keyhole import nearest_state
from trunnion.track.polygon import chord, clipped, contains, rectangle, swept
from trunnion.track.windows import smooth_steps

LIMITS = JointLimits(-500.0, 500.0, 4.7, 1.9)
STEP_S = 0.7

walls = st.lists(st.tuples(st.floats(-6.0, 6.0), st.floats(0.05, 3.0)), min_size=3, max_size=12)


def is_passable(lower_deg: FloatArray, upper_deg: FloatArray) -> bool:
    """The same question as a linear programme over angles, rates and accelerations."""
    count = len(lower_deg)
    acceleration = LIMITS.acceleration_deg_s2 * (1.0 - RESERVE)
    rows, values = [], []
    for index in range(count - 1):
        angle, rate = np.zeros(3 * count), np.zeros(3 * count)
        angle[[index, index + 1]] = -1.0, 1.0
        angle[count + index] = -STEP_S
        angle[2 * count + index] = -0.5 * STEP_S**2
        rate[[count + index, count + index + 1]] = -1.0, 1.0
        rate[2 * count + index] = -STEP_S
        rows += [angle, rate]
        values += [0.0, 0.0]
    bounds = [
        *zip(lower_deg, upper_deg, strict=True),
        *[(-LIMITS.rate_deg_s, LIMITS.rate_deg_s)] * count,
        *[(-acceleration, acceleration)] * count,
    ]
    found = linprog(np.zeros(3 * count), A_eq=np.array(rows), b_eq=values, bounds=bounds)
    return bool(found.status == 0)


@settings(max_examples=80, deadline=None)
@given(walls)
def test_a_corridor_is_passable_exactly_when_a_linear_programme_says_so(
    given_walls: list[tuple[float, float]],
) -> None:
    middle, half = (np.array(each) for each in zip(*given_walls, strict=True))
    lower_deg, upper_deg = middle - half, middle + half
    states = passable_states(lower_deg.tolist(), upper_deg.tolist(), LIMITS, STEP_S)
    narrower, wider = (
        is_passable(lower_deg - by_deg, upper_deg + by_deg) for by_deg in (-1e-6, 1e-6)
    )
    assume(narrower == wider)  # not on the edge between the two
    assert (states is not None) == wider


@settings(max_examples=80, deadline=None)
@given(walls, st.floats(-6.0, 6.0), st.floats(-2.0, 2.0))
def test_what_is_flown_stays_between_the_walls_and_within_the_limits(
    given_walls: list[tuple[float, float]], goal_deg: float, goal_rate: float
) -> None:
    middle, half = (np.array(each) for each in zip(*given_walls, strict=True))
    lower_deg, upper_deg = middle - half, middle + half
    states = passable_states(lower_deg.tolist(), upper_deg.tolist(), LIMITS, STEP_S)
    assume(states is not None)
    assert states is not None
    goals = [(goal_deg + goal_rate * STEP_S * index, goal_rate) for index in range(len(middle))]
    way = np.array(list(follow(nearest_state(states[0], goals[0]), goals, states, LIMITS, STEP_S)))
    assert (way[:, 0] >= lower_deg - 1e-6).all()
    assert (way[:, 0] <= upper_deg + 1e-6).all()
    assert smooth_steps(way[:, 0], way[:, 1], LIMITS, STEP_S).all()


def test_a_goal_that_can_be_followed_is_followed_exactly() -> None:
    goals = [(3.0 + 0.5 * index * STEP_S, 0.5) for index in range(20)]
    states = passable_states([-100.0] * 20, [100.0] * 20, LIMITS, STEP_S)
    assert states is not None
    assert list(follow(goals[0], goals, states, LIMITS, STEP_S)) == goals


def test_no_states_between_walls_that_jump_too_far() -> None:
    assert passable_states([0.0, 50.0], [1.0, 51.0], LIMITS, STEP_S) is None


def test_polygons() -> None:
    box = rectangle(-1.0, 2.0, -3.0, 1.0)
    assert rectangle(1.0, 0.0, 0.0, 1.0) == []
    assert contains(box, (1.9, 0.9))
    assert not contains(box, (2.1, 0.9))
    assert chord(box, (0.0, 0.0), 0.5, 0.0) == pytest.approx((-2.0, 4.0))
    assert chord(box, (0.0, 5.0), 1.0, 0.0) is None
    wide = swept(box, 1.0, 1.0)
    assert contains(wide, (2.9, 1.9))
    assert contains(wide, (-1.9, -3.9))
    assert not contains(wide, (2.9, -2.9))
    assert clipped(box, 0, 5.0, 6.0) == []
    assert not contains(clipped(box, 1, 0.0, 0.5), (0.0, -0.1))
