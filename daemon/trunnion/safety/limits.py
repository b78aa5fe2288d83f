"""What the gate holds against everybody, as one value."""

from dataclasses import dataclass, field

from trunnion.mount.clearance import Clearance
from trunnion.mount.mount import Mount

BRAKING_SHARE = 0.8
"""What the gate counts on of a joint's acceleration when it brakes: a mount hears of it a turn
late, and needs something in reserve to keep up (common practice, no source)."""


@dataclass(frozen=True, slots=True)
class SafetyLimits:
    """Limits of the mount and of the sky, ages and times (s), and the hazards that count here.

    `turn_s` is the time from turn to turn, and so until an order can be thought better of. A limit
    of None means that this hazard is not watched at this station. `encoder_error_deg` is
    how far a reading may be from the truth, and so how far outside a limit it may seem.
    """

    mount: Mount
    clearance: Clearance
    transmit_floor_deg: float
    reading_max_age_s: float = 1.0
    turn_max_lateness_s: float = 0.5
    turn_s: float = 0.1
    encoder_error_deg: float = 0.05
    stall_error_deg: float = 3.0
    slip_deg: float = 1.0
    recovery_rate_deg_s: float = 0.5
    clock_max_step_s: float = 0.5
    clock_max_error_s: float | None = None
    wind_stow_gust_m_s: float | None = None
    wind_stow_mean_m_s: float | None = None
    heartbeat_max_age_s: float | None = None
    sun_keep_out_deg: float | None = None
    braking: Mount = field(init=False, repr=False, compare=False)

    def __post_init__(self) -> None:
        object.__setattr__(self, "braking", self.mount.with_reserve(1.0, BRAKING_SHARE))
