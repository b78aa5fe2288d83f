"""Where the Sun stands, for the circle round it; looked up anew every few seconds."""

from typing import Protocol

from trunnion.files.station import StationFile
from trunnion.service.clock import Clock
from trunnion.sky.errors import SkyError
from trunnion.sky.look import Look

EVERY_S = 2.0
"""In this time the Sun moves by less than a hundredth of a degree."""

TRUSTED_S = 60.0
"""A clock that may be wrong by more puts the Sun wrong by a quarter of a degree."""


class Sighted(Protocol):
    """Something in the sky, as the Sun is."""

    def look(self, utc_s: float) -> Look:
        """Where it stands."""
        ...


class SunWatch:
    """Asked once a turn; never raises."""

    def __init__(self, sun: Sighted, clock: Clock) -> None:
        self._sun = sun
        self._clock = clock
        self._looked_s = float("-inf")
        self._direction: tuple[float, float] | None = None

    def direction(self, clock_error_s: float | None) -> tuple[float, float] | None:
        """Azimuth and elevation (deg); None where nobody knows how far the clock is wrong."""
        if clock_error_s is None or not clock_error_s <= TRUSTED_S:
            return None
        utc_s = self._clock.utc_s()
        if abs(utc_s - self._looked_s) >= EVERY_S:
            self._looked_s, self._direction = utc_s, self._look(utc_s)
        return self._direction

    def _look(self, utc_s: float) -> tuple[float, float] | None:
        try:
            look = self._sun.look(utc_s)
        except SkyError:
            return None
        return look.azimuth_deg, look.elevation_deg


def sun_watch_of(station: StationFile, clock: Clock) -> SunWatch | None:
    """The watch of a station that keeps away from the Sun; raises SkyError for its sky's files."""
    if station.safety.sun_keep_out_deg is None:
        return None
    from trunnion.service.viewpoint import viewpoint_of
    from trunnion.sky.sun import Sun

    return SunWatch(Sun(viewpoint_of(station)), clock)
