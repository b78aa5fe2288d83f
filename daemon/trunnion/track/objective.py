"""What makes one joint path better than another."""

from enum import Enum


class Objective(Enum):
    """What planning minimises where the mount cannot follow exactly."""

    TIME_OUTSIDE_BEAM = "time outside the beam"
    """Least time outside the beam; then the least worst loss in that time."""

    WORST_ERROR = "worst error"
    """Least worst pointing error."""
