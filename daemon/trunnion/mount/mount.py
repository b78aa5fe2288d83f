"""One mount as a value: its hinges, what each joint can do, where it parks."""

from dataclasses import dataclass

from trunnion.mount.hinges import Hinges
from trunnion.mount.joints import Joints


@dataclass(frozen=True, slots=True)
class JointLimits:
    """What one joint can do: travel from lower to upper (deg), rate (deg/s), acceleration (deg/s²).

    The lower end is below the upper, rate and acceleration are above zero; the travel may be more
    than one turn.
    """

    lower_deg: float
    upper_deg: float
    rate_deg_s: float
    acceleration_deg_s2: float


@dataclass(frozen=True, slots=True)
class Mount:
    """A two-axis mount: geometry, the limits of both joints, the stow position."""

    hinges: Hinges
    first: JointLimits
    second: JointLimits
    stow: Joints
