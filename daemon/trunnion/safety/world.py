"""Everything about the surroundings that the gate looks at in one turn."""

from typing import NamedTuple

from trunnion.safety.emergency import EmergencyStop


class World(NamedTuple):
    """The surroundings at this turn; None stands for "not known".

    `utc_s` is the UTC of this turn (POSIX seconds), to be held against the monotonic clock;
    `lateness_s` is how late this turn began; `clock_error_s` the largest error of UTC that the
    system admits, infinite when it is not synchronised; winds in metres a second;
    `heartbeat_age_s` how long ago the outside heartbeat was last heard. `may_recover` is the
    operator's explicit leave to move a mount that was found outside its limits back inside, slowly.
    `sun` is the Sun's azimuth and elevation (deg), by day and by night.
    """

    emergency: EmergencyStop | None
    is_link_up: bool
    lateness_s: float
    mount_fault: str | None = None
    clock_error_s: float | None = None
    wind_gust_m_s: float | None = None
    wind_mean_m_s: float | None = None
    heartbeat_age_s: float | None = None
    may_recover: bool = False
    utc_s: float | None = None
    sun: tuple[float, float] | None = None
