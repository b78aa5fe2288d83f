"""A joint flown after a goal as closely as its rate, its acceleration and a corridor allow.

Acceleration is even within a step, except in a step that meets the goal, where it changes evenly.
"""

from collections.abc import Iterator, Sequence

from trunnion.mount.motion import chase_rate_deg_s
from trunnion.mount.mount import JointLimits
from trunnion.track.corridor import State
from trunnion.track.polygon import Polygon, chord, contains

SLACK = 1e-6
"""Share of a limit that rounding may use up."""

ROUNDINGS = (1e-9, 1e-7, 1e-5, 1e-3)
"""Degrees, and degrees per second, by which a state may miss a polygon."""

SWING_DEG = 1e-3
"""How far out of the travel a step may look: planning again takes care of true swings."""


def follow(
    start: State,
    goals: Sequence[State],
    states: Sequence[Polygon],
    limits: JointLimits,
    step_s: float,
) -> Iterator[State]:
    """The states at the instants of a corridor, from one that is passable, near to the goals."""
    now = start
    yield now
    for index, polygon in enumerate(states[1:], start=1):
        if is_smooth(now, goals[index], limits, step_s) and contains(polygon, goals[index]):
            now = goals[index]
        else:
            low, high = _into(polygon, now, limits, step_s)
            now = _closer(now, goals[index : index + 2], limits, step_s, low, high)
        yield now


def catch_up(
    start: State, goals: Sequence[State], limits: JointLimits, step_s: float
) -> Iterator[State]:
    """The states after `start`, with no walls, until a goal is met; one goal for each of them."""
    now, most = start, limits.acceleration_deg_s2
    for index, goal in enumerate(goals):
        if is_smooth(now, goal, limits, step_s):
            yield goal
            return
        now = _closer(now, goals[index : index + 2], limits, step_s, -most, most)
        yield now


def is_smooth(now: State, then: State, limits: JointLimits, step_s: float) -> bool:
    """Whether the cubic between two states stays within travel, rate and acceleration."""
    change = 6.0 * (then[0] - now[0]) / step_s
    begin = (change - 4.0 * now[1] - 2.0 * then[1]) / step_s
    end = (2.0 * now[1] + 4.0 * then[1] - change) / step_s
    most = limits.acceleration_deg_s2 * (1.0 + SLACK)
    middle = 0.5 * change - now[1] - then[1]
    fastest = max(abs(now[1]), abs(then[1]), abs(middle))
    frame = now[0], then[0], now[0] + now[1] * step_s / 3.0, then[0] - then[1] * step_s / 3.0
    return (
        max(abs(begin), abs(end)) <= most
        and fastest <= limits.rate_deg_s * (1.0 + SLACK)
        and min(frame) >= limits.soft_lower_deg - SWING_DEG
        and max(frame) <= limits.soft_upper_deg + SWING_DEG
    )


def _into(polygon: Polygon, now: State, limits: JointLimits, step_s: float) -> tuple[float, float]:
    """The accelerations that lead into a polygon, to rounding, which may add up along its edge."""
    coasting, most = (now[0] + now[1] * step_s, now[1]), limits.acceleration_deg_s2
    for slack in ROUNDINGS:
        found = chord(polygon, coasting, 0.5 * step_s * step_s, step_s, slack)
        if found is not None and found[0] <= most and found[1] >= -most:
            return max(found[0], -most), min(found[1], most)
    return -most, most


def _closer(
    now: State,
    goals: Sequence[State],
    limits: JointLimits,
    step_s: float,
    low: float,
    high: float,
) -> State:
    """The state a step on that closes in on the goal, with an acceleration between two bounds.

    `goals` are those of the end of this step and, if there is one, of the next.
    """
    angle, rate = now
    wish = _landing_in_two(now, goals, limits, step_s)
    if wish is None:
        wish = (chase_rate_deg_s(*now, *goals[0], limits, step_s) - rate) / step_s
    acceleration = min(max(wish, low), high)
    acceleration = min(max(_within_travel(now, acceleration, limits, step_s), low), high)
    return angle + (rate + 0.5 * acceleration * step_s) * step_s, rate + acceleration * step_s


def _landing_in_two(
    now: State, goals: Sequence[State], limits: JointLimits, step_s: float
) -> float | None:
    """The acceleration after which another step of even acceleration ends on the next goal."""
    if len(goals) < 2:
        return None
    angle, rate = goals[1]
    both = (rate - now[1]) / step_s
    path = (angle - now[0] - 2.0 * now[1] * step_s) / (step_s * step_s)
    first = path - 0.5 * both
    most = limits.acceleration_deg_s2
    between = abs(now[1] + first * step_s)
    is_possible = max(abs(first), abs(both - first)) <= most and between <= limits.rate_deg_s
    return first if is_possible else None


def _within_travel(now: State, acceleration: float, limits: JointLimits, step_s: float) -> float:
    """Brake harder where the joint would swing out of its travel and back within the step."""
    angle, rate = now
    if rate * (rate + acceleration * step_s) >= 0.0:
        return acceleration
    end_deg = limits.soft_upper_deg if rate > 0.0 else limits.soft_lower_deg
    room_deg = abs(end_deg - angle)
    if rate * rate <= 2.0 * room_deg * abs(acceleration):
        return acceleration
    most = limits.acceleration_deg_s2
    braking = min(rate * rate / (2.0 * room_deg), most) if room_deg > 0.0 else most
    return -braking if rate > 0.0 else braking
