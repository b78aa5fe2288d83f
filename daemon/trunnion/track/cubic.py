"""Cubics between states of a joint: angle and rate given at both ends (Hermite form)."""

import numpy as np

from trunnion.mount.arrays import FloatArray


def refined(
    angle: FloatArray, rate: FloatArray, step_s: float, parts: int
) -> tuple[FloatArray, FloatArray]:
    """Angles and rates at `parts` times as many steps, the given states among them."""
    if parts == 1:
        return angle, rate
    share = np.arange(parts) / parts
    before, after = slice(None, -1), slice(1, None)
    angles, rates = cubic(
        angle[before, None],
        rate[before, None],
        angle[after, None],
        rate[after, None],
        step_s,
        share,
    )
    return np.append(angles.ravel(), angle[-1]), np.append(rates.ravel(), rate[-1])


def cubic(
    angle_0: FloatArray,
    rate_0: FloatArray,
    angle_1: FloatArray,
    rate_1: FloatArray,
    step_s: float,
    share: FloatArray,
) -> tuple[FloatArray, FloatArray]:
    """Angle and rate at a share (0 to 1) of the step between two states."""
    change = angle_1 - angle_0
    c2 = 3.0 * change - step_s * (2.0 * rate_0 + rate_1)
    c3 = step_s * (rate_0 + rate_1) - 2.0 * change
    angle = angle_0 + share * (step_s * rate_0 + share * (c2 + share * c3))
    rate = rate_0 + share * (2.0 * c2 + 3.0 * share * c3) / step_s
    return angle, rate
