"""The search against every way there is, and what must never make it worse."""

from itertools import product
from random import Random

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from hypothesis.extra.numpy import arrays

from trunnion.mount.arrays import FloatArray
from trunnion.track.search import Tally, costs_to_go, trace, window_minimum

pictures = st.integers(2, 6).flatmap(
    lambda rows: st.integers(2, 5).flatmap(
        lambda cells: arrays(float, (rows, cells), elements=st.integers(0, 9).map(float))
    )
)


def best_of_all_ways(cost: FloatArray, start: int, reach: int, tally: Tally) -> float:
    """By trying every way."""
    rows, cells = cost.shape
    combine = sum if tally is Tally.SUM else max
    return min(
        float(combine(cost[row, cell] for row, cell in enumerate((start, *rest))))
        for rest in product(range(cells), repeat=rows - 1)
        if all(abs(a - b) <= reach for a, b in zip((start, *rest), rest, strict=False))
    )


@settings(max_examples=300, deadline=None)
@given(pictures, st.integers(1, 3), st.sampled_from(Tally), st.data())
def test_no_way_is_cheaper_than_the_one_found(
    cost: FloatArray, reach: int, tally: Tally, data: st.DataObject
) -> None:
    start = data.draw(st.integers(0, cost.shape[1] - 1))
    values = costs_to_go(cost, reach, tally)
    assert values[0, start] == best_of_all_ways(cost, start, reach, tally)
    if tally is Tally.SUM:
        cells = trace(values, start, reach)
        assert cost[np.arange(len(cells)), cells].sum() == values[0, start]
        assert np.abs(np.diff(cells)).max() <= reach


@given(arrays(float, st.integers(1, 40), elements=st.floats(-9.0, 9.0)), st.integers(1, 50))
def test_the_least_in_a_window(values: FloatArray, reach: int) -> None:
    expected = [
        values[max(0, cell - reach) : cell + reach + 1].min() for cell in range(len(values))
    ]
    assert window_minimum(values, reach) == pytest.approx(expected)


@given(pictures, st.sampled_from(Tally))
def test_a_faster_joint_and_a_longer_travel_never_cost_more(cost: FloatArray, tally: Tally) -> None:
    slow, fast = (costs_to_go(cost, reach, tally)[0] for reach in (1, 2))
    assert (fast <= slow).all()
    shorter = costs_to_go(cost[:, 1:], 1, tally)[0]
    assert (slow[1:] <= shorter).all()


@given(pictures, st.sampled_from(Tally), st.randoms(use_true_random=False))
def test_a_smaller_mask_never_costs_more(cost: FloatArray, tally: Tally, random: Random) -> None:
    """What a mask, a floor or a keep-out forbids is a cell that costs without end."""
    masked = cost.copy()
    for place in np.ndindex(*cost.shape):
        if random.random() < 0.2:
            masked[place] = np.inf
    free, hindered = (costs_to_go(each, 1, tally)[0] for each in (cost, masked))
    assert (free <= hindered).all()
