"""What the gate holds against everybody, as one value."""

from dataclasses import dataclass

from trunnion.mount.clearance import Clearance
from trunnion.mount.mount import Mount


@dataclass(frozen=True, slots=True)
class SafetyLimits:
    """Limits of the mount and of the sky, ages and times (s), and the hazards that count here.

    A limit of None means that this hazard is not watched at this station. `encoder_error_deg` is
    how far a reading may be from the truth, and so how far outside a limit it may seem.
    """

    mount: Mount
    clearance: Clearance
    transmit_floor_deg: float
    reading_max_age_s: float = 1.0
    turn_max_lateness_s: float = 0.5
    encoder_error_deg: float = 0.05
    stall_error_deg: float = 3.0
    slip_deg: float = 1.0
    recovery_rate_deg_s: float = 0.5
    clock_max_step_s: float = 0.5
    clock_max_error_s: float | None = None
    wind_stow_gust_m_s: float | None = None
    wind_stow_mean_m_s: float | None = None
    heartbeat_max_age_s: float | None = None
