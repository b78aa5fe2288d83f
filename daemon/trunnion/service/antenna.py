"""A station's mount and beam as the core knows them, from its file."""

from trunnion.files.station import StationFile
from trunnion.files.station_machine import Geometry, JointSection, MountSection
from trunnion.mount.hinges import Hinges
from trunnion.mount.joints import Joints
from trunnion.mount.mount import JointBox, JointLimits, Mount
from trunnion.track.beam import Beam
from trunnion.track.objective import Objective

RATE_SHARE = 0.97
ACCELERATION_SHARE = 0.7
"""What is asked of a joint, of what it can do (common practice, no source)."""


def mount_of(station: StationFile) -> Mount:
    """The station's mount."""
    section = station.mount
    return Mount(
        _hinges(section, station.site.latitude_deg),
        _limits(section.first),
        _limits(section.second),
        Joints(*section.stow_deg),
        tuple(JointBox(box.name, *box.first_deg, *box.second_deg) for box in section.forbidden),
    )


def flown_mount_of(station: StationFile) -> Mount:
    """The mount as it is planned for and flown: with something in reserve for following."""
    return mount_of(station).with_reserve(RATE_SHARE, ACCELERATION_SHARE)


def beam_of(station: StationFile) -> Beam:
    """The station's beam."""
    section = station.antenna
    return Beam(section.half_power_beamwidth_deg, section.pointing_tolerance_deg)


def objective_of(station: StationFile) -> Objective:
    """What the station's paths are to be best in."""
    return Objective[station.planning.objective.name]


def _hinges(mount: MountSection, latitude_deg: float) -> Hinges:
    match mount.geometry:
        case Geometry.AZIMUTH_ELEVATION:
            return Hinges.azimuth_elevation()
        case Geometry.X_Y_NORTH_SOUTH:
            return Hinges.x_y_north_south()
        case Geometry.X_Y_EAST_WEST:
            return Hinges.x_y_east_west()
        case Geometry.HOUR_ANGLE_DECLINATION:
            return Hinges.hour_angle_declination(latitude_deg)
        case Geometry.OTHER_AXIS:
            axis = mount.axis
            assert axis is not None  # noqa: S101 - the file's own check sees to it
            return Hinges(axis.azimuth_deg, axis.elevation_deg, is_clockwise=axis.clockwise)


def _limits(joint: JointSection) -> JointLimits:
    return JointLimits(
        *joint.travel_deg, joint.rate_deg_s, joint.acceleration_deg_s2, joint.margin_deg
    )
