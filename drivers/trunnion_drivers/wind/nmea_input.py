"""Wind from NMEA 0183 sentences over a serial port, TCP or UDP."""

from collections.abc import Mapping
from pathlib import Path
from typing import Annotated, Protocol, Self
from urllib.parse import urlsplit

from pydantic import Field

from trunnion_drivers.interface.errors import NoReply
from trunnion_drivers.interface.values import Clock
from trunnion_drivers.interface.wind import WindInput, WindReading
from trunnion_drivers.serial_port.any_port import port_for
from trunnion_drivers.serial_port.settings import LineSettings, PortSettings
from trunnion_drivers.settings import checked
from trunnion_drivers.wind.nmea import sentences, wind_of
from trunnion_drivers.wind.udp import UdpPort

_LONGEST_BUFFER = 1024


class NmeaWindSettings(LineSettings):
    """Where the sentences come from: a serial URL, or `udp://address:port` to listen on.

    4800 baud is the standard's speed. A reading waits for a sentence `within_s` at most.
    """

    url: Annotated[str, Field(min_length=1)]
    baud_rate: Annotated[int, Field(ge=50, le=4_000_000)] = 4800
    within_s: Annotated[float, Field(gt=0.0, le=30.0)] = 3.0


class _Source(Protocol):
    def open(self) -> None: ...
    def close(self) -> None: ...
    def receive(self, until_s: float) -> bytes: ...


class NmeaWind(WindInput):
    """Says what the newest MWV sentence says."""

    def __init__(self, settings: NmeaWindSettings, clock: Clock) -> None:
        super().__init__(clock)
        self._within_s = settings.within_s
        self._source = _source(settings, clock)
        self._left = b""

    @classmethod
    def from_settings(cls, settings: Mapping[str, object], folder: Path, clock: Clock) -> Self:  # noqa: ARG003 - no paths here
        """Build it; opens nothing. Raises BadSettings."""
        read = checked(NmeaWindSettings, settings)
        if not _is_udp(read.url):
            checked(PortSettings, {"url": read.url})
        return cls(read, clock)

    def _open(self) -> None:
        self._left = b""
        self._source.open()

    def _close(self) -> None:
        self._source.close()

    def _read(self) -> WindReading:
        end_s = self._clock.monotonic_s() + self._within_s
        while self._clock.monotonic_s() < end_s:
            newest = self._newest(end_s)
            if newest is not None:
                return newest
        raise NoReply(f"expected an MWV sentence within {self._within_s:g} s, got none")

    def _newest(self, until_s: float) -> WindReading | None:
        come = self._left + self._source.receive(until_s)
        told, self._left = sentences(come)
        self._left = self._left[-_LONGEST_BUFFER:]
        winds = [wind for wind in map(wind_of, told) if wind is not None]
        if not winds:
            return None
        taken_s = self._clock.monotonic_s()
        return WindReading(taken_s, winds[-1].speed_m_s, None, winds[-1].direction_deg)


def _is_udp(url: str) -> bool:
    return url.startswith("udp://")


def _source(settings: NmeaWindSettings, clock: Clock) -> _Source:
    if _is_udp(settings.url):
        parts = urlsplit(settings.url)
        return UdpPort(parts.hostname or "", parts.port or 10110, clock)
    names = [name for name in LineSettings.model_fields if name in NmeaWindSettings.model_fields]
    line = {name: getattr(settings, name) for name in names}
    return port_for(PortSettings(url=settings.url, **line), clock)
