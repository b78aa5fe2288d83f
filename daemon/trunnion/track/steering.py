"""The continuous pass: from the branches that the search chose to a path of both joints.

Where the joints can follow, the path is the target's own; round a place where they cannot, the
first joint takes the best way through its keyhole, and the second follows what that way makes best.
"""

from dataclasses import replace
from typing import NamedTuple

import numpy as np

from trunnion.mount.arrays import FloatArray, Motions
from trunnion.mount.clearance import Clearance
from trunnion.mount.mount import JointLimits, Mount
from trunnion.track.branches import IntArray, motions_on
from trunnion.track.corridor import passable_states, walls
from trunnion.track.course import Course
from trunnion.track.cubic import refined
from trunnion.track.following import catch_up, follow
from trunnion.track.keyhole import Keyhole, bisected, nearest_state, stride_for
from trunnion.track.objective import Objective
from trunnion.track.picture import best_second_deg
from trunnion.track.polygon import Polygon, contains
from trunnion.track.windows import Window, smooth_steps, windows_round

FINE_DEG = 0.1
"""Errors below this are worth steps of a single sample."""

TRIES = 6
FINE_PARTS = 8
ROUNDING_DEG = 1e-5

EXACT_DEG = 1e-9
"""No further from the target's own angle, a joint counts as being there."""

SMALL_DEG = 1e-4
"""The second joint is let off its goal by at least this, where it has to leave it."""


class Aim(NamedTuple):
    """What a path is planned for."""

    mount: Mount
    clearance: Clearance
    objective: Objective
    half_beam_deg: float


def steer(course: Course, branch: IntArray, aim: Aim) -> Motions:
    """Both joints at the samples of the course, within their limits, near to its branches.

    A joint that comes to rest at an end of its travel may swing out between two samples; then the
    path is planned again with as much less travel.
    """
    mount = aim.mount
    motions = _steered(course, branch, aim)
    for _ in range(TRIES):
        first, second = mount.first, mount.second
        swing_deg = (
            _swing_deg(motions.first_deg, motions.first_rate_deg_s, aim.mount.first, course.step_s),
            _swing_deg(
                motions.second_deg, motions.second_rate_deg_s, aim.mount.second, course.step_s
            ),
        )
        if max(swing_deg) < ROUNDING_DEG:
            break
        mount = replace(
            mount,
            first=replace(first, margin_deg=first.margin_deg + 2.0 * swing_deg[0]),
            second=replace(second, margin_deg=second.margin_deg + 2.0 * swing_deg[1]),
        )
        motions = _steered(course, branch, aim._replace(mount=mount))
    return motions


def _swing_deg(
    angle_deg: FloatArray, rate_deg_s: FloatArray, limits: JointLimits, step_s: float
) -> float:
    """How far a joint leaves its travel, between its samples too."""
    fine_deg, _ = refined(angle_deg, rate_deg_s, step_s, FINE_PARTS)
    below_deg = limits.soft_lower_deg - float(fine_deg.min())
    above_deg = float(fine_deg.max()) - limits.soft_upper_deg
    return max(below_deg, above_deg, 0.0)


def _steered(course: Course, branch: IntArray, aim: Aim) -> Motions:
    mount, step_s = aim.mount, course.step_s
    exact = motions_on(course.motions, branch, mount.second)
    first = _held(exact.first_deg, exact.first_rate_deg_s, mount.first)
    is_smooth = smooth_steps(*first, mount.first, step_s) & (np.diff(branch) == 0)
    for window in windows_round(is_smooth, mount.first, step_s):
        _steer_first(*first, course, branch, window, aim)
    second = _held(*_second_for(first[0], exact, course, aim), mount.second)
    is_smooth = smooth_steps(*second, mount.second, step_s)
    for window in windows_round(is_smooth, mount.second, step_s):
        _steer_second(*second, step_s, window, mount.second)
    return Motions(first[0], second[0], first[1], second[1])


