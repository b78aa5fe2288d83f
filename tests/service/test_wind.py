"""The wind on its way from an input to the gate."""

from collections import deque
from collections.abc import Mapping
from pathlib import Path
from typing import Self

import pytest

from tests.service.stations import NO_WIND, station_with
from trunnion.files.problems import FileProblems
from trunnion.service.clock import SystemClock, VirtualClock
from trunnion.service.wind_gauge import Wind, WindGauge
from trunnion.service.wind_watch import WindWatch
from trunnion.service.winds import build_wind
from trunnion_drivers.interface.errors import LinkLost, NoReply
from trunnion_drivers.interface.values import Clock
from trunnion_drivers.interface.wind import WindInput, WindReading


class ScriptedWind(WindInput):
    """Blows as scripted; an exception in the script is raised."""

    def __init__(self, clock: Clock, *script: float | Exception) -> None:
        super().__init__(clock)
        self.script = deque(script)
        self.opened = 0

    @classmethod
    def from_settings(cls, settings: Mapping[str, object], folder: Path, clock: Clock) -> Self:
        return cls(clock)

    def _open(self) -> None:
        self.opened += 1

    def _close(self) -> None:
        pass

    def _read(self) -> WindReading:
        said = self.script.popleft() if self.script else 4.7
        if isinstance(said, Exception):
            raise said
        return WindReading(self._clock.monotonic_s(), said)


@pytest.fixture
def clock() -> VirtualClock:
    return VirtualClock(1_893_456_123.75, 41.5)


def test_mean_and_gust_are_told_until_the_reading_is_too_old(clock: VirtualClock) -> None:
    gauge = WindGauge(ScriptedWind(clock, 5.0, 11.0), clock, max_age_s=10.0)
    assert gauge.wind() is None
    gauge.look()
    clock.sleep(5.0)
    gauge.look()
    assert gauge.wind() == Wind(46.5, 8.0, 11.0)
    clock.sleep(10.0)
    assert gauge.wind() is not None
    clock.sleep(0.25)
    assert gauge.wind() is None


def test_trouble_is_told_and_the_input_is_opened_anew(clock: VirtualClock) -> None:
    source = ScriptedWind(clock, 5.0, NoReply("no sentence"), ZeroDivisionError("a bug"), 6.0)
    gauge = WindGauge(source, clock, max_age_s=10.0)
    gauge.look()
    assert gauge.trouble is None
    gauge.look()
    assert gauge.trouble == "wind: no sentence"
    assert gauge.wind() is not None
    gauge.look()
    assert gauge.trouble == "wind: ZeroDivisionError: a bug"
    gauge.look()
    assert (gauge.trouble, source.opened) == (None, 3)


def test_an_input_that_never_opens_leaves_the_wind_unknown(clock: VirtualClock) -> None:
    gauge = WindGauge(ScriptedWind(clock, *[LinkLost("no such port")] * 5), clock, 10.0)
    for _ in range(5):
        gauge.look()
    assert gauge.wind() is None


def test_a_thread_reads_it_and_ends() -> None:
    clock = SystemClock()
    watch = WindWatch(WindGauge(ScriptedWind(clock), clock, max_age_s=10.0))
    for _ in range(500):
        if watch.wind() is not None:
            break
        clock.sleep(0.01)
    wind = watch.wind()
    watch.close()
    assert wind is not None
    assert wind.mean_m_s == pytest.approx(4.7)
    assert watch.trouble is None


def test_the_station_names_an_input_by_entry_point(tmp_path: Path) -> None:
    changes = {"speed_m_s: 4": "speed_m_s: 7.25"}
    source = build_wind(station_with(tmp_path, changes), SystemClock())
    assert source is not None
    source.open()
    assert source.read().speed_m_s == 7.25


def test_a_station_may_have_none(tmp_path: Path) -> None:
    assert build_wind(station_with(tmp_path, NO_WIND), SystemClock()) is None


@pytest.mark.parametrize(
    ("changes", "words"),
    [
        ({"kind: fixed ": "kind: fixd "}, "did you mean 'fixed'"),
        ({"  speed_m_s: 4": "  speed_ms: 4"}, "speed_m"),
    ],
)
def test_mistakes_in_it_are_told_with_their_line(
    tmp_path: Path, changes: Mapping[str, str], words: str
) -> None:
    station = station_with(tmp_path, changes)
    with pytest.raises(FileProblems, match=words) as caught:
        build_wind(station, SystemClock())
    assert "station.yaml:" in str(caught.value)
