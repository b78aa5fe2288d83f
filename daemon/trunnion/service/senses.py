"""What the station senses beside its mount: wind, a heartbeat, its clock's quality, the Sun."""

from typing import NamedTuple, Protocol

from trunnion.files.station import StationFile
from trunnion.service.clock import Clock
from trunnion.service.clock_trust import clock_error_s
from trunnion.service.heartbeat_file import HeartbeatFile
from trunnion.service.sun_watch import SunWatch, sun_watch_of
from trunnion.service.wind_gauge import Wind, WindGauge
from trunnion.service.wind_watch import WindWatch
from trunnion.service.winds import build_wind


class Sensed(NamedTuple):
    """All of it at one instant, in the units of `World`; None stands for "not known"."""

    clock_error_s: float | None = None
    wind_gust_m_s: float | None = None
    wind_mean_m_s: float | None = None
    heartbeat_age_s: float | None = None
    sun: tuple[float, float] | None = None


FAIR = Sensed(clock_error_s=0.0, wind_gust_m_s=0.0, wind_mean_m_s=0.0, heartbeat_age_s=0.0)
"""A fair day with a good clock, as in a rehearsal."""


class WindSource(Protocol):
    """Whoever knows the wind."""

    @property
    def trouble(self) -> str | None:
        """Why it is not known, if so."""
        ...

    def wind(self) -> Wind | None:
        """The wind now."""
        ...

    def close(self) -> None:
        """Let go of it."""
        ...


class Senses:
    """Asked once a turn; no method raises or waits."""

    def __init__(
        self, wind: WindSource | None, heartbeat: HeartbeatFile | None, sun: SunWatch | None = None
    ) -> None:
        self._sun = sun
        self._wind = wind
        self._heartbeat = heartbeat

    @property
    def trouble(self) -> str | None:
        """What is wrong with the sensors, if anything."""
        return self._wind.trouble if self._wind is not None else None

    def now(self) -> Sensed:
        """What is sensed at this instant."""
        wind = self._wind.wind() if self._wind is not None else None
        error_s = clock_error_s()
        return Sensed(
            error_s,
            wind.gust_m_s if wind is not None else None,
            wind.mean_m_s if wind is not None else None,
            self._heartbeat.age_s() if self._heartbeat is not None else None,
            self._sun.direction(error_s) if self._sun is not None else None,
        )

    def close(self) -> None:
        """Let go of the sensors."""
        if self._wind is not None:
            self._wind.close()


def senses_of(station: StationFile, clock: Clock) -> Senses:
    """The station's sensors, which are read from now on. Raises FileProblems, SkyError."""
    source, path = build_wind(station, clock), station.files.heartbeat
    wind, sun = None, sun_watch_of(station, clock)
    if source is not None:
        wind = WindWatch(WindGauge(source, clock, station.safety.wind_max_age_s))
    heartbeat = None if path is None else HeartbeatFile(path, clock)
    return Senses(wind, heartbeat, sun)
