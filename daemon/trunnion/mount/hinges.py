"""A mount as two hinges: the direction of the boresight from the joint angles, and back.

The first axis is fixed to the ground. The second is at a right angle to it and carried by it, and
the boresight is at a right angle to the second. With `r` and `s` the two directions at right angles
to the first axis `a` and to each other, the boresight stands at

    cos(second) (cos(first) r + sin(first) s) + sin(second) a

so the second joint is zero at a right angle to the first axis and +90° along it. `r`, the zero of
the first joint, is the highest direction at a right angle to the axis, or north where that plane is
level.

| mount | first axis | sense | first joint | second joint |
| --- | --- | --- | --- | --- |
| azimuth–elevation | zenith | clockwise | azimuth | elevation |
| X–Y, lower axis north–south | north | counter-clockwise | X, east of the zenith | Y, north |
| X–Y, lower axis east–west | east | clockwise | X, north of the zenith | Y, east |
| hour angle–declination | pole | by hemisphere | hour angle, west | declination |
"""

from dataclasses import dataclass, field
from math import atan2, cos, degrees, hypot, radians, sin
from typing import Self

from trunnion.mount.joints import Joints, Motion
from trunnion.mount.sphere import direction, principal_deg, unit_vector

Vector = tuple[float, float, float]

TINY = 1e-150
"""Nothing nearer to the first axis than this is told from it: its square must not vanish."""

UPRIGHT_DEG = 90.0 - 1e-9
"""A first axis at least this high is vertical: azimuths and elevations need no rotation."""


@dataclass(frozen=True, slots=True)
class Hinges:
    """The geometry of a two-axis mount, by the direction of its first axis.

    `axis_azimuth_deg` and `axis_elevation_deg` tell where the first axis points; `is_clockwise`
    whether its joint counts clockwise, seen by somebody whom the axis points at.
    """

    axis_azimuth_deg: float
    axis_elevation_deg: float
    is_clockwise: bool
    frame: tuple[Vector, Vector, Vector] = field(init=False, repr=False, compare=False)

    def __post_init__(self) -> None:
        object.__setattr__(self, "frame", _frame_of(self))

    @classmethod
    def azimuth_elevation(cls) -> Self:
        """First joint azimuth from north through east, second joint elevation."""
        return cls(0.0, 90.0, is_clockwise=True)

    @classmethod
    def x_y_north_south(cls) -> Self:
        """Lower axis along the meridian: X east of the zenith, Y north."""
        return cls(0.0, 0.0, is_clockwise=False)

    @classmethod
    def x_y_east_west(cls) -> Self:
        """Lower axis along the prime vertical: X north of the zenith, Y east."""
        return cls(90.0, 0.0, is_clockwise=True)

    @classmethod
    def hour_angle_declination(cls, latitude_deg: float) -> Self:
        """First joint hour angle from the meridian through west, second joint declination.

        In the southern hemisphere the axis still points to the north pole, below the horizon.
        """
        return cls(0.0, latitude_deg, is_clockwise=True)

    @property
    def is_upright(self) -> bool:
        """Whether the joints are azimuth and elevation as they stand."""
        return self.axis_elevation_deg >= UPRIGHT_DEG and self.is_clockwise

    def boresight(self, joints: Joints) -> tuple[float, float]:
        """Azimuth (0 <= azimuth < 360) and elevation (deg) of the beam at these joint angles."""
        if self.is_upright:
            return _upright(joints)
        r, s, a = self.frame
        first, second = radians(joints.first_deg), radians(joints.second_deg)
        along_r, along_s = cos(second) * cos(first), cos(second) * sin(first)
        along_a = sin(second)
        return direction(
            along_r * r[0] + along_s * s[0] + along_a * a[0],
            along_r * r[1] + along_s * s[1] + along_a * a[1],
            along_r * r[2] + along_s * s[2] + along_a * a[2],
        )

    def solutions(self, azimuth_deg: float, elevation_deg: float) -> tuple[Joints, Joints]:
        """Both pairs of joint angles that point there: the plain one and the tipped-over one.

        The plain one has its second joint within ±90°; the other has its first joint turned by 180°
        and its second at 180° less the plain one. First joints are 0 <= angle < 360: whole turns
        are the caller's choice.
        """
        if self.is_upright:
            plain = Joints(principal_deg(azimuth_deg), elevation_deg)
        else:
            along_r, along_s, along_a = self._components(unit_vector(azimuth_deg, elevation_deg))
            plain = Joints(
                principal_deg(degrees(atan2(along_s, along_r))),
                degrees(atan2(along_a, hypot(along_r, along_s))),
            )
        return plain, Joints(principal_deg(plain.first_deg + 180.0), 180.0 - plain.second_deg)

    def motion(
        self,
        azimuth_deg: float,
        elevation_deg: float,
        azimuth_rate_deg_s: float,
        elevation_rate_deg_s: float,
        *,
        is_tipped: bool = False,
    ) -> Motion:
        """Joint angles and rates that follow a direction moving at these rates.

        Rates are infinite in principle where the direction passes along the first axis; there the
        first joint's rate is given as zero.
        """
        joints = self.solutions(azimuth_deg, elevation_deg)[is_tipped]
        sign = -1.0 if is_tipped else 1.0
        if self.is_upright:
            return Motion(*joints, azimuth_rate_deg_s, sign * elevation_rate_deg_s)
        along_r, along_s, along_a = self._components(unit_vector(azimuth_deg, elevation_deg))
        d_r, d_s, d_a = self._components(
            _velocity(azimuth_deg, elevation_deg, azimuth_rate_deg_s, elevation_rate_deg_s)
        )
        level = hypot(along_r, along_s)
        if level < TINY:
            return Motion(*joints, 0.0, sign * hypot(d_r, d_s))
        first_rate = (along_r * d_s - along_s * d_r) / (level * level)
        second_rate = level * d_a - along_a * (along_r * d_r + along_s * d_s) / level
        return Motion(*joints, first_rate, sign * second_rate)

    def _components(self, vector: Vector) -> Vector:
        r, s, a = self.frame
        return _dot(vector, r), _dot(vector, s), _dot(vector, a)


