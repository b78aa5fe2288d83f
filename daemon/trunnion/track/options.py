"""The ways to serve one stretch: by which turn and which solution the first joint begins.

Each begins on another branch and is the cheapest from there on, whatever it does later: going over
the top, taking a keyhole, turning back in the middle.
"""

from collections.abc import Iterator
from typing import NamedTuple

import numpy as np

from trunnion.mount.arrays import FloatArray, Motions
from trunnion.mount.joints import Joints
from trunnion.track.beam import Beam
from trunnion.track.branches import IntArray, aligned, motions_on, nearest_branch
from trunnion.track.course import Course
from trunnion.track.loss import MOST_LOSS_DB, loss_db
from trunnion.track.objective import Objective
from trunnion.track.picture import Picture, draw
from trunnion.track.search import Tally, costs_to_go, trace
from trunnion.track.steering import Aim

LOST_DEG = 30.0
"""At a larger error the target is given up, and the mount goes to where it meets it again."""

LOSS_SHARE = 1e-4
"""What a decibel for a second counts beside a second outside the beam."""


class Leg(NamedTuple):
    """Samples `begin` to `last` of a course, flown without a break."""

    begin: int
    last: int


class Option(NamedTuple):
    """One way to serve a course: the branch of each sample, its legs, begin, end, what it loses.

    `lost_s` is the time outside the beam in seconds, with a little more for the loss inside it.
    """

    branch: IntArray
    legs: tuple[Leg, ...]
    begin: Joints
    end: Joints
    lost_s: float


def options_for(course: Course, aim: Aim, beam: Beam) -> list[Option]:
    """The options, the cheapest first; none where the mount cannot point anywhere near."""
    picture = draw(course, aim.mount, aim.clearance)
    rows = Motions(*(field[:: picture.stride] for field in course.motions))
    row_s = course.step_s * picture.stride
    options = []
    for cells in _ways(picture, rows, aim, beam):
        error_deg = picture.error_deg[np.arange(len(cells)), cells]
        row_branch = nearest_branch(picture.first_deg[cells], rows, aim.mount.second)
        branch = np.repeat(row_branch, picture.stride)[: course.size]
        branch = aligned(branch, course.motions, 4 * picture.stride)
        legs = tuple(_legs(error_deg, course.size, picture.stride, beam.half_width_deg))
        if legs:
            lost_s = float(_cost(error_deg, beam).sum()) * row_s
            begin = _place(course, branch, legs[0].begin, aim)
            end = _place(course, branch, legs[-1].last, aim)
            options.append(Option(branch, legs, begin, end, lost_s))
    return sorted(options, key=lambda each: each.lost_s)


def _ways(picture: Picture, rows: Motions, aim: Aim, beam: Beam) -> Iterator[IntArray]:
    """The cells of the best way from each place where the course may begin."""
    starts = _starts(picture, rows)
    if aim.objective is Objective.TIME_OUTSIDE_BEAM:
        values = costs_to_go(_cost(picture.error_deg, beam), picture.reach)
        yield from (trace(values, start, picture.reach) for start in starts)
        return
    worst_deg = costs_to_go(picture.error_deg, picture.reach, Tally.WORST)[0]
    for level_deg in sorted({round(float(worst_deg[start]), 6) for start in starts}):
        is_too_bad = picture.error_deg > level_deg + 1e-5
        values = costs_to_go(np.where(is_too_bad, 1e6, picture.error_deg), picture.reach)
        for start in starts:
            if round(float(worst_deg[start]), 6) == level_deg:
                yield trace(values, start, picture.reach)


def _starts(picture: Picture, rows: Motions) -> list[int]:
    """The cells of all branches at the first row; where the travel has none, its best cell."""
    half_cell_deg = picture.half_cell_deg
    halves = (picture.first_deg - rows.first_deg[0]) / 180.0
    off_deg = 180.0 * np.abs(halves - np.round(halves))
    near = np.flatnonzero((off_deg <= half_cell_deg) & (picture.error_deg[0] < LOST_DEG))
    starts = [int(near[0])] if near.size else [int(np.argmin(picture.error_deg[0]))]
    for cell in near[1:].tolist():
        if cell - starts[-1] > 1:
            starts.append(cell)
    return starts


def _cost(error_deg: FloatArray, beam: Beam) -> FloatArray:
    """Of each cell, seconds outside the beam per second."""
    loss = np.minimum(loss_db(error_deg, beam.half_power_deg), MOST_LOSS_DB)
    return np.asarray((error_deg > beam.half_width_deg) + LOSS_SHARE * loss)


def _legs(error_deg: FloatArray, size: int, stride: int, half_width_deg: float) -> Iterator[Leg]:
    """The parts between the places where the target is lost, ended at the edge of the beam."""
    edges = np.flatnonzero(np.diff(error_deg > LOST_DEG, prepend=True, append=True)).tolist()
    for begin, end in zip(edges[::2], edges[1::2], strict=True):
        inside = begin + np.flatnonzero(error_deg[begin:end] <= half_width_deg)
        if inside.size:
            first = 0 if begin == 0 else int(inside[0]) * stride
            last = size - 1 if end == len(error_deg) else int(inside[-1]) * stride
            if last > first:
                yield Leg(first, last)


def _place(course: Course, branch: IntArray, sample: int, aim: Aim) -> Joints:
    """Where the joints are at a sample if they follow their branch there."""
    here = slice(sample, sample + 1)
    at = motions_on(course.part(sample, sample + 1).motions, branch[here], aim.mount.second)
    return Joints(
        aim.mount.first.nearest_deg(float(at.first_deg[0])),
        aim.mount.second.nearest_deg(float(at.second_deg[0])),
    )
