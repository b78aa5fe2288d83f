"""Station file: the machine, which is the mount, the antenna on it, and the way to both."""

from collections.abc import Mapping
from enum import Enum
from typing import Annotated

from pydantic import ConfigDict, Field, ValidationInfo, field_validator

from trunnion.files.fields import Interval, Name, Pair, PositiveFloat, listed
from trunnion.files.section import Section

_TENTH = 0.1  # of the beamwidth, about 0.1 dB of loss: common practice, no source


class Geometry(Enum):
    """How the two joints of the mount are arranged."""

    AZIMUTH_ELEVATION = "azimuth-elevation"
    X_Y_NORTH_SOUTH = "x-y-north-south"
    X_Y_EAST_WEST = "x-y-east-west"
    HOUR_ANGLE_DECLINATION = "hour-angle-declination"


class JointSection(Section):
    """What one joint can do."""

    travel_deg: Interval
    """Lower and upper end of the travel in degrees; more than a turn where the cables allow it."""
    rate_deg_s: Annotated[float, Field(gt=0, le=100)]
    """Highest rate in degrees per second."""
    acceleration_deg_s2: Annotated[float, Field(gt=0, le=1000)]
    """Highest acceleration, and deceleration, in degrees per second squared."""

    @field_validator("travel_deg")
    @classmethod
    def _within_three_turns(cls, travel_deg: tuple[float, float]) -> tuple[float, float]:
        if min(travel_deg) < -1080 or max(travel_deg) > 1080:
            raise ValueError(f"expected a travel within -1080 to 1080, got {listed(travel_deg)}")
        return travel_deg


class MountSection(Section):
    """The mount: two joints, the second carried by the first."""

    geometry: Annotated[Geometry, Field(strict=False)] = Geometry.AZIMUTH_ELEVATION
    """How the joints are arranged, by what the joint on the ground turns about: `azimuth-elevation`
    (the vertical), `x-y-north-south` and `x-y-east-west` (a level axis along the meridian, or at a
    right angle to it), `hour-angle-declination` (the axis of the Earth)."""
    first: JointSection
    """The joint that stands on the ground: azimuth, from north through east; or X, from the zenith
    towards east (north for `x-y-east-west`); or hour angle, from the meridian towards west."""
    second: JointSection
    """The joint that it carries: elevation, 0 at the horizon and 90 at the zenith, beyond 90 the
    antenna goes over the top; or Y, from the zenith towards north (east for `x-y-east-west`); or
    declination."""
    stow_deg: Pair
    """Where the mount parks: angles of the first and the second joint in degrees."""

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