def _held(
    angle_deg: FloatArray, rate_deg_s: FloatArray, limits: JointLimits
) -> tuple[FloatArray, FloatArray]:
    """Angles and rates of a joint that waits at the end of its travel where it would be beyond."""
    held_deg = np.clip(angle_deg, limits.soft_lower_deg, limits.soft_upper_deg)
    return held_deg, np.where(held_deg == angle_deg, rate_deg_s, 0.0)


def _steer_first(
    first_deg: FloatArray,
    first_rate: FloatArray,
    course: Course,
    branch: IntArray,
    window: Window,
    aim: Aim,
    stride: int | None = None,
) -> None:
    """Replace the samples of a window by the best way through it, stepping by `stride` samples."""
    begin, last = window
    step = stride or stride_for(last - begin)
    last = begin + (last - begin) // step * step
    picked = slice(begin, last + 1, step)
    start = (float(first_deg[begin]), float(first_rate[begin])) if begin > 0 else None
    keyhole = Keyhole(
        Motions(*(field[picked] for field in course.motions)),
        branch[picked],
        aim.mount,
        step * course.step_s,
        start,
    )
    if begin > 0 and not keyhole.can_keep(180.0):  # it has to leave the target even earlier
        _steer_first(first_deg, first_rate, course, branch, (0, last), aim)
        return
    if stride is None and step > 1 and keyhole.can_keep(FINE_DEG):
        _steer_first(first_deg, first_rate, course, branch, window, aim, stride=1)
        return
    way = np.array(keyhole.way(aim.objective, aim.half_beam_deg))
    angle, rate = refined(way[:, 0], way[:, 1], step * course.step_s, step)
    first_deg[begin : last + 1], first_rate[begin : last + 1] = angle, rate
    _catch_up_after(last, first_deg, first_rate, aim.mount.first, course.step_s)


def _second_for(
    first_deg: FloatArray, exact: Motions, course: Course, aim: Aim
) -> tuple[FloatArray, FloatArray]:
    """Angle and rate of the second joint that serve best with the first one where it is."""
    best_deg = best_second_deg(first_deg, course.motions, aim.mount, aim.clearance)
    is_off = np.abs(first_deg - exact.first_deg) > EXACT_DEG
    slope = np.gradient(best_deg, course.step_s)
    return (
        np.where(is_off, best_deg, exact.second_deg),
        np.where(is_off, slope, exact.second_rate_deg_s),
    )


def _steer_second(
    second_deg: FloatArray,
    second_rate: FloatArray,
    step_s: float,
    window: Window,
    limits: JointLimits,
) -> None:
    """Replace the samples of a window by the nearest that the joint can fly."""
    begin, last = window
    part = slice(begin, last + 1)
    wanted_deg = second_deg[part]
    goals = list(zip(wanted_deg.tolist(), second_rate[part].tolist(), strict=True))

    def states_within(off_deg: float) -> list[Polygon] | None:
        lower_deg, upper_deg = walls(wanted_deg, off_deg, limits)
        states = passable_states(lower_deg.tolist(), upper_deg.tolist(), limits, step_s)
        is_on_the_way = begin == 0 or states is None or contains(states[0], goals[0])
        return states if is_on_the_way else None

    off_deg = bisected(lambda each: states_within(each) is not None, 0.0, 360.0, SMALL_DEG, 0.05)
    states = states_within(off_deg)
    if states is None:  # it would have had to leave its goals even earlier
        _steer_second(second_deg, second_rate, step_s, (0, last), limits)
        return
    start = nearest_state(states[0], goals[0])
    way = np.array(list(follow(start, goals, states, limits, step_s)))
    second_deg[part], second_rate[part] = way[:, 0], way[:, 1]
    _catch_up_after(last, second_deg, second_rate, limits, step_s)


def _catch_up_after(
    last: int, angle: FloatArray, rate: FloatArray, limits: JointLimits, step_s: float
) -> None:
    """Where a way has not met its goal at its end, lead it there."""
    goals = list(zip(angle[last + 1 :].tolist(), rate[last + 1 :].tolist(), strict=True))
    way = catch_up((float(angle[last]), float(rate[last])), goals, limits, step_s)
    for index, state in enumerate(way, start=last + 1):
        angle[index], rate[index] = state
