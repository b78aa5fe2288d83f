"""Station file: the machine, which is the mount, the antenna on it, and the way to both."""

from collections.abc import Mapping
from enum import Enum
from typing import Annotated

from pydantic import ConfigDict, Field, ValidationInfo, field_validator

from trunnion.files.fields import (
    AzimuthDeg,
    ElevationDeg,
    Interval,
    Name,
    Pair,
    PositiveFloat,
    listed,
)
from trunnion.files.section import Section

_TENTH = 0.1  # of the beamwidth, about 0.1 dB of loss: common practice, no source


class Geometry(Enum):
    """How the two joints of the mount are arranged."""

    AZIMUTH_ELEVATION = "azimuth-elevation"
    X_Y_NORTH_SOUTH = "x-y-north-south"
    X_Y_EAST_WEST = "x-y-east-west"
    HOUR_ANGLE_DECLINATION = "hour-angle-declination"
    OTHER_AXIS = "other-axis"


class AxisSection(Section):
    """Where the axis of the joint on the ground points, for a mount of no usual kind."""

    azimuth_deg: AzimuthDeg
    """Azimuth of the axis in degrees, from true north through east."""
    elevation_deg: ElevationDeg
    """Elevation of the axis in degrees; 90 is upright, 0 level."""
    clockwise: bool = True
    """Whether the joint counts clockwise, seen by somebody whom the axis points at."""


class JointSection(Section):
    """What one joint can do."""

    travel_deg: Interval
    """Lower and upper end of the travel in degrees; more than a turn where the cables allow it."""
    rate_deg_s: Annotated[float, Field(gt=0, le=100)]
    """Highest rate in degrees per second."""
    acceleration_deg_s2: Annotated[float, Field(gt=0, le=1000)]
    """Highest acceleration, and deceleration, in degrees per second squared."""
    margin_deg: Annotated[float, Field(ge=0, le=180)] = 0.0
    """Degrees at both ends of the travel that plans leave unused; the stow position may lie there.
    """

    @field_validator("travel_deg")
    @classmethod
    def _within_three_turns(cls, travel_deg: tuple[float, float]) -> tuple[float, float]:
        if min(travel_deg) < -1080 or max(travel_deg) > 1080:
            raise ValueError(f"expected a travel within -1080 to 1080, got {listed(travel_deg)}")
        return travel_deg

    @field_validator("margin_deg")
    @classmethod
    def _leaving_some_travel(cls, margin_deg: float, info: ValidationInfo) -> float:
        lower_deg, upper_deg = info.data.get("travel_deg", (-1080.0, 1080.0))
        half_deg = 0.5 * (upper_deg - lower_deg)
        if margin_deg >= half_deg:
            raise ValueError(
                f"expected less than half of the travel, {half_deg:g}, got {margin_deg:g}"
            )
        return margin_deg


class JointBoxSection(Section):
    """A box of joint angles that the mount may not enter: a strut, a wall, a cable."""

    name: Name
    """What is there, for the operator to read when it keeps the mount away."""
    first_deg: Interval
    """Lower and upper angle of the first joint in degrees, of its own travel: a turn more is
    another place."""
    second_deg: Interval
    """Lower and upper angle of the second joint in degrees."""


