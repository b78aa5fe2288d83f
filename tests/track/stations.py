"""Stations for the tests of planning."""

from trunnion.mount.clearance import Clearance
from trunnion.mount.hinges import Hinges
from trunnion.mount.joints import Joints
from trunnion.mount.mount import JointLimits, Mount
from trunnion.track.beam import Beam

FLOOR_DEG = 5.3
CLEARANCE = Clearance(FLOOR_DEG, None)
BEAM = Beam(half_power_deg=2.9, tolerance_deg=0.29)
STOW = Joints(12.7, 61.3)


def mount(
    first: tuple[float, float] = (-271.0, 268.0),
    second: tuple[float, float] = (0.0, 90.0),
    rate_deg_s: float = 5.0,
    acceleration_deg_s2: float = 3.0,
    hinges: Hinges | None = None,
) -> Mount:
    """An azimuth–elevation mount unless told otherwise; both joints equally fast."""
    return Mount(
        hinges or Hinges.azimuth_elevation(),
        JointLimits(*first, rate_deg_s, acceleration_deg_s2),
        JointLimits(*second, rate_deg_s, acceleration_deg_s2),
        STOW,
    )
