"""Where one joint is at any instant: stretches of even acceleration, solved in closed form.

A course is a pure function of time, so that how often it is looked at changes nothing. The one that
leads to a goal is the time-optimal one of a double integrator with bounded rate and acceleration:
accelerate, cruise, decelerate, then stay with the goal.
"""

from math import inf, sqrt
from typing import NamedTuple


class Leg(NamedTuple):
    """Even acceleration (deg/s²) from this second on, begun at this angle (deg) and rate."""

    begin_s: float
    angle_deg: float
    rate_deg_s: float
    acceleration_deg_s2: float = 0.0

    def at(self, mono_s: float) -> tuple[float, float]:
        """Angle (deg) and rate (deg/s) at this second."""
        t = mono_s - self.begin_s
        change = self.acceleration_deg_s2 * t
        return self.angle_deg + (self.rate_deg_s + 0.5 * change) * t, self.rate_deg_s + change

    def then(self, begin_s: float, acceleration_deg_s2: float) -> "Leg":
        """The leg that takes over from this one at that second."""
        return Leg(begin_s, *self.at(begin_s), acceleration_deg_s2)

    def rest_s(self) -> float:
        """The second, perhaps past, at which the rate passes zero; infinite where it never does."""
        if self.acceleration_deg_s2 == 0.0:
            return inf
        return self.begin_s - self.rate_deg_s / self.acceleration_deg_s2

    def until_s(self, angle_deg: float) -> float:
        """Seconds from the beginning until the angle is first reached; infinite for never."""
        ahead, rate, acceleration = (
            angle_deg - self.angle_deg,
            self.rate_deg_s,
            self.acceleration_deg_s2,
        )
        if acceleration == 0.0:
            roots: tuple[float, ...] = (ahead / rate,) if rate != 0.0 else ()
        else:
            radicand = rate * rate + 2.0 * acceleration * ahead
            root = sqrt(radicand) if radicand >= 0.0 else inf
            roots = ((-rate - root) / acceleration, (-rate + root) / acceleration)
        return min((t for t in roots if t >= 0.0), default=inf)


class Course(NamedTuple):
    """Legs in the order of their beginnings; the last one never ends."""

    legs: tuple[Leg, ...]

    def turns(self, from_s: float, until_s: float) -> list[float]:
        """Seconds in between at which the joint may turn back, in order."""
        seconds = [s for leg in self.legs for s in (leg.begin_s, leg.rest_s())]
        return sorted(s for s in seconds if from_s < s < until_s)

    def reaches_s(self, angle_deg: float) -> float:
        """The second at which the angle is first reached; infinite for never."""
        ends_s = [leg.begin_s for leg in self.legs[1:]] + [inf]
        for leg, end_s in zip(self.legs, ends_s, strict=True):
            at_s = leg.begin_s + leg.until_s(angle_deg)
            if at_s <= end_s and at_s < inf:
                return at_s
        return inf

    def at(self, mono_s: float) -> tuple[float, float]:
        """Angle (deg) and rate (deg/s) at this second, no earlier than the course begins."""
        for leg in reversed(self.legs):
            if leg.begin_s <= mono_s:
                return leg.at(mono_s)
        return self.legs[0].at(self.legs[0].begin_s)

    def heads_s(self, sense: float) -> float:
        """The second at which it first moves this way (1 up, -1 down); infinite for never."""
        for leg in self.legs:
            if (leg.rate_deg_s or leg.acceleration_deg_s2) * sense > 0.0:
                return leg.begin_s
        return inf


class Bounds(NamedTuple):
    """The highest rate (deg/s) and acceleration (deg/s²) of a joint, both above zero."""

    rate_deg_s: float
    acceleration_deg_s2: float


def cut_short(course: Course, mono_s: float, bounds: Bounds) -> Course:
    """The same course until that second, then to rest at full deceleration."""
    kept = tuple(leg for leg in course.legs if leg.begin_s < mono_s) or course.legs[:1]
    rest = course_to_rate(Leg(mono_s, *kept[-1].at(mono_s)), 0.0, bounds)
    return Course(kept + rest.legs)


def resting_course(mono_s: float, angle_deg: float) -> Course:
    """Stay here."""
    return Course((Leg(mono_s, angle_deg, 0.0),))


def course_to_rate(start: Leg, rate_deg_s: float, bounds: Bounds) -> Course:
    """Change from the start to this rate, kept within the bounds, and keep it."""
    rate = min(max(rate_deg_s, -bounds.rate_deg_s), bounds.rate_deg_s)
    change = rate - start.rate_deg_s
    acceleration = bounds.acceleration_deg_s2 if change > 0.0 else -bounds.acceleration_deg_s2
    changing = start._replace(acceleration_deg_s2=acceleration)
    end_s = start.begin_s + change / acceleration
    return Course((changing, Leg(end_s, changing.at(end_s)[0], rate)))


def course_to_goal(start: Leg, goal_deg: float, goal_rate_deg_s: float, bounds: Bounds) -> Course:
    """Reach, soonest, a goal that stands at `goal_deg` when the course begins and moves evenly.

    A goal faster than the highest rate is followed at the highest rate.
    """
    goal_rate = min(max(goal_rate_deg_s, -bounds.rate_deg_s), bounds.rate_deg_s)
    goal = Leg(start.begin_s, goal_deg, goal_rate)
    ahead, closing = goal_deg - start.angle_deg, start.rate_deg_s - goal_rate
    if ahead == 0.0 and closing == 0.0:
        return Course((goal,))
    acceleration = bounds.acceleration_deg_s2
    is_up = ahead > closing * abs(closing) / (2.0 * acceleration)
    sign = 1.0 if is_up else -1.0
    fastest = bounds.rate_deg_s - sign * goal_rate
    rush = _rush(sign * ahead, sign * closing, fastest, acceleration)
    return _in_legs(start, goal, sign * acceleration, rush)


class _Rush(NamedTuple):
    """How long to accelerate, to cruise and to decelerate, in seconds."""

    accelerating_s: float
    cruising_s: float
    decelerating_s: float


def _rush(ahead: float, closing: float, fastest: float, acceleration: float) -> _Rush:
    """Close the distance ahead, seen from the goal; `closing` is the rate of closing at first."""
    peak = sqrt(max(0.0, acceleration * ahead + 0.5 * closing * closing))
    cruising_s = 0.0
    if peak > fastest:
        peak = fastest
        left = ahead - (2.0 * peak * peak - closing * closing) / (2.0 * acceleration)
        cruising_s = left / peak if peak > 0.0 else inf
    return _Rush(max(0.0, (peak - closing) / acceleration), cruising_s, peak / acceleration)


def _in_legs(start: Leg, goal: Leg, acceleration: float, rush: _Rush) -> Course:
    first = start._replace(acceleration_deg_s2=acceleration)
    cruise = first.then(start.begin_s + rush.accelerating_s, 0.0)
    if rush.cruising_s == inf:
        return Course((first, cruise))
    last = cruise.then(cruise.begin_s + rush.cruising_s, -acceleration)
    arrival_s = last.begin_s + rush.decelerating_s
    return Course((first, cruise, last, goal.then(arrival_s, 0.0)))
