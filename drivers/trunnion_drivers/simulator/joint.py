"""One simulated joint: a motor on its course, a gear with play, limit switches and hard stops."""

from dataclasses import dataclass
from math import inf
from typing import NamedTuple

from trunnion_drivers.simulator.course import (
    Bounds,
    Course,
    Leg,
    course_to_goal,
    course_to_rate,
    cut_short,
    resting_course,
)
from trunnion_drivers.simulator.play import Play


@dataclass(frozen=True, slots=True)
class JointBuild:
    """How a joint is made, all in degrees.

    Static friction holds a motor at rest against a goal that within a second is no farther away
    than `breakaway_deg`, and against a rate below `breakaway_rate_deg_s`. `run_on_deg` is how far
    it coasts from its highest rate once switched off; without it the motor brakes at full
    deceleration. Beyond its switches it moves no further out; its hard stops hold it at once.
    Without `follows_rate` a goal
    is taken to stand still.
    """

    bounds: Bounds
    switches_deg: tuple[float, float]
    stops_deg: tuple[float, float]
    backlash_deg: float = 0.0
    breakaway_deg: float = 0.0
    breakaway_rate_deg_s: float = 0.0
    run_on_deg: float = 0.0
    follows_rate: bool = True

    @property
    def coasting(self) -> Bounds:
        """The bounds while it comes to rest."""
        if self.run_on_deg <= 0.0:
            return self.bounds
        rate = self.bounds.rate_deg_s
        return Bounds(rate, rate**2 / (2 * self.run_on_deg))


class JointState(NamedTuple):
    """Where a joint is (deg) and how fast (deg/s): at the motor, and at the antenna."""

    motor_deg: float
    motor_rate_deg_s: float
    antenna_deg: float
    antenna_rate_deg_s: float


class SimulatedJoint:
    """A joint at rest at first; seconds given to it never go back."""

    def __init__(self, mono_s: float, angle_deg: float, build: JointBuild) -> None:
        self._build = build
        self._course: Course = resting_course(mono_s, angle_deg)
        self._play = Play(build.backlash_deg, angle_deg)
        self._seen_s = mono_s
        self._is_cut = False

    def at(self, mono_s: float) -> JointState:
        """Where it is at this second."""
        motor_deg, rate = self._motor(mono_s)
        if self._build.backlash_deg <= 0.0:
            return JointState(motor_deg, rate, motor_deg, rate)
        for turn_s in self._course.turns(self._seen_s, mono_s):
            self._play.follow(self._motor(turn_s)[0])
        self._seen_s = mono_s
        antenna_deg = self._play.follow(motor_deg)
        carried = rate if self._play.carries(motor_deg, rate) else 0.0
        return JointState(motor_deg, rate, antenna_deg, carried)

    def is_at_switch(self, state: JointState) -> bool:
        """Whether it has run onto one of its limit switches there."""
        lowest, highest = self._build.switches_deg
        return not lowest < state.motor_deg < highest

    def go_to(self, mono_s: float, goal_deg: float, goal_rate_deg_s: float) -> None:
        """From this second on, make for a goal that moves evenly, and stay with it."""
        start = self._start(mono_s)
        rate_deg_s = goal_rate_deg_s if self._build.follows_rate else 0.0
        pull_deg = max(abs(goal_deg - start.angle_deg), abs(rate_deg_s))
        if start.rate_deg_s == 0.0 and pull_deg < self._build.breakaway_deg:
            return
        self._take(course_to_goal(start, goal_deg, rate_deg_s, self._build.bounds))

    def run_at(self, mono_s: float, rate_deg_s: float) -> None:
        """From this second on, move at this rate; a rate of zero lets the joint come to rest."""
        start = self._start(mono_s)
        if start.rate_deg_s == 0.0 and abs(rate_deg_s) < self._build.breakaway_rate_deg_s:
            return
        bounds = self._build.bounds if rate_deg_s != 0.0 else self._build.coasting
        self._take(course_to_rate(start, rate_deg_s, bounds))

    def seize(self, mono_s: float) -> None:
        """Stand still at once, as a jammed gear does."""
        self._take(resting_course(mono_s, self._motor(mono_s)[0]))

    def _start(self, mono_s: float) -> Leg:
        motor_deg, rate_deg_s, _, _ = self.at(mono_s)
        return Leg(mono_s, motor_deg, rate_deg_s)

    def _motor(self, mono_s: float) -> tuple[float, float]:
        angle_deg, rate_deg_s = self._course.at(mono_s)
        lowest, highest = self._build.switches_deg
        if lowest < angle_deg < highest:
            return angle_deg, rate_deg_s
        self._cut_at_switches()
        angle_deg, rate_deg_s = self._course.at(mono_s)
        lowest, highest = self._build.stops_deg
        if lowest < angle_deg < highest:
            return angle_deg, rate_deg_s
        return min(max(angle_deg, lowest), highest), 0.0

    def _take(self, course: Course) -> None:
        self._course = course
        self._is_cut = False

    def _cut_at_switches(self) -> None:
        """End the course where it runs onto a switch, or further out beyond one."""
        if self._is_cut:
            return
        self._is_cut = True
        start_deg = self._course.legs[0].angle_deg
        lowest, highest = self._build.switches_deg
        cut_s = min(
            self._course.reaches_s(lowest) if start_deg > lowest else self._course.heads_s(-1.0),
            self._course.reaches_s(highest) if start_deg < highest else self._course.heads_s(1.0),
        )
        if cut_s < inf:
            self._course = cut_short(self._course, cut_s, self._build.bounds)