def _frame_of(hinges: Hinges) -> tuple[Vector, Vector, Vector]:
    """The directions r, s and a, east–north–up components."""
    a = unit_vector(hinges.axis_azimuth_deg, hinges.axis_elevation_deg)
    level = hypot(a[0], a[1])
    if abs(hinges.axis_elevation_deg) >= UPRIGHT_DEG:
        r = (0.0, 1.0, 0.0)
    else:  # straight up, less its part along the axis, of unit length
        r = (-a[2] * a[0] / level, -a[2] * a[1] / level, level)
    s = _cross(r, a) if hinges.is_clockwise else _cross(a, r)
    return r, s, a


def _upright(joints: Joints) -> tuple[float, float]:
    """An azimuth–elevation mount at any angles, over the top and whole turns included."""
    elevation_deg = joints.second_deg
    if -90.0 <= elevation_deg <= 90.0:
        return principal_deg(joints.first_deg), elevation_deg
    elevation_deg = (elevation_deg + 180.0) % 360.0 - 180.0
    if -90.0 <= elevation_deg <= 90.0:
        return principal_deg(joints.first_deg), elevation_deg
    over_deg = 180.0 - elevation_deg if elevation_deg > 0.0 else -180.0 - elevation_deg
    return principal_deg(joints.first_deg + 180.0), over_deg


def _velocity(
    azimuth_deg: float,
    elevation_deg: float,
    azimuth_rate_deg_s: float,
    elevation_rate_deg_s: float,
) -> Vector:
    """How the unit vector moves, in degrees per second."""
    azimuth, elevation = radians(azimuth_deg), radians(elevation_deg)
    sideways = cos(elevation) * azimuth_rate_deg_s
    upwards = sin(elevation) * elevation_rate_deg_s
    return (
        cos(azimuth) * sideways - sin(azimuth) * upwards,
        -sin(azimuth) * sideways - cos(azimuth) * upwards,
        cos(elevation) * elevation_rate_deg_s,
    )


def _dot(one: Vector, other: Vector) -> float:
    return one[0] * other[0] + one[1] * other[1] + one[2] * other[2]


def _cross(one: Vector, other: Vector) -> Vector:
    return (
        one[1] * other[2] - one[2] * other[1],
        one[2] * other[0] - one[0] * other[2],
        one[0] * other[1] - one[1] * other[0],
    )
