"""Where the boresight may be, from the station file and its horizon mask."""

from trunnion.files.mask import load_mask
from trunnion.files.problems import FileProblems
from trunnion.files.station import StationFile
from trunnion.mount.clearance import Clearance, Sector
from trunnion.mount.horizon import HorizonMask
from trunnion.service.antenna import mount_of

_ROUNDING_DEG = 1e-9


def clearance_of(station: StationFile) -> Clearance:
    """Floor, mask and keep-outs of a station.

    Raises FileProblems for a mask that is none, and for a stow position that is not clear of all.
    """
    safety = station.safety
    mask = HorizonMask(load_mask(safety.horizon_mask)) if safety.horizon_mask else None
    keep_outs = tuple(
        Sector(box.name, *box.azimuth_deg, *box.elevation_deg) for box in safety.keep_outs
    )
    clearance = Clearance(safety.elevation_floor_deg, mask, keep_outs)
    if reason := _why_stow_is_not_clear(station, clearance):
        raise FileProblems([station.problem(("mount", "stow_deg"), reason)])
    return clearance


def _why_stow_is_not_clear(station: StationFile, clearance: Clearance) -> str | None:
    mount = mount_of(station)
    azimuth_deg, elevation_deg = mount.hinges.boresight(mount.stow)
    if keep_out := clearance.keep_out(azimuth_deg, elevation_deg):
        return f"expected a stow position outside all keep-outs, got one in {keep_out.name!r}"
    lowest_deg = clearance.lowest_deg(azimuth_deg)
    if elevation_deg < lowest_deg - _ROUNDING_DEG:
        limit = "the floor" if lowest_deg == clearance.floor_deg else "the horizon mask"
        return (
            f"expected an elevation of at least {lowest_deg:g}, which is {limit} at "
            f"azimuth {azimuth_deg:g}, got {elevation_deg:g}"
        )
    return None
