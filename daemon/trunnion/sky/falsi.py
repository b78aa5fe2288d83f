"""Roots of many functions at once, each within its bracket."""

from collections.abc import Callable

import numpy as np
from numpy.typing import NDArray

from trunnion.sky.look import FloatArray

IntArray = NDArray[np.int64]


def roots(
    function: Callable[[IntArray, FloatArray], FloatArray],
    low: FloatArray,
    high: FloatArray,
    within: float,
    most_steps: int = 60,
) -> FloatArray:
    """One root of each function between `low` and `high`, shape (n,), where it changes its sign.

    `function` takes which of them are asked (in order) and where. Regula falsi in the Illinois
    variant (Dowell and Jarratt 1971), each until its step is smaller than `within`.
    """
    every: IntArray = np.arange(len(low))
    root, which = high.copy(), every
    a, b, fa, fb = low, high, function(every, low), function(every, high)
    for _ in range(most_steps):
        if not which.size:
            break
        gap = fb - fa
        x = np.where(gap == 0.0, 0.5 * (a + b), b - fb * (b - a) / np.where(gap == 0.0, 1.0, gap))
        fx = function(which, x)
        is_beyond = np.sign(fx) * np.sign(fb) <= 0.0
        a, fa = np.where(is_beyond, b, a), np.where(is_beyond, fb, 0.5 * fa)
        is_open = np.abs(x - root[which]) > within
        root[which] = x
        which, b, fb = which[is_open], x[is_open], fx[is_open]
        a, fa = a[is_open], fa[is_open]
    return root
