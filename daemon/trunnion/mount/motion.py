"""How a joint gets from one motion to another within its rate and acceleration.

A joint accelerates evenly or not at all; the laws are those of uniform acceleration.
"""

from math import sqrt

from trunnion.mount.joints import Motion
from trunnion.mount.mount import JointLimits, Mount

ROUNDING = 1e-9
"""Share of a limit that rounding may use up."""


def stopping_distance_deg(rate_deg_s: float, limits: JointLimits) -> float:
    """Angle, never negative, covered from this rate to rest at full deceleration."""
    return rate_deg_s * rate_deg_s / (2.0 * limits.acceleration_deg_s2)


def slew_time_s(distance_deg: float, limits: JointLimits) -> float:
    """Least time from rest to rest over this angle, of either sign."""
    distance_deg = abs(distance_deg)
    rate, acceleration = limits.rate_deg_s, limits.acceleration_deg_s2
    if distance_deg <= rate * rate / acceleration:
        return 2.0 * sqrt(distance_deg / acceleration)
    return distance_deg / rate + rate / acceleration


def approach(now: Motion, goal: Motion, mount: Mount, dt_s: float) -> Motion:
    """The motion `dt_s` seconds after `now` that gets both joints to `goal` soonest.

    `goal` is where the joints should be, and how they should move, at the end of the step; it may
    move from step to step. Within the limits of both joints the result lands on the goal exactly
    where one step can do it, follows it exactly from then on, and never overshoots a goal at rest.
    The travel is not looked at: a goal within it is never left on the far side.
    """
    first_deg, first_rate = _step(
        now.first_deg,
        now.first_rate_deg_s,
        goal.first_deg,
        goal.first_rate_deg_s,
        mount.first,
        dt_s,
    )
    second_deg, second_rate = _step(
        now.second_deg,
        now.second_rate_deg_s,
        goal.second_deg,
        goal.second_rate_deg_s,
        mount.second,
        dt_s,
    )
    return Motion(first_deg, second_deg, first_rate, second_rate)


def _step(
    angle: float, rate: float, goal: float, goal_rate: float, limits: JointLimits, dt_s: float
) -> tuple[float, float]:
    """One joint: angle and rate after the step."""
    if _can_land(goal - angle, rate, goal_rate, limits, dt_s):
        return goal, goal_rate
    next_rate = chase_rate_deg_s(angle, rate, goal, goal_rate, limits, dt_s)
    return angle + 0.5 * (rate + next_rate) * dt_s, next_rate


def chase_rate_deg_s(
    angle: float, rate: float, goal: float, goal_rate: float, limits: JointLimits, dt_s: float
) -> float:
    """The rate at the end of a step that closes in on a goal soonest and still stops at it.

    Angles in degrees, rates in degrees per second; `goal` is where the goal is at the end of the
    step. The joint accelerates evenly over the step.
    """
    behind = goal - goal_rate * dt_s - angle
    sign = 1.0 if behind >= 0.0 else -1.0
    closing = _closing_rate(
        abs(behind), sign * (rate - goal_rate), limits.acceleration_deg_s2, dt_s
    )
    reach = limits.acceleration_deg_s2 * dt_s
    wanted = min(max(goal_rate + sign * closing, rate - reach), rate + reach)
    return min(max(wanted, -limits.rate_deg_s), limits.rate_deg_s)


def _can_land(
    distance: float, rate: float, goal_rate: float, limits: JointLimits, dt_s: float
) -> bool:
    """Whether one step can end on the goal with the goal's rate.

    With both end rates given, accelerating first and decelerating then (or the other way round)
    reaches angles up to `spread` away from that of even acceleration.
    """
    reach = limits.acceleration_deg_s2 * dt_s
    change = goal_rate - rate
    if abs(change) > reach * (1.0 + ROUNDING) or abs(goal_rate) > limits.rate_deg_s:
        return False
    if abs(distance) > limits.rate_deg_s * dt_s * (1.0 + ROUNDING):
        return False
    spread = 0.25 * dt_s * (reach - change * change / reach) if reach > 0.0 else 0.0
    return abs(distance - 0.5 * (rate + goal_rate) * dt_s) <= spread + ROUNDING


def _closing_rate(behind: float, closing: float, acceleration: float, dt_s: float) -> float:
    """Highest rate towards the goal, at the end of the step, that still stops at it.

    After the step the remaining angle is `behind - (closing + next) dt / 2`, and stopping takes
    `next² / 2a`; setting them equal gives a quadratic in `next`.
    """
    half = 0.5 * acceleration * dt_s
    radicand = half * half + acceleration * (2.0 * behind - closing * dt_s)
    return sqrt(radicand) - half if radicand > 0.0 else -half