class MountSection(Section):
    """The mount: two joints, the second carried by the first."""

    geometry: Annotated[Geometry, Field(strict=False)] = Geometry.AZIMUTH_ELEVATION
    """How the joints are arranged, by what the joint on the ground turns about: `azimuth-elevation`
    (the vertical), `x-y-north-south` and `x-y-east-west` (a level axis along the meridian, or at a
    right angle to it), `hour-angle-declination` (the axis of the Earth), `other-axis` (`axis` says
    which)."""
    axis: Annotated[AxisSection | None, Field(validate_default=True)] = None
    """Where the first axis points, for `other-axis` and no other. The first joint is zero where the
    antenna looks highest at a right angle to the axis, and the second joint is 90 along it."""
    first: JointSection
    """The joint that stands on the ground: azimuth, from north through east; or X, from the zenith
    towards east (north for `x-y-east-west`); or hour angle, from the meridian towards west."""
    second: JointSection
    """The joint that it carries: elevation, 0 at the horizon and 90 at the zenith, beyond 90 the
    antenna goes over the top; or Y, from the zenith towards north (east for `x-y-east-west`); or
    declination."""
    stow_deg: Pair
    """Where the mount parks: angles of the first and the second joint in degrees."""
    forbidden: tuple[JointBoxSection, ...] = ()
    """Boxes of joint angles that the mount never enters, nor crosses on its way."""

    @field_validator("axis")
    @classmethod
    def _axis_where_it_is_needed(
        cls, axis: AxisSection | None, info: ValidationInfo
    ) -> AxisSection | None:
        geometry: Geometry | None = info.data.get("geometry")
        if geometry is Geometry.OTHER_AXIS and axis is None:
            raise ValueError("expected where the axis points, as geometry is other-axis, got none")
        if geometry not in (None, Geometry.OTHER_AXIS) and axis is not None:
            raise ValueError(f"expected none, as geometry is {geometry.value}, got one")
        return axis

    @field_validator("forbidden")
    @classmethod
    def _stow_outside(
        cls, forbidden: tuple[JointBoxSection, ...], info: ValidationInfo
    ) -> tuple[JointBoxSection, ...]:
        stow_deg: tuple[float, float] | None = info.data.get("stow_deg")
        if stow_deg is None:
            return forbidden
        for box in forbidden:
            if all(
                lower_deg <= angle_deg <= upper_deg
                for angle_deg, (lower_deg, upper_deg) in zip(
                    stow_deg, (box.first_deg, box.second_deg), strict=True
                )
            ):
                raise ValueError(
                    f"expected boxes that leave out the stow position {listed(stow_deg)}, "
                    f"got it in {box.name!r}"
                )
        return forbidden

    @field_validator("stow_deg")
    @classmethod
    def _stow_within_travel(
        cls, stow_deg: tuple[float, float], info: ValidationInfo
    ) -> tuple[float, float]:
        for name, angle_deg in zip(("first", "second"), stow_deg, strict=True):
            joint: JointSection | None = info.data.get(name)
            if joint and not joint.travel_deg[0] <= angle_deg <= joint.travel_deg[1]:
                raise ValueError(
                    f"expected the {name} joint to park within its travel "
                    f"{listed(joint.travel_deg)}, got {angle_deg:g}"
                )
        return stow_deg


class AntennaSection(Section):
    """The antenna's beam, and how well it should point."""

    half_power_beamwidth_deg: Annotated[float, Field(gt=0, le=180)]
    """Full width of the beam in degrees between the directions of half power."""
    pointing_tolerance_deg: PositiveFloat = Field(
        default_factory=lambda data: _TENTH * data.get("half_power_beamwidth_deg", 1.0)
    )
    """Pointing error in degrees up to which a target counts as well tracked; by default a tenth of
    the beamwidth."""

    @field_validator("pointing_tolerance_deg")
    @classmethod
    def _within_the_beam(cls, tolerance_deg: float, info: ValidationInfo) -> float:
        half_beam_deg = info.data.get("half_power_beamwidth_deg", 180.0) / 2
        if tolerance_deg > half_beam_deg:
            raise ValueError(
                f"expected at most half the beamwidth, {half_beam_deg:g}, got {tolerance_deg:g}"
            )
        return tolerance_deg


class Objective(Enum):
    """What a path is to be best in where the mount cannot follow exactly."""

    TIME_OUTSIDE_BEAM = "time-outside-beam"
    WORST_ERROR = "worst-error"


class PlanningSection(Section):
    """How paths are planned."""

    objective: Annotated[Objective, Field(strict=False)] = Objective.TIME_OUTSIDE_BEAM
    """What is least where the mount cannot follow exactly: `time-outside-beam` (and then the loss),
    or `worst-error`."""


class DriverSection(Section):
    """The way to the mount: which driver, and that driver's own settings."""

    model_config = ConfigDict(extra="allow")

    kind: Name
    """The driver's name, as in `simulator`; further keys of this section are its own settings."""

    @property
    def settings(self) -> Mapping[str, object]:
        """The driver's own settings: all of the section but `kind`, as they stand in the file."""
        return self.model_extra or {}


class WindSection(Section):
    """The anemometer: which wind input, and that input's own settings."""

    model_config = ConfigDict(extra="allow")

    kind: Name
    """The wind input's name, as in `nmea`; further keys of this section are its own settings."""

    @property
    def settings(self) -> Mapping[str, object]:
        """The input's own settings: all of the section but `kind`, as they stand in the file."""
        return self.model_extra or {}


class CadenceSection(Section):
    """How often the control turn runs."""

    tick_hz: Annotated[float, Field(ge=1, le=100)] = 10.0
    """Control turns per second."""
