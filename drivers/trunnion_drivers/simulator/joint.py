"""One simulated joint: it follows its course until it meets a hard stop."""

from trunnion_drivers.simulator.course import (
    Bounds,
    Course,
    Leg,
    course_to_goal,
    course_to_rate,
    resting_course,
)


class SimulatedJoint:
    """A joint with a motor that obeys its bounds exactly, between two hard stops (deg)."""

    def __init__(
        self, mono_s: float, angle_deg: float, bounds: Bounds, stops_deg: tuple[float, float]
    ) -> None:
        self._bounds = bounds
        self._lowest_deg, self._highest_deg = stops_deg
        self._course: Course = resting_course(mono_s, angle_deg)

    def at(self, mono_s: float) -> tuple[float, float]:
        """True angle (deg) and rate (deg/s); steel that meets a stop stays there at once."""
        angle_deg, rate_deg_s = self._course.at(mono_s)
        if angle_deg < self._lowest_deg:
            return self._lowest_deg, 0.0
        if angle_deg > self._highest_deg:
            return self._highest_deg, 0.0
        return angle_deg, rate_deg_s

    def is_at_stop(self, mono_s: float) -> bool:
        """Whether it leans on a hard stop."""
        return self.at(mono_s)[0] in (self._lowest_deg, self._highest_deg)

    def go_to(self, mono_s: float, goal_deg: float, goal_rate_deg_s: float) -> None:
        """From this second on, make for a goal that moves evenly, and stay with it."""
        start = Leg(mono_s, *self.at(mono_s))
        self._course = course_to_goal(start, goal_deg, goal_rate_deg_s, self._bounds)

    def stop(self, mono_s: float) -> None:
        """From this second on, come to rest at full deceleration."""
        self._course = course_to_rate(Leg(mono_s, *self.at(mono_s)), 0.0, self._bounds)
