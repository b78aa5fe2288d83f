"""Where to bring a mount back to that was found outside its limits: the nearest place inside.

Geometry of the joints alone decides, so that it serves every mount.
"""

from collections.abc import Iterator
from itertools import pairwise

from trunnion.mount.joints import Joints
from trunnion.safety.limits import SafetyLimits
from trunnion.safety.places import depth_deg, find_at

LONGEST_DEG = 40.0
"""Whoever is further outside is brought back by hand."""

ROOM_DEG = 0.2
"""So far inside the way ends, with room for the encoder's error."""

_STEP_DEG = 0.25
_DIRECTIONS = ((0, 1), (0, -1), (1, 0), (-1, 0), (1, 1), (1, -1), (-1, 1), (-1, -1))


def find_way_in(place: Joints, limits: SafetyLimits) -> Joints | None:
    """The nearest place inside that a straight way leads to, less outside with every step.

    None where there is no such way, and for a mount that is inside.
    """
    if find_at(place, limits) is None:
        return None
    goals = (_into_the_travel(place, limits), *_around(place))
    return next((goal for goal in goals if _leads_in(place, goal, limits)), None)


def _into_the_travel(place: Joints, limits: SafetyLimits) -> Joints:
    first, second = limits.mount.first, limits.mount.second
    return Joints(
        min(max(place.first_deg, first.lower_deg + ROOM_DEG), first.upper_deg - ROOM_DEG),
        min(max(place.second_deg, second.lower_deg + ROOM_DEG), second.upper_deg - ROOM_DEG),
    )


def _around(place: Joints) -> Iterator[Joints]:
    for step in range(1, int(LONGEST_DEG / _STEP_DEG) + 1):
        for first, second in _DIRECTIONS:
            away_deg = step * _STEP_DEG
            yield Joints(place.first_deg + first * away_deg, place.second_deg + second * away_deg)


def _leads_in(place: Joints, goal: Joints, limits: SafetyLimits) -> bool:
    if find_at(goal, limits, -ROOM_DEG) is not None:
        return False
    depths_deg = [depth_deg(each, limits) for each in _steps(place, goal)]
    return all(later == 0.0 or later < earlier for earlier, later in pairwise(depths_deg))


def _steps(place: Joints, goal: Joints) -> Iterator[Joints]:
    first_deg, second_deg = goal.first_deg - place.first_deg, goal.second_deg - place.second_deg
    count = max(1, round(max(abs(first_deg), abs(second_deg)) / _STEP_DEG))
    for step in range(count + 1):
        share = step / count
        yield Joints(place.first_deg + share * first_deg, place.second_deg + share * second_deg)
