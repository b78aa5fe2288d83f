"""Where a joint cannot simply follow its goal, and has to depart from it in good time."""

from math import ceil

import numpy as np
from numpy.typing import NDArray

from trunnion.mount.arrays import FloatArray
from trunnion.mount.mount import JointLimits
from trunnion.track.following import SLACK, SWING_DEG

BoolArray = NDArray[np.bool_]
Window = tuple[int, int]
"""First and last index of some samples."""


def smooth_steps(
    angle_deg: FloatArray, rate_deg_s: FloatArray, limits: JointLimits, step_s: float
) -> BoolArray:
    """Whether the cubic over each step is within travel, rate and acceleration; shape (n - 1,).

    A cubic stays between its two ends and the two corners of its frame, which lie a third of the
    step along the rates at its ends; its rate stays within a frame of the same kind (Bézier form).
    """
    change = 6.0 * np.diff(angle_deg) / step_s
    before, after = rate_deg_s[:-1], rate_deg_s[1:]
    begin = np.abs(change - 4.0 * before - 2.0 * after) / step_s
    end = np.abs(2.0 * before + 4.0 * after - change) / step_s
    middle = np.abs(0.5 * change - before - after)
    fastest = np.maximum(np.maximum(np.abs(before), np.abs(after)), middle)
    third = step_s / 3.0
    frame = angle_deg[:-1], angle_deg[:-1] + third * before, angle_deg[1:] - third * after
    lowest = np.minimum(np.min(frame, axis=0), angle_deg[1:])
    highest = np.maximum(np.max(frame, axis=0), angle_deg[1:])
    return np.asarray(
        (np.maximum(begin, end) <= limits.acceleration_deg_s2 * (1.0 + SLACK))
        & (fastest <= limits.rate_deg_s * (1.0 + SLACK))
        & (lowest >= limits.soft_lower_deg - SWING_DEG)
        & (highest <= limits.soft_upper_deg + SWING_DEG)
    )


def windows_round(is_smooth: BoolArray, limits: JointLimits, step_s: float) -> list[Window]:
    """The samples round each stretch of rough steps, with time for half a turn on both sides."""
    rate, acceleration = limits.rate_deg_s, limits.acceleration_deg_s2
    pad = ceil((180.0 / rate + 2.0 * rate / acceleration) / step_s) + 2
    last = len(is_smooth)
    windows: list[Window] = []
    for step in np.flatnonzero(~is_smooth).tolist():
        begin, end = max(0, step - pad), min(last, step + 1 + pad)
        if windows and begin <= windows[-1][1]:
            windows[-1] = (windows[-1][0], end)
        else:
            windows.append((begin, end))
    return windows
