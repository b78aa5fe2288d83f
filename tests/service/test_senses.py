"""What the station senses beside its mount, from its file to the gate's world."""

from collections.abc import Mapping
from pathlib import Path

import pytest

from tests.service.stations import NO_WIND, station_with
from trunnion.files.problems import FileProblems
from trunnion.service.clock import SystemClock
from trunnion.service.clock_trust import clock_error_s
from trunnion.service.link.status import LinkState, LinkStatus
from trunnion.service.senses import Sensed, senses_of
from trunnion.service.surroundings import world_of

ALL = {
    "speed_m_s: 4": "gust_m_s: 9.5\n  speed_m_s: 7.25",
    "heartbeat: null": "heartbeat: beat",
    "heartbeat_max_age_s: null": "heartbeat_max_age_s: 60",
    "wind_stow_gust_m_s: null": "wind_stow_gust_m_s: 17.5",
}


def test_a_station_with_sensors_senses(tmp_path: Path) -> None:
    clock = SystemClock()
    senses = senses_of(station_with(tmp_path, ALL), clock)
    (tmp_path / "beat").touch()
    for _ in range(500):
        if senses.now().wind_mean_m_s is not None:
            break
        clock.sleep(0.01)
    sensed = senses.now()
    senses.close()
    assert (sensed.wind_mean_m_s, sensed.wind_gust_m_s) == (7.25, 9.5)
    assert sensed.heartbeat_age_s is not None
    assert sensed.heartbeat_age_s < 60.0
    assert senses.trouble is None


def test_a_station_without_knows_its_clock_alone(tmp_path: Path) -> None:
    senses = senses_of(station_with(tmp_path, NO_WIND), SystemClock())
    assert senses.now()[1:] == (None, None, None, None)
    assert (senses.now().clock_error_s is None) == (clock_error_s() is None)
    senses.close()


def test_the_gate_is_told_all_of_it() -> None:
    sensed = Sensed(0.013, 9.5, 7.25, 3.5)
    world = world_of(None, LinkStatus(LinkState.UP), 0.0, sensed)
    assert (world.clock_error_s, world.wind_gust_m_s) == (0.013, 9.5)
    assert (world.wind_mean_m_s, world.heartbeat_age_s) == (7.25, 3.5)


@pytest.mark.parametrize(
    ("changes", "words"),
    [
        (
            {**NO_WIND, "wind_stow_gust_m_s: null": "wind_stow_gust_m_s: 17.5"},
            "safety.wind_stow_gust_m_s",
        ),
        (
            {**NO_WIND, "wind_stow_mean_m_s: null": "wind_stow_mean_m_s: 9"},
            "safety.wind_stow_mean_m_s",
        ),
        ({"heartbeat_max_age_s: null": "heartbeat_max_age_s: 60"}, "safety.heartbeat_max_age_s"),
        ({"heartbeat: null": "heartbeat: beat"}, "files.heartbeat: expected safety"),
    ],
)
def test_a_limit_without_its_sensor_is_a_mistake(
    tmp_path: Path, changes: Mapping[str, str], words: str
) -> None:
    with pytest.raises(FileProblems, match=words):
        station_with(tmp_path, changes)
