"""The picture that the search looks for a path in: a pointing error for every instant and angle.

A row is an instant, a column a cell of the first joint's travel. The second joint is where it
serves best, which is known in closed form: the direction at a right angle to the second axis that
is nearest to the target.
"""

from math import ceil
from typing import NamedTuple

import numpy as np
from numpy.typing import NDArray

from trunnion.mount.arrays import FloatArray, Motions
from trunnion.mount.clearance import Clearance, Sector
from trunnion.mount.mount import Mount
from trunnion.track.course import Course

BoolArray = NDArray[np.bool_]

CELL_DEG = 1.0
"""Widest cell."""

STEP_S = 1.0
"""Shortest step from row to row."""

MOST_ROWS = 1500
"""Bounds the memory that a long contact takes."""

BLOCKED_DEG = 1000.0
"""Stands for the error of a cell where mount or boresight may not be."""


class Picture(NamedTuple):
    """Errors (deg), shape (rows, cells); `stride` samples of the course make a row."""

    first_deg: FloatArray
    error_deg: FloatArray
    stride: int
    reach: int
    """How many cells the first joint gets in a step at full rate."""

    @property
    def half_cell_deg(self) -> float:
        """Half the width of a cell."""
        return float(0.5 * (self.first_deg[1] - self.first_deg[0]))


def draw(course: Course, mount: Mount, clearance: Clearance) -> Picture:
    """The picture of a course over the whole first-joint travel, all turns and both solutions."""
    limits = mount.first
    wide_s = max(STEP_S, 0.5 * CELL_DEG / limits.rate_deg_s)
    stride = max(1, ceil(wide_s / course.step_s), ceil(course.size / MOST_ROWS))
    step_deg = limits.rate_deg_s * stride * course.step_s
    span_deg = limits.soft_upper_deg - limits.soft_lower_deg
    reach = max(1, ceil(min(step_deg, span_deg) / CELL_DEG))
    count = max(2, ceil(span_deg / (min(step_deg, span_deg) / reach)) + 1)
    first_deg = np.linspace(limits.soft_lower_deg, limits.soft_upper_deg, count)
    rows = Motions(*(field[::stride, None] for field in course.motions))
    half_cell_deg = 0.5 * (first_deg[1] - first_deg[0])
    second_deg = best_second_deg(first_deg, rows, mount, clearance)
    error_deg = _errors_deg(first_deg, second_deg, rows, half_cell_deg)
    error_deg[_is_blocked(first_deg, second_deg, mount, clearance)] = BLOCKED_DEG
    return Picture(first_deg, error_deg, stride, reach)


def best_second_deg(
    first_deg: FloatArray, motions: Motions, mount: Mount, clearance: Clearance
) -> FloatArray:
    """The second-joint angle that points nearest, within its travel and above the horizon.

    `motions` are the target's plain ones; all arrays of shapes that go together.
    """
    limits = mount.second
    turn = np.radians(first_deg - motions.first_deg)
    plain = np.radians(motions.second_deg)
    angle_deg = np.degrees(np.arctan2(np.sin(plain), np.cos(plain) * np.cos(turn)))
    middle_deg = 0.5 * (limits.soft_lower_deg + limits.soft_upper_deg)
    angle_deg -= 360.0 * np.round((angle_deg - middle_deg) / 360.0)
    if mount.hinges.is_upright:
        angle_deg = _lifted(first_deg, angle_deg, clearance)
    return np.asarray(np.clip(angle_deg, limits.soft_lower_deg, limits.soft_upper_deg))


def _errors_deg(
    first_deg: FloatArray, second_deg: FloatArray, rows: Motions, half_cell_deg: float
) -> FloatArray:
    """The error somewhere in the cell: zero where the cell holds the target's own angle."""
    turn_deg = np.abs((first_deg - rows.first_deg + 180.0) % 360.0 - 180.0)
    inwards_deg = np.where(
        turn_deg <= 90.0,
        np.maximum(turn_deg - half_cell_deg, 0.0),
        np.minimum(turn_deg + half_cell_deg, 180.0),
    )
    second, plain = np.radians(second_deg), np.radians(rows.second_deg)
    half_turn = np.sin(np.radians(0.5 * inwards_deg))
    half_lift = np.sin(0.5 * (second - plain))
    haversine = half_lift**2 + np.cos(second) * np.cos(plain) * half_turn**2
    return np.asarray(np.degrees(2.0 * np.arcsin(np.sqrt(np.clip(haversine, 0.0, 1.0)))))


def _lifted(first_deg: FloatArray, second_deg: FloatArray, clearance: Clearance) -> FloatArray:
    """The second joint of an upright mount raised above floor and horizon, on either side."""
    if clearance.mask is None:
        return np.clip(second_deg, clearance.floor_deg, 180.0 - clearance.floor_deg)
    lowest_deg = np.vectorize(clearance.lowest_deg, otypes=[float])
    return np.clip(second_deg, lowest_deg(first_deg), 180.0 - lowest_deg(first_deg + 180.0))


def _is_blocked(
    first_deg: FloatArray, second_deg: FloatArray, mount: Mount, clearance: Clearance
) -> BoolArray:
    blocked = is_forbidden(first_deg, second_deg, mount)
    if mount.hinges.is_upright:
        over = second_deg > 90.0
        azimuth_deg = first_deg + 180.0 * over
        elevation_deg = np.where(over, 180.0 - second_deg, second_deg)
        for sector in clearance.keep_outs:
            blocked |= _are_in(sector, azimuth_deg, elevation_deg)
    return blocked


def is_forbidden(first_deg: FloatArray, second_deg: FloatArray, mount: Mount) -> BoolArray:
    """Whether each pair of joint angles lies in a box that the mount may not enter."""
    forbidden = np.zeros(np.broadcast(first_deg, second_deg).shape, dtype=bool)
    for box in mount.forbidden:
        forbidden |= (
            (first_deg >= box.first_lower_deg)
            & (first_deg <= box.first_upper_deg)
            & (second_deg >= box.second_lower_deg)
            & (second_deg <= box.second_upper_deg)
        )
    return forbidden


def _are_in(sector: Sector, azimuth_deg: FloatArray, elevation_deg: FloatArray) -> BoolArray:
    width_deg = (sector.to_azimuth_deg - sector.from_azimuth_deg) % 360.0 or 360.0
    return np.asarray(
        ((azimuth_deg - sector.from_azimuth_deg) % 360.0 <= width_deg)
        & (elevation_deg >= sector.lower_elevation_deg)
        & (elevation_deg <= sector.upper_elevation_deg)
    )
