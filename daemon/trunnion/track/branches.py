"""The places of the first joint at which a target can be met exactly.

Branch `k` lies `k` half turns on from the plain solution: even ones are plain, odd ones tipped
over, and two branches further is a whole turn.
"""

import numpy as np
from numpy.typing import NDArray

from trunnion.mount.arrays import FloatArray, Motions
from trunnion.mount.mount import JointLimits

IntArray = NDArray[np.int64]

ROUNDING_DEG = 1e-6


def second_goal_deg(motions: Motions, branch: IntArray, limits: JointLimits) -> FloatArray:
    """The second joint's angle on each sample's branch, by whole turns nearest to its travel."""
    plain = motions.second_deg
    angle_deg = np.where(branch % 2 == 0, plain, 180.0 - plain)
    middle_deg = 0.5 * (limits.soft_lower_deg + limits.soft_upper_deg)
    return np.asarray(angle_deg - 360.0 * np.round((angle_deg - middle_deg) / 360.0))


def motions_on(motions: Motions, branch: IntArray, limits: JointLimits) -> Motions:
    """Joint angles and rates on each sample's branch; `limits` are the second joint's."""
    sign = np.where(branch % 2 == 0, 1.0, -1.0)
    return Motions(
        motions.first_deg + 180.0 * branch,
        second_goal_deg(motions, branch, limits),
        motions.first_rate_deg_s,
        sign * motions.second_rate_deg_s,
    )


def nearest_branch(first_deg: FloatArray, motions: Motions, limits: JointLimits) -> IntArray:
    """The branch nearest to these first-joint angles, of those that the second joint can reach.

    Where it can reach neither a plain nor a tipped one, the one it gets closer to.
    """
    halves = (first_deg - motions.first_deg) / 180.0
    excess = [_excess_deg(motions, parity, limits) for parity in (0, 1)]
    even = 2 * np.round(halves / 2.0)
    odd = 2 * np.round((halves - 1.0) / 2.0) + 1
    is_even_nearer = np.abs(halves - even) <= np.abs(halves - odd)
    worse_deg = excess[0] - excess[1]
    is_even = np.where(np.abs(worse_deg) < ROUNDING_DEG, is_even_nearer, worse_deg < 0.0)
    return np.where(is_even, even, odd).astype(np.int64)


def _excess_deg(motions: Motions, parity: int, limits: JointLimits) -> FloatArray:
    """How far the second joint would have to leave its travel."""
    goal_deg = second_goal_deg(motions, np.full(len(motions.first_deg), parity), limits)
    return np.maximum(
        np.maximum(limits.soft_lower_deg - goal_deg, goal_deg - limits.soft_upper_deg), 0.0
    )


def aligned(branch: IntArray, motions: Motions, reach: int) -> IntArray:
    """The same branches, each change moved to where the target passes the axis most closely.

    A change moves by at most `reach` samples.
    """
    nearing = motions.second_rate_deg_s * np.sign(motions.second_deg) > 0.0
    passages = np.flatnonzero(nearing[:-1] & ~nearing[1:])
    moved = branch.copy()
    for change in np.flatnonzero(np.diff(branch)).tolist():
        off = passages - change
        if off.size == 0 or np.abs(off).min() > reach:
            continue
        passage = int(passages[np.argmin(np.abs(off))])
        if passage > change:
            moved[change + 1 : passage + 1] = branch[change]
        else:
            moved[passage + 1 : change + 1] = branch[change + 1]
    return moved
