"""Position commands for a controller that is late, coarse, or brakes for every goal."""

from dataclasses import dataclass
from math import inf, sqrt

from trunnion_drivers.interface.values import JointFacts

_LONGEST_INTERVAL_S = 1.0  # between two orders of one motion; a longer pause is the end of it


@dataclass(frozen=True, slots=True)
class PositionSettings:
    """What is known of a joint's controller.

    `latency_s` passes between an order and its effect. `step_deg` is the least change that it can
    carry out; 0 for none. `follows_rate` says that it goes on at the ordered rate by itself.
    """

    latency_s: float = 0.0
    step_deg: float = 0.0
    follows_rate: bool = True


class PositionLaw:
    """Says what to order of one joint, so that its mean error is least.

    A joint that takes every goal for one at rest brakes for it, and would lag by its stopping
    distance and by half the time between orders: the order leads by as much. A coarse one is sent
    the whole step nearest to its goal.
    """

    def __init__(self, settings: PositionSettings, joint: JointFacts) -> None:
        self._settings = settings
        self._joint = joint
        self._ordered_s = -inf

    def order_deg(self, mono_s: float, goal_deg: float, goal_rate_deg_s: float) -> float:
        """The angle to order now, within the travel."""
        lead_s = self._settings.latency_s
        if not self._settings.follows_rate:
            lead_s += self._braking_s(goal_rate_deg_s) + self._half_interval_s(mono_s)
        self._ordered_s = mono_s
        return self._nearest_step_deg(self._within_travel(goal_deg + goal_rate_deg_s * lead_s))

    def forget(self) -> None:
        """What was ordered no longer holds: the joint was halted."""
        self._ordered_s = -inf

    def _braking_s(self, goal_rate_deg_s: float) -> float:
        """How late it is on average: its stopping distance, or half the time of a single step."""
        acceleration = self._joint.acceleration_deg_s2
        stopping_s = 0.5 * abs(goal_rate_deg_s) / acceleration
        return max(stopping_s, sqrt(self._settings.step_deg / acceleration))

    def _half_interval_s(self, mono_s: float) -> float:
        interval_s = mono_s - self._ordered_s
        return 0.5 * interval_s if interval_s <= _LONGEST_INTERVAL_S else 0.0

    def _within_travel(self, angle_deg: float) -> float:
        return min(max(angle_deg, self._joint.lower_deg), self._joint.upper_deg)

    def _nearest_step_deg(self, angle_deg: float) -> float:
        step_deg = self._settings.step_deg
        if step_deg <= 0.0:
            return angle_deg
        nearest_deg = round(angle_deg / step_deg) * step_deg
        is_reachable = self._joint.lower_deg <= nearest_deg <= self._joint.upper_deg
        return nearest_deg if is_reachable else angle_deg
