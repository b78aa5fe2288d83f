"""Where a function of time changes its sign: many brackets at once."""

from collections.abc import Callable

import numpy as np
from numpy.typing import NDArray

from trunnion.sky.look import FloatArray

HALVINGS = 27
"""Brings a bracket of two minutes to a microsecond, which POSIX seconds can hardly tell apart."""


def changes(
    is_high: Callable[[FloatArray], NDArray[np.bool_]], before_s: FloatArray, after_s: FloatArray
) -> FloatArray:
    """The instants at which `is_high` changes, one between each `before_s` and `after_s`.

    Bisection, since the condition may jump (a step in a horizon mask). The instant returned is on
    the side of `after_s`: what the condition becomes, it is there. Arrays of shape (n,), seconds.
    """
    low, high = before_s.copy(), after_s.copy()
    if not low.size:
        return high
    was_high = is_high(low)
    for _ in range(HALVINGS):
        middle = 0.5 * (low + high)
        is_still = is_high(middle) == was_high
        low, high = np.where(is_still, middle, low), np.where(is_still, high, middle)
    return high
