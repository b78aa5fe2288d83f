"""How far the first joint may be from a branch while the error stays below a level.

At a turn `d` of the first joint away from the target's own angle and a second joint `s`, the error
`e` from a target at plain second angle `p` obeys cos e = sin s sin p + cos s cos p cos d. For a
given `e` the turn is largest where the circle of that radius touches the circle of the second
joint, at sin s = sin p / cos e, or at the end of the travel nearest to it.
"""

import numpy as np

from trunnion.mount.arrays import FloatArray, Motions
from trunnion.mount.mount import JointLimits
from trunnion.track.branches import IntArray

UNBOUNDED_DEG = 1e5
"""Stands for a band without edges: the axis itself is near enough to the target."""


def half_widths_deg(
    level_deg: FloatArray, motions: Motions, branch: IntArray, limits: JointLimits
) -> FloatArray:
    """Half the width of the band at each sample; negative where the level cannot be reached.

    `level_deg`, shape (n,), is the error allowed at each sample; `limits` are the second joint's.
    """
    widths = np.full(len(motions.second_deg), -1.0)
    for lower_deg, upper_deg, parity in _plain_ranges(limits):
        width = _half_width(level_deg, motions.second_deg, lower_deg, upper_deg)
        widths = np.where(branch % 2 == parity, np.maximum(widths, width), widths)
    return widths


def _plain_ranges(limits: JointLimits) -> list[tuple[float, float, int]]:
    """The parts of the second joint's travel as plain angles, and the branches they serve."""
    lower_deg, upper_deg = limits.soft_lower_deg, limits.soft_upper_deg
    ranges = []
    for half in range(-3, 4):  # a half turn of the second joint round 180° times `half`
        low_deg = max(lower_deg, 180.0 * half - 90.0)
        high_deg = min(upper_deg, 180.0 * half + 90.0)
        if low_deg > high_deg:
            continue
        plain = sorted((_plain(low_deg, half), _plain(high_deg, half)))
        ranges.append((plain[0], plain[1], half % 2))
    return ranges


def _plain(second_deg: float, half: int) -> float:
    off_deg = second_deg - 180.0 * half
    return off_deg if half % 2 == 0 else -off_deg


def _half_width(
    level_deg: FloatArray, plain_deg: FloatArray, lower_deg: float, upper_deg: float
) -> FloatArray:
    level, plain = np.radians(np.minimum(level_deg, 89.999)), np.radians(plain_deg)
    touching = np.arcsin(np.clip(np.sin(plain) / np.cos(level), -1.0, 1.0))
    second = np.clip(touching, np.radians(lower_deg), np.radians(upper_deg))
    share = (np.cos(level) - np.sin(second) * np.sin(plain)) / np.maximum(
        np.cos(second) * np.cos(plain), 1e-12
    )
    width = np.degrees(np.arccos(np.clip(share, -1.0, 1.0)))
    width = np.where(share <= -1.0, UNBOUNDED_DEG, width)
    width = np.where(share > 1.0 + 1e-12, -1.0, width)
    return np.asarray(np.where(level_deg >= 89.999, UNBOUNDED_DEG, width))
