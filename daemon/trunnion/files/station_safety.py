"""Station file: what may never happen, and what counts as too old or too late."""

from typing import Annotated

from pydantic import Field, ValidationInfo, field_validator

from trunnion.files.fields import (
    ElevationDeg,
    FilePath,
    Interval,
    Name,
    Pair,
    PositiveFloat,
    listed,
)
from trunnion.files.section import Section

_LEGAL_TRANSMIT_FLOOR_DEG = 3.0  # No. 21.14 of the ITU Radio Regulations


WindSpeed = Annotated[float, Field(gt=0, le=100)]


class KeepOutSection(Section):
    """A box of the sky that the beam's centre never enters: a mast, a roof door."""

    name: Name
    """What is there, for the operator to read when it keeps the antenna away."""
    azimuth_deg: Pair
    """From and to, clockwise, in degrees of azimuth from 0 to 360; may cross north: [350, 20]."""
    elevation_deg: Interval
    """Lower and upper edge in degrees of elevation."""

    @field_validator("azimuth_deg")
    @classmethod
    def _within_a_turn(cls, azimuth_deg: tuple[float, float]) -> tuple[float, float]:
        begin, end = azimuth_deg
        if not (0 <= begin <= 360 and 0 <= end <= 360) or begin == end:
            raise ValueError(
                f"expected two different azimuths of 0 to 360, got {listed(azimuth_deg)}"
            )
        return azimuth_deg

    @field_validator("elevation_deg")
    @classmethod
    def _within_the_sky(cls, elevation_deg: tuple[float, float]) -> tuple[float, float]:
        if min(elevation_deg) < -90 or max(elevation_deg) > 90:
            raise ValueError(f"expected elevations of -90 to 90, got {listed(elevation_deg)}")
        return elevation_deg


class SafetySection(Section):
    """The limits that the gate holds against everybody, the pass plan included.

    A software limit is no substitute for hard-wired limit switches and a hard-wired emergency stop.
    """

    elevation_floor_deg: ElevationDeg
    """Elevation in degrees below which the beam's centre never goes, whatever is asked."""
    horizon_mask: FilePath | None = None
    """Path of a text file with azimuth and elevation of the obstacles round the station; the beam's
    centre stays above it as well."""
    transmit_floor_deg: ElevationDeg = Field(
        default_factory=lambda data: max(
            _LEGAL_TRANSMIT_FLOOR_DEG, data.get("elevation_floor_deg", 90.0)
        )
    )
    """Elevation in degrees below which transmitting is never permitted; by default 3 (No. 21.14 of
    the ITU Radio Regulations) or the elevation floor, whichever is higher. Raise it to what your
    licence says."""
    transmit_settle_s: Annotated[float, Field(ge=0, le=60)] = 1.0
    """Seconds for which the beam must have been on target before transmitting is permitted."""
    keep_outs: tuple[KeepOutSection, ...] = ()
    """Boxes of the sky that the beam's centre never enters, nor crosses on its way."""
    sun_keep_out_deg: Annotated[float, Field(gt=0, le=90)] | None = None
    """Degrees that the beam's centre stays away from the Sun, by day; without it the Sun does not
    matter."""
    reading_max_age_s: Annotated[float, Field(gt=0, le=10)] = 1.0
    """Seconds after which the mount's last reading is too old to move by: the mount is halted."""
    turn_max_lateness_s: Annotated[float, Field(gt=0, le=10)] = 0.5
    """Seconds by which a control turn may be late; beyond that the mount is halted."""
    encoder_error_deg: Annotated[float, Field(ge=0, le=5)] = 0.05
    """Degrees by which a joint's reading may differ from the truth, and so seem out of bounds."""
    stall_error_deg: Annotated[float, Field(gt=0, le=30)] = 3.0
    """Degrees by which a joint may lag behind its orders; when it stays further behind, it counts
    as jammed, and an emergency stop is latched."""
    slip_deg: Annotated[float, Field(gt=0, le=30)] = 1.0
    """Degrees by which a joint that was ordered to rest may move; after more, somebody or something
    else moves it, and an emergency stop is latched."""
    recovery_rate_deg_s: Annotated[float, Field(gt=0, le=5)] = 0.5
    """Degrees per second, at most, at which a mount that was found outside its limits comes back by
    `trunnion recover`."""
    wind_stow_gust_m_s: WindSpeed | None = None
    """Gusts in metres a second above which the mount goes to stow; the strongest three seconds of
    the last ten minutes count. Needs a `wind` section; a wind that is not known counts as one
    above the limit."""
    wind_stow_mean_m_s: WindSpeed | None = None
    """The same for the mean wind of the last ten minutes."""
    wind_max_age_s: Annotated[float, Field(gt=0, le=600)] = 10.0
    """Seconds after which the anemometer's last reading is too old, and the wind not known."""
    heartbeat_max_age_s: Annotated[float, Field(gt=0, le=86_400)] | None = None
    """Seconds after which a heartbeat from outside counts as lost, and the mount goes to stow;
    needs `files.heartbeat`."""
    clock_max_error_s: Annotated[float, Field(gt=0, lt=16)] | None = None
    """Seconds by which the system's clock may be wrong, by the kernel's own account, before the
    mount is halted; a clock that was never synchronised halts it as well."""
    clock_max_step_s: Annotated[float, Field(gt=0, le=60)] = 0.5
    """Seconds by which the system's clock may be set at once while the daemon runs; beyond that the
    mount is halted for two seconds."""
    element_max_age_days: PositiveFloat = 7.0
    """Days from the epoch of orbit elements after which nothing is tracked by them."""
    stow_on_exit: bool = False
    """Whether the mount moves to its stow position when the daemon is told to end; otherwise it
    halts where it is."""

    @field_validator("transmit_floor_deg")
    @classmethod
    def _not_below_the_floor(cls, transmit_floor_deg: float, info: ValidationInfo) -> float:
        floor_deg = info.data.get("elevation_floor_deg", -90.0)
        if transmit_floor_deg < floor_deg:
            raise ValueError(
                f"expected the elevation floor, {floor_deg:g}, or more, got {transmit_floor_deg:g}"
            )
        return transmit_floor_deg

    @field_validator("stall_error_deg", "slip_deg")
    @classmethod
    def _more_than_the_encoders_error(cls, limit_deg: float, info: ValidationInfo) -> float:
        encoder_error_deg = info.data.get("encoder_error_deg", 0.0)
        if limit_deg <= encoder_error_deg:
            raise ValueError(
                f"expected more than encoder_error_deg, {encoder_error_deg:g}, got {limit_deg:g}"
            )
        return limit_deg
