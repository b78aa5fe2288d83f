"""The two joints of a mount: angles, motion, readings. Standard library only."""

from typing import NamedTuple


class Joints(NamedTuple):
    """Both joint angles in degrees, in the mount's own travel (a turn more is another value)."""

    first_deg: float
    second_deg: float


class Motion(NamedTuple):
    """Both joint angles (degrees) and their rates (degrees per second) at one instant."""

    first_deg: float
    second_deg: float
    first_rate_deg_s: float = 0.0
    second_rate_deg_s: float = 0.0

    @property
    def joints(self) -> Joints:
        """The angles alone."""
        return Joints(self.first_deg, self.second_deg)


class Reading(NamedTuple):
    """What the mount said of itself: joint angles, and the monotonic second they were true at."""

    taken_s: float
    first_deg: float
    second_deg: float

    @property
    def joints(self) -> Joints:
        """The angles alone."""
        return Joints(self.first_deg, self.second_deg)
