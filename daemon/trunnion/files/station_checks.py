"""Station file: contradictions between its sections."""

from collections.abc import Iterator

from trunnion.files.station_files import FilesSection
from trunnion.files.station_machine import CadenceSection, Geometry, MountSection, WindSection
from trunnion.files.station_safety import SafetySection
from trunnion.files.validation import Check, Contradiction


def floor_below_travel(mount: MountSection, safety: SafetySection) -> Iterator[Contradiction]:
    """The mount must reach some of the sky above the elevation floor."""
    if mount.geometry is not Geometry.AZIMUTH_ELEVATION:
        return
    highest_deg = _highest_elevation_deg(mount)
    if safety.elevation_floor_deg >= highest_deg:
        yield Contradiction(
            ("safety", "elevation_floor_deg"),
            f"expected less than the highest elevation that the mount reaches, {highest_deg:g}, "
            f"got {safety.elevation_floor_deg:g}",
        )


def stow_above_floor(mount: MountSection, safety: SafetySection) -> Iterator[Contradiction]:
    """The stow position must be one that the gate lets the mount go to.

    For other geometries this needs the mount's hinges, and is found with the horizon mask.
    """
    if mount.geometry is not Geometry.AZIMUTH_ELEVATION:
        return
    stow_deg = _elevation_deg(mount.stow_deg[1])
    if stow_deg < safety.elevation_floor_deg:
        yield Contradiction(
            ("mount", "stow_deg"),
            f"expected an elevation of at least the floor, {safety.elevation_floor_deg:g}, "
            f"got {stow_deg:g}",
        )


def patience_longer_than_a_turn(
    safety: SafetySection, cadence: CadenceSection
) -> Iterator[Contradiction]:
    """Ages and lateness must allow for one control turn, or the mount would never move."""
    turn_s = 1 / cadence.tick_hz
    for key in ("reading_max_age_s", "turn_max_lateness_s"):
        limit_s = getattr(safety, key)
        if limit_s <= turn_s:
            yield Contradiction(
                ("safety", key),
                f"expected more than the {turn_s:g} s of one control turn at "
                f"{cadence.tick_hz:g} Hz, got {limit_s:g}",
            )


def wind_limits_with_an_anemometer(
    wind: WindSection | None, safety: SafetySection
) -> Iterator[Contradiction]:
    """A limit of the wind needs somebody who knows the wind."""
    for key in ("wind_stow_gust_m_s", "wind_stow_mean_m_s"):
        if wind is None and getattr(safety, key) is not None:
            yield Contradiction(
                ("safety", key), "expected a section wind: with the anemometer, got none"
            )


def heartbeat_with_a_source(safety: SafetySection, files: FilesSection) -> Iterator[Contradiction]:
    """A heartbeat has both a file and an age, or neither."""
    if safety.heartbeat_max_age_s is not None and files.heartbeat is None:
        yield Contradiction(
            ("safety", "heartbeat_max_age_s"), "expected files.heartbeat to name a file, got none"
        )
    if files.heartbeat is not None and safety.heartbeat_max_age_s is None:
        yield Contradiction(
            ("files", "heartbeat"), "expected safety.heartbeat_max_age_s beside it, got none"
        )


STATION_CHECKS: tuple[Check, ...] = (
    floor_below_travel,
    stow_above_floor,
    patience_longer_than_a_turn,
    wind_limits_with_an_anemometer,
    heartbeat_with_a_source,
)


def _elevation_deg(second_deg: float) -> float:
    """Return the elevation of the boresight: beyond 90 the antenna has gone over the top."""
    return 180 - second_deg if second_deg > 90 else second_deg


def _highest_elevation_deg(mount: MountSection) -> float:
    lower_deg, upper_deg = mount.second.travel_deg
    if lower_deg <= 90 <= upper_deg:
        return 90
    return max(_elevation_deg(lower_deg), _elevation_deg(upper_deg))
