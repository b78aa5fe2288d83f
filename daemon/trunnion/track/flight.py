"""How well a mount follows a path: flown in thought, before it is flown."""

from typing import NamedTuple

from trunnion.mount.joints import Motion
from trunnion.mount.motion import approach
from trunnion.mount.mount import Mount
from trunnion.mount.sphere import separation_deg
from trunnion.track.beam import Beam
from trunnion.track.path import Path

STEP_S = 0.2


class Flown(NamedTuple):
    """What became of the flight.

    The worst error is that after the mount had first caught the target; `lost` tells from when
    until when (UTC) it was then above the tolerance, None if never.
    """

    worst_error_deg: float
    outside_beam_s: float
    lost: tuple[float, float] | None
    last: Motion


def fly(path: Path, begin_s: float, end_s: float, start: Motion, mount: Mount, beam: Beam) -> Flown:
    """Fly a path from `start` at `begin_s`; raises NoPosition where the target has none."""
    now, utc_s, worst_deg, outside_s = start, begin_s, 0.0, 0.0
    lost_s: list[float] = []
    has_caught = False
    while utc_s < end_s:
        dt_s = min(STEP_S, end_s - utc_s)
        utc_s += dt_s
        now = approach(now, path.at(utc_s), mount, dt_s)
        look = path.look(utc_s)
        error_deg = separation_deg(
            look.azimuth_deg, look.elevation_deg, *mount.hinges.boresight(now.joints)
        )
        if error_deg > beam.half_width_deg:
            outside_s += dt_s
        has_caught = has_caught or error_deg <= beam.tolerance_deg
        if has_caught:
            worst_deg = max(worst_deg, error_deg)
            if error_deg > beam.tolerance_deg:
                lost_s.append(utc_s)
    return Flown(worst_deg, outside_s, (lost_s[0], lost_s[-1]) if lost_s else None, now)
