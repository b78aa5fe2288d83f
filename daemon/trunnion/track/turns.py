"""Which turn of the first joint, and which of both solutions, serves a stretch of a contact.

A contact that fits into the travel on one turn is never interrupted by an unwinding. One that fits
on none is cut where the longest part fits; the rest is served after the mount has turned back.
"""

from collections.abc import Iterator
from typing import NamedTuple

import numpy as np

from trunnion.mount.joints import Joints
from trunnion.mount.mount import JointLimits, Mount
from trunnion.sky.look import FloatArray, Target
from trunnion.track.direct import DirectPath
from trunnion.track.stretches import Stretch, grid

SHORTEST_S = 5.0
"""What is left of a stretch after cutting is served from this length on."""


class Leg(NamedTuple):
    """A part of a stretch that is flown without a break."""

    begin_s: float
    end_s: float
    path: DirectPath


class _Course(NamedTuple):
    """Both joints at the instants of the grid, on one turn and one solution; where they fit."""

    is_tipped: bool
    first_deg: FloatArray
    second_deg: FloatArray
    fits: np.ndarray


def plan_legs(target: Target, stretch: Stretch, mount: Mount, start: Joints) -> tuple[Leg, ...]:
    """The legs that serve a stretch, in order of time; none where nothing fits the travel."""
    return tuple(sorted(_legs(target, stretch, mount, start), key=lambda leg: leg.begin_s))


def _legs(target: Target, stretch: Stretch, mount: Mount, start: Joints) -> Iterator[Leg]:
    times = grid(*stretch)
    courses = [(course, *_longest_run(course.fits)) for course in _courses(target, times, mount)]
    if not courses:
        return
    course, begin, end = min(
        courses, key=lambda each: (each[1] - each[2], _distance_deg(each[0], each[1], start))
    )
    if end == begin:
        return
    begin_s, end_s = float(times[begin]), float(times[end - 1])
    path = DirectPath(
        target,
        mount.hinges,
        course.is_tipped,
        tuple(times[begin:end].tolist()),
        tuple(course.first_deg[begin:end].tolist()),
    )
    yield Leg(begin_s, end_s, path)
    for rest in (Stretch(stretch.begin_s, begin_s), Stretch(end_s, stretch.end_s)):
        if rest.end_s - rest.begin_s >= SHORTEST_S and end_s - begin_s >= SHORTEST_S:
            yield from _legs(target, rest, mount, start)


def _courses(target: Target, times: FloatArray, mount: Mount) -> Iterator[_Course]:
    looks = target.looks(times)
    directions = list(zip(looks.azimuth_deg.tolist(), looks.elevation_deg.tolist(), strict=True))
    both = [mount.hinges.solutions(*each) for each in directions]
    for is_tipped in (False, True):
        first_deg = np.unwrap([pair[is_tipped].first_deg for pair in both], period=360.0)
        second_deg = np.array([pair[is_tipped].second_deg for pair in both])
        for turn in _turns(first_deg, mount):
            turned_deg = first_deg + 360.0 * turn
            fits = _within(turned_deg, mount.first) & _within(second_deg, mount.second)
            yield _Course(is_tipped, turned_deg, second_deg, fits)


def _turns(first_deg: FloatArray, mount: Mount) -> range:
    lowest = np.floor((mount.first.lower_deg - first_deg.max()) / 360.0)
    highest = np.ceil((mount.first.upper_deg - first_deg.min()) / 360.0)
    return range(int(lowest), int(highest) + 1)


def _within(angle_deg: FloatArray, limits: JointLimits) -> np.ndarray:
    return (angle_deg >= limits.lower_deg) & (angle_deg <= limits.upper_deg)


def _longest_run(fits: np.ndarray) -> tuple[int, int]:
    """Begin and end (one past the last) of the longest run of True."""
    padded = np.concatenate(([False], fits, [False]))
    begins = np.flatnonzero(padded[1:] & ~padded[:-1])
    ends = np.flatnonzero(~padded[1:] & padded[:-1])
    if begins.size == 0:
        return 0, 0
    longest = int(np.argmax(ends - begins))
    return int(begins[longest]), int(ends[longest])


def _distance_deg(course: _Course, at: int, start: Joints) -> float:
    at = min(at, len(course.first_deg) - 1)
    return float(
        max(
            abs(course.first_deg[at] - start.first_deg),
            abs(course.second_deg[at] - start.second_deg),
        )
    )
