"""Moves a mount for commissioning: slowly unless told otherwise, and at rest at any key."""

from typing import NamedTuple

from trunnion_drivers.commission.operator import Operator
from trunnion_drivers.commission.samples import Sample
from trunnion_drivers.interface.driver import Driver
from trunnion_drivers.interface.values import Clock, DriverMotion, MountFacts

TICK_S = 0.1
CREEP_DEG_S = 1.0
"""Slow enough to step away from, where the mount can do more."""

_SETTLING_S = 1.5


class Stopped(Exception):  # noqa: N818 - named for what happened
    """The operator has pressed a key; the mount was halted."""


class Place(NamedTuple):
    """Where both joints are read to be (deg)."""

    first_deg: float
    second_deg: float

    def by(self, joint: int, angle_deg: float) -> "Place":
        """This far from here in one joint (0 or 1)."""
        angles = [self.first_deg, self.second_deg]
        angles[joint] += angle_deg
        return Place(*angles)


class Mover:
    """Every motion of commissioning goes through here."""

    def __init__(
        self,
        driver: Driver,
        facts: MountFacts,
        clock: Clock,
        operator: Operator,
        creep_deg_s: float = CREEP_DEG_S,
    ) -> None:
        self._creep_deg_s = creep_deg_s
        self._driver = driver
        self._clock = clock
        self._operator = operator
        self._joints = (facts.first, facts.second)

    def place(self) -> Place:
        """Where the mount is read to be now."""
        reading = self._driver.read()
        return Place(reading.first_deg, reading.second_deg)

    def rest(self, joint: int, lasts_s: float) -> list[Sample]:
        """Halt, and read one joint (0 or 1) for a while."""
        self._driver.halt()
        return self._watch(joint, lasts_s)

    def creep(self, goal: Place, joint: int) -> list[Sample]:
        """Go there slowly, and read one joint on the way. Raises Stopped."""
        here = self.place()
        lasts_s = self._creep_s(here, goal)
        begin_s = self._clock.monotonic_s()
        samples = [self._sample(joint)]
        while (since_s := self._clock.monotonic_s() - begin_s) < lasts_s + _SETTLING_S:
            self._driver.move(_on_the_way(here, goal, since_s, lasts_s))
            samples.append(self._sample(joint))
            self._pause()
        self._driver.halt()
        samples.append(self._sample(joint))
        return samples

    def dash(self, goal: Place, joint: int, lasts_s: float) -> tuple[float, list[Sample]]:
        """Go there as fast as it can for this long; when it was ordered, and what was read.

        The mount still moves when this returns. Raises Stopped.
        """
        samples = [self._sample(joint)]
        ordered_s = self._clock.monotonic_s()
        while self._clock.monotonic_s() - ordered_s < lasts_s:
            self._driver.move(DriverMotion(goal.first_deg, goal.second_deg, 0.0, 0.0))
            samples.append(self._sample(joint))
            self._pause()
        return ordered_s, samples

    def _watch(self, joint: int, lasts_s: float) -> list[Sample]:
        begin_s = self._clock.monotonic_s()
        samples = [self._sample(joint)]
        while self._clock.monotonic_s() - begin_s < lasts_s:
            self._pause()
            samples.append(self._sample(joint))
        return samples

    def _sample(self, joint: int) -> Sample:
        reading = self._driver.read()
        return Sample(reading.taken_s, (reading.first_deg, reading.second_deg)[joint])

    def _pause(self) -> None:
        self._clock.sleep(TICK_S)
        if self._operator.wants_stop():
            self._driver.halt()
            raise Stopped("stopped by a key")

    def _creep_s(self, here: Place, goal: Place) -> float:
        """How long both joints take at a creep; the slower one sets the time."""
        joints = zip(self._joints, here, goal, strict=True)
        return max(
            abs(to - at) / min(self._creep_deg_s, 0.5 * joint.rate_deg_s)
            for joint, at, to in joints
        )


def _on_the_way(here: Place, goal: Place, since_s: float, lasts_s: float) -> DriverMotion:
    """Where to be after this much of the time, on a straight way at an even rate."""
    if since_s >= lasts_s:
        return DriverMotion(goal.first_deg, goal.second_deg, 0.0, 0.0)
    share = since_s / lasts_s
    first, second = goal.first_deg - here.first_deg, goal.second_deg - here.second_deg
    return DriverMotion(
        here.first_deg + share * first,
        here.second_deg + share * second,
        first / lasts_s,
        second / lasts_s,
    )
