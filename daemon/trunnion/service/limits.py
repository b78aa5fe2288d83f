"""What the gate holds against everybody at this station, from its file."""

from trunnion.files.station import StationFile
from trunnion.mount.clearance import Clearance
from trunnion.mount.mount import Mount
from trunnion.safety.limits import SafetyLimits


def safety_limits_of(station: StationFile, mount: Mount, clearance: Clearance) -> SafetyLimits:
    """The station's limits."""
    safety = station.safety
    return SafetyLimits(
        mount,
        clearance,
        safety.transmit_floor_deg,
        reading_max_age_s=safety.reading_max_age_s,
        turn_max_lateness_s=safety.turn_max_lateness_s,
        turn_s=1.0 / station.cadence.tick_hz,
        encoder_error_deg=safety.encoder_error_deg,
        stall_error_deg=safety.stall_error_deg,
        slip_deg=safety.slip_deg,
        recovery_rate_deg_s=safety.recovery_rate_deg_s,
        clock_max_step_s=safety.clock_max_step_s,
        clock_max_error_s=safety.clock_max_error_s,
        wind_stow_gust_m_s=safety.wind_stow_gust_m_s,
        wind_stow_mean_m_s=safety.wind_stow_mean_m_s,
        heartbeat_max_age_s=safety.heartbeat_max_age_s,
        sun_keep_out_deg=safety.sun_keep_out_deg,
    )
