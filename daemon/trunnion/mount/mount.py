"""One mount as a value: its hinges, what each joint can do, where it parks."""

from dataclasses import dataclass, replace

from trunnion.mount.hinges import Hinges
from trunnion.mount.joints import Joints


@dataclass(frozen=True, slots=True)
class JointLimits:
    """What one joint can do: travel from lower to upper (deg), rate (deg/s), acceleration (deg/s²).

    The lower end is below the upper, rate and acceleration are above zero; the travel may be more
    than one turn. Plans stay `margin_deg` away from both ends.
    """

    lower_deg: float
    upper_deg: float
    rate_deg_s: float
    acceleration_deg_s2: float
    margin_deg: float = 0.0

    @property
    def soft_lower_deg(self) -> float:
        """Lower end of what plans use."""
        return self.lower_deg + self.margin_deg

    @property
    def soft_upper_deg(self) -> float:
        """Upper end of what plans use."""
        return self.upper_deg - self.margin_deg

    def nearest_deg(self, angle_deg: float) -> float:
        """The angle that plans use nearest to this one."""
        return min(max(angle_deg, self.soft_lower_deg), self.soft_upper_deg)


@dataclass(frozen=True, slots=True)
class JointBox:
    """A box of joint angles (deg) that the mount may not enter: a strut, a wall, a cable."""

    name: str
    first_lower_deg: float
    first_upper_deg: float
    second_lower_deg: float
    second_upper_deg: float

    def meets(self, one: Joints, other: Joints) -> bool:
        """Whether any pair of angles between these two places lies in the box."""
        return (
            min(one.first_deg, other.first_deg) <= self.first_upper_deg
            and max(one.first_deg, other.first_deg) >= self.first_lower_deg
            and min(one.second_deg, other.second_deg) <= self.second_upper_deg
            and max(one.second_deg, other.second_deg) >= self.second_lower_deg
        )


@dataclass(frozen=True, slots=True)
class Mount:
    """A two-axis mount: geometry, limits of both joints, stow position, forbidden joint angles."""

    hinges: Hinges
    first: JointLimits
    second: JointLimits
    stow: Joints
    forbidden: tuple[JointBox, ...] = ()

    def with_reserve(self, rate_share: float, acceleration_share: float) -> "Mount":
        """The same mount, asked for these shares of its rates and accelerations.

        A mount hears of every change of motion a control turn late; one that is asked for all it
        can do has nothing left to make up for that, and runs past the place where it should rest.
        """
        return replace(
            self,
            first=_less(self.first, rate_share, acceleration_share),
            second=_less(self.second, rate_share, acceleration_share),
        )


def _less(joint: JointLimits, rate_share: float, acceleration_share: float) -> JointLimits:
    return replace(
        joint,
        rate_deg_s=rate_share * joint.rate_deg_s,
        acceleration_deg_s2=acceleration_share * joint.acceleration_deg_s2,
    )
