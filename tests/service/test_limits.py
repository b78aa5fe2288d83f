from pathlib import Path

from tests.files.station_text import changed, written
from trunnion.files.station import load_station
from trunnion.service.antenna import mount_of
from trunnion.service.clearance import clearance_of
from trunnion.service.limits import safety_limits_of

SAFETY = """elevation_floor_deg: 5.5
  transmit_floor_deg: 11.25
  reading_max_age_s: 0.75
  turn_max_lateness_s: 0.35
  encoder_error_deg: 0.125
  stall_error_deg: 4.5
  slip_deg: 1.75
  recovery_rate_deg_s: 0.7
  clock_max_step_s: 1.3
  clock_max_error_s: 0.4
  wind_stow_gust_m_s: 21.5
  wind_stow_mean_m_s: 13.25
  heartbeat_max_age_s: 90
wind:
  kind: fixed
  speed_m_s: 3
cadence:
  tick_hz: 8
files:
  heartbeat: beat"""


def test_the_gate_gets_what_the_station_file_says(tmp_path: Path) -> None:
    station = load_station(written(tmp_path, changed(elevation_floor_deg=SAFETY)))
    limits = safety_limits_of(station, mount_of(station), clearance_of(station))
    assert limits.clearance.floor_deg == 5.5
    assert limits.transmit_floor_deg == 11.25
    assert (limits.reading_max_age_s, limits.turn_max_lateness_s) == (0.75, 0.35)
    assert limits.encoder_error_deg == 0.125
    assert (limits.stall_error_deg, limits.slip_deg) == (4.5, 1.75)
    assert limits.turn_s == 0.125
    assert (limits.recovery_rate_deg_s, limits.clock_max_step_s) == (0.7, 1.3)
    assert (limits.wind_stow_gust_m_s, limits.wind_stow_mean_m_s) == (21.5, 13.25)
    assert (limits.clock_max_error_s, limits.heartbeat_max_age_s) == (0.4, 90.0)
