"""The cheapest way through a picture whose step from row to row is limited.

Dynamic programming from the last row to the first, with the minimum over a sliding window; the
values then lead from any cell of the first row along its own best way.
"""

from enum import Enum

import numpy as np
from numpy.typing import NDArray

from trunnion.mount.arrays import FloatArray


class Tally(Enum):
    """How the costs of the cells along a way make the cost of the way."""

    SUM = "sum"
    WORST = "worst"


def costs_to_go(cost: FloatArray, reach: int, tally: Tally = Tally.SUM) -> FloatArray:
    """Cost of the best way from each cell to the last row, its own cost included.

    `cost` has shape (rows, cells), finite; a step leads to a cell at most `reach` aside.
    """
    values = np.array(cost, dtype=float)
    combine = np.add if tally is Tally.SUM else np.maximum
    for row in range(len(values) - 2, -1, -1):
        combine(values[row], window_minimum(values[row + 1], reach), out=values[row])
    return values


def trace(values: FloatArray, start: int, reach: int) -> NDArray[np.int64]:
    """The cells of the best way from one cell of the first row; of equal steps the shortest."""
    cells = np.empty(len(values), dtype=np.int64)
    cells[0] = cell = start
    for row in range(1, len(values)):
        low = max(0, cell - reach)
        window = values[row, low : cell + reach + 1]
        best = np.flatnonzero(window == window.min()) + low
        cell = int(best[np.argmin(np.abs(best - cell))])
        cells[row] = cell
    return cells


def window_minimum(values: FloatArray, reach: int) -> FloatArray:
    """The least of the values at most `reach` places aside, by doubling the window."""
    padded = np.full(len(values) + 2 * reach, np.inf)
    padded[reach : reach + len(values)] = values
    width, wanted = 1, 2 * reach + 1
    while 2 * width <= wanted:
        padded = np.minimum(padded[:-width], padded[width:])
        width *= 2
    rest = wanted - width
    return np.asarray(np.minimum(padded[: len(values)], padded[rest : rest + len(values)]))
