"""Where the boresight may be, from the station file and its horizon mask."""

from trunnion.files.mask import load_mask
from trunnion.files.station import StationFile
from trunnion.mount.clearance import Clearance, Sector
from trunnion.mount.horizon import HorizonMask


def clearance_of(station: StationFile) -> Clearance:
    """Floor, mask and keep-outs of a station; raises FileProblems for a mask that is none."""
    safety = station.safety
    mask = HorizonMask(load_mask(safety.horizon_mask)) if safety.horizon_mask else None
    keep_outs = tuple(
        Sector(box.name, *box.azimuth_deg, *box.elevation_deg) for box in safety.keep_outs
    )
    return Clearance(safety.elevation_floor_deg, mask, keep_outs)
