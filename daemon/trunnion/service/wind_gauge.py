"""The wind as the gate is told it: mean and gust, or unknown as soon as nothing new comes."""

from contextlib import suppress
from typing import NamedTuple

from trunnion.service.clock import Clock
from trunnion_drivers.interface.errors import DriverError
from trunnion_drivers.interface.wind import WindInput, WindRecord


class Wind(NamedTuple):
    """Mean over ten minutes and gust of ten minutes (m/s), and the second of the newest reading."""

    taken_s: float
    mean_m_s: float | None
    gust_m_s: float | None


class WindGauge:
    """One wind input, opened and reopened; no method raises. `look` is for one thread.

    A reading older than `max_age_s` counts for nothing.
    """

    def __init__(self, source: WindInput, clock: Clock, max_age_s: float) -> None:
        self._source = source
        self._clock = clock
        self._max_age_s = max_age_s
        self._record = WindRecord()
        self._wind: Wind | None = None
        self._trouble: str | None = "the wind was not read yet"

    @property
    def trouble(self) -> str | None:
        """Why the last reading failed, if it did."""
        return self._trouble

    def wind(self) -> Wind | None:
        """The wind now; None where it is not known. From any thread."""
        wind = self._wind
        is_old = wind is None or self._clock.monotonic_s() - wind.taken_s > self._max_age_s
        return None if is_old else wind

    def look(self) -> None:
        """Read the input; this may take as long as the input likes."""
        try:
            self._source.open()
            reading = self._source.read()
        except Exception as error:  # noqa: BLE001 - other people's inputs: the daemon must outlive any
            named = "" if isinstance(error, DriverError) else f"{type(error).__name__}: "
            self._trouble = f"wind: {named}{error}"
            self.close()
            return
        self._record.note(reading)
        self._wind = Wind(reading.taken_s, self._record.mean_m_s(), self._record.gust_m_s())
        self._trouble = None

    def close(self) -> None:
        """Let go of the input; it is opened anew at the next look."""
        with suppress(Exception):  # other people's inputs
            self._source.close()
