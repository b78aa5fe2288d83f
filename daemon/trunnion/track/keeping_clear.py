"""Where a planned path keeps clear of floor, mask, keep-outs and forbidden joint angles."""

from collections.abc import Iterator

import numpy as np

from trunnion.mount.arrays import Motions
from trunnion.mount.clearance import Clearance
from trunnion.mount.joints import Joints
from trunnion.mount.mount import Mount
from trunnion.track.picture import BoolArray, is_forbidden

SLACK_DEG = 0.01
"""A target at the edge of what is clear, and rounding."""


def clear_parts(motions: Motions, mount: Mount, clearance: Clearance) -> Iterator[tuple[int, int]]:
    """First and last sample of each part of a path that is clear, of two samples at least."""
    clear = np.concatenate(([False], _are_clear(motions, mount, clearance), [False]))
    begins = np.flatnonzero(clear[1:] & ~clear[:-1])
    ends = np.flatnonzero(~clear[1:] & clear[:-1])
    for begin, end in zip(begins.tolist(), ends.tolist(), strict=True):
        if end - begin >= 2:
            yield begin, end - 1


def _are_clear(motions: Motions, mount: Mount, clearance: Clearance) -> BoolArray:
    joints = zip(motions.first_deg.tolist(), motions.second_deg.tolist(), strict=True)
    boresights = (mount.hinges.boresight(Joints(*each)) for each in joints)
    clear = np.array([_is_nearly_clear(*each, clearance) for each in boresights])
    return np.asarray(clear & ~is_forbidden(motions.first_deg, motions.second_deg, mount))


def _is_nearly_clear(azimuth_deg: float, elevation_deg: float, clearance: Clearance) -> bool:
    return clearance.is_clear(azimuth_deg, elevation_deg + SLACK_DEG) or clearance.is_clear(
        azimuth_deg, elevation_deg
    )
