"""The simulated mount as steel and controller: orders take effect late, and expire.

Pure: the second is an argument, never earlier than that of the call before.
"""

from collections import deque
from math import inf
from typing import NamedTuple

from trunnion_drivers.interface.values import DriverMotion
from trunnion_drivers.simulator.joint import SimulatedJoint


class _Due(NamedTuple):
    """An order under way to the controller; None brings both joints to rest."""

    due_s: float
    goal: DriverMotion | None


class SimulatedMount:
    """Two joints behind one controller.

    An order takes effect `latency_s` after it was given. A goal not renewed within `watchdog_s`
    ends in rest, as it would with a controller that misses its master.
    """

    def __init__(
        self, first: SimulatedJoint, second: SimulatedJoint, latency_s: float, watchdog_s: float
    ) -> None:
        self._joints = (first, second)
        self._latency_s = latency_s
        self._watchdog_s = watchdog_s
        self._under_way: deque[_Due] = deque()
        self._expires_s = inf

    def move(self, mono_s: float, goal: DriverMotion) -> None:
        """Make for the goal, which moves on with its rates from the second it takes effect."""
        self._under_way.append(_Due(mono_s + self._latency_s, goal))

    def halt(self, mono_s: float) -> None:
        """Bring both joints to rest."""
        self._under_way.append(_Due(mono_s + self._latency_s, None))

    def motion(self, mono_s: float) -> DriverMotion:
        """True angles (deg) and rates (deg/s) of both joints at this second."""
        self._advance(mono_s)
        first_deg, first_rate = self._joints[0].at(mono_s)
        second_deg, second_rate = self._joints[1].at(mono_s)
        return DriverMotion(first_deg, second_deg, first_rate, second_rate)

    def is_at_stop(self, mono_s: float) -> bool:
        """Whether a joint leans on one of its hard stops."""
        self._advance(mono_s)
        return any(joint.is_at_stop(mono_s) for joint in self._joints)

    def _advance(self, mono_s: float) -> None:
        while self._under_way and self._under_way[0].due_s <= mono_s:
            due_s, goal = self._under_way.popleft()
            self._expire(due_s)
            if goal is None:
                self._rest(due_s)
            else:
                self._take_up(due_s, goal)
        self._expire(mono_s)

    def _take_up(self, due_s: float, goal: DriverMotion) -> None:
        self._joints[0].go_to(due_s, goal.first_deg, goal.first_rate_deg_s)
        self._joints[1].go_to(due_s, goal.second_deg, goal.second_rate_deg_s)
        self._expires_s = due_s + self._watchdog_s

    def _expire(self, mono_s: float) -> None:
        if mono_s > self._expires_s:
            self._rest(self._expires_s)

    def _rest(self, mono_s: float) -> None:
        for joint in self._joints:
            joint.stop(mono_s)
        self._expires_s = inf
