"""A clear way for the mount from one place to another: below nothing, through nothing.

Straight there where that is clear; else one joint at a time, the first one while the second stands
at a height from which the whole turn is clear; else the second one while the first stands aside.
"""

from collections.abc import Iterator

from trunnion.mount.clearance import Clearance
from trunnion.mount.joints import Joints
from trunnion.mount.motion import slew_time_s
from trunnion.mount.mount import JointLimits, Mount
from trunnion.track.clear_box import is_box_clear

VIA_STEP_DEG = 2.0
"""Spacing of the heights, and of the places aside, at which a detour is tried."""


class NoWay(ValueError):  # noqa: N818 - named for what was found
    """No clear way leads there."""


def transit(start: Joints, goal: Joints, mount: Mount, clearance: Clearance) -> tuple[Joints, ...]:
    """Way-points from `start` (left out) to `goal` (the last), clear all the way.

    The mount rests at each; of the ways tried, the quickest. A start that is not clear itself does
    not count against a way that leads straight out. Raises NoWay.
    """
    if is_box_clear(start, goal, mount, clearance):
        return (goal,)
    for detours in (_over, _beside):
        ways = [
            way
            for way in detours(start, goal, mount)
            if _is_way_clear(start, way, mount, clearance)
        ]
        if ways:
            break
    else:
        raise NoWay(
            f"expected a clear way from {_place(start)} to {_place(goal)}, "
            "got none past floor, horizon mask and keep-outs"
        )
    return min(ways, key=lambda way: transit_time_s(start, way, mount))


def transit_time_s(start: Joints, waypoints: tuple[Joints, ...], mount: Mount) -> float:
    """Time from rest to rest along these way-points, both joints at full rate."""
    seconds = 0.0
    for waypoint in waypoints:
        seconds += max(
            slew_time_s(waypoint.first_deg - start.first_deg, mount.first),
            slew_time_s(waypoint.second_deg - start.second_deg, mount.second),
        )
        start = waypoint
    return seconds


def _over(start: Joints, goal: Joints, mount: Mount) -> Iterator[tuple[Joints, ...]]:
    """Ways on which the first joint turns while the second stands at one height."""
    for height_deg in (start.second_deg, goal.second_deg, *_throughout(mount.second)):
        corners = (
            Joints(start.first_deg, height_deg),
            Joints(goal.first_deg, height_deg),
            goal,
        )
        yield tuple(_without_repeats(start, corners))


def _beside(start: Joints, goal: Joints, mount: Mount) -> Iterator[tuple[Joints, ...]]:
    """Ways on which the second joint turns while the first stands aside."""
    for aside_deg in _throughout(mount.first):
        corners = (
            Joints(aside_deg, start.second_deg),
            Joints(aside_deg, goal.second_deg),
            goal,
        )
        yield tuple(_without_repeats(start, corners))


def _throughout(joint: JointLimits) -> Iterator[float]:
    yield joint.upper_deg
    angle_deg = joint.lower_deg
    while angle_deg < joint.upper_deg:
        yield angle_deg
        angle_deg += VIA_STEP_DEG


def _without_repeats(start: Joints, corners: tuple[Joints, ...]) -> Iterator[Joints]:
    for corner in corners:
        if corner != start:
            yield corner
        start = corner


def _is_way_clear(
    start: Joints, way: tuple[Joints, ...], mount: Mount, clearance: Clearance
) -> bool:
    places = (start, *way)
    return all(
        is_box_clear(one, other, mount, clearance) for one, other in zip(places, way, strict=False)
    )


def _place(joints: Joints) -> str:
    return f"{joints.first_deg:.1f}°/{joints.second_deg:.1f}°"
