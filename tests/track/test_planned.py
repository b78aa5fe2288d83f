"""Paths planned beforehand: what they say on the tick."""

import pickle

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from tests.track.skies import START_S, Overflight
from tests.track.stations import mount
from trunnion.mount.arrays import Motions
from trunnion.mount.joints import Motion
from trunnion.track.branches import motions_on
from trunnion.track.course import sample_course
from trunnion.track.outcome import errors_along
from trunnion.track.planned_arrays import motions_along, planned_path

TARGET = Overflight(77.7, heading_deg=211.1)
NODES = Motions(
    np.array([3.1, 4.9, 5.7]),
    np.array([41.3, 40.1, 39.9]),
    np.array([1.1, 0.9, 0.2]),
    np.array([-0.7, -0.3, 0.4]),
)
PATH = planned_path(TARGET, START_S, 1.7, NODES)


@pytest.mark.parametrize("index", [0, 1])
def test_nodes_are_met(index: int) -> None:
    expected = tuple(float(field[index]) for field in NODES)
    assert PATH.at(START_S + 1.7 * index) == pytest.approx(expected, abs=1e-6)


@given(st.floats(0.01, 3.39))
def test_rates_are_the_derivatives(since_s: float) -> None:
    before, now, after = (PATH.at(START_S + since_s + by_s) for by_s in (-1e-3, 0.0, 1e-3))
    for joint in (0, 1):
        slope = (after[joint] - before[joint]) / 2e-3
        assert now[2 + joint] == pytest.approx(slope, abs=2e-3)


@given(st.floats(0.0, 3.39))
def test_many_instants_are_as_one(since_s: float) -> None:
    many = motions_along(PATH, np.array([START_S + since_s]))
    assert PATH.at(START_S + since_s) == pytest.approx([float(each[0]) for each in many], abs=1e-6)


def test_before_and_after_the_joints_rest() -> None:
    assert PATH.at(START_S - 9.0) == Motion(3.1, 41.3)
    assert PATH.at(START_S + 99.0) == Motion(5.7, 39.9)


def test_it_survives_the_way_to_another_process() -> None:
    there = pickle.loads(pickle.dumps(PATH))
    assert there.at(START_S + 2.2) == PATH.at(START_S + 2.2)
    assert there.look(START_S + 2.2) == TARGET.look(START_S + 2.2)


@pytest.mark.parametrize("highest_deg", [30.3, 77.7, 80.1])
def test_between_the_samples_the_path_is_on_the_target(highest_deg: float) -> None:
    """As close as no encoder resolves, where a joint of 5°/s can follow at all."""
    target = Overflight(highest_deg, heading_deg=211.1)
    course = sample_course(target, START_S + 111.1, START_S + 688.8, mount().hinges)
    branch = np.zeros(course.size, dtype=np.int64)
    exact = motions_on(course.motions, branch, mount().second)
    path = planned_path(target, course.begin_s, course.step_s, exact)
    utc_s = np.arange(course.begin_s, course.begin_s + 570.0, 0.173)
    assert errors_along(path, utc_s, mount()).max() < 1e-5
