"""A wind that is always the same: for rehearsals, and for stations inside a radome."""

from collections.abc import Mapping
from pathlib import Path
from typing import Annotated, Self

from pydantic import Field

from trunnion_drivers.interface.values import Clock
from trunnion_drivers.interface.wind import STRONGEST_M_S, WindInput, WindReading
from trunnion_drivers.settings import Settings, checked

Speed = Annotated[float, Field(ge=0.0, le=STRONGEST_M_S)]


class FixedWindSettings(Settings):
    """The wind, in metres a second."""

    speed_m_s: Speed
    gust_m_s: Speed | None = None


class FixedWind(WindInput):
    """Says what its settings say."""

    def __init__(self, settings: FixedWindSettings, clock: Clock) -> None:
        super().__init__(clock)
        self._settings = settings

    @classmethod
    def from_settings(cls, settings: Mapping[str, object], folder: Path, clock: Clock) -> Self:  # noqa: ARG003 - no paths here
        """Build it. Raises BadSettings."""
        return cls(checked(FixedWindSettings, settings), clock)

    def _open(self) -> None:
        pass

    def _close(self) -> None:
        pass

    def _read(self) -> WindReading:
        now_s = self._clock.monotonic_s()
        return WindReading(now_s, self._settings.speed_m_s, self._settings.gust_m_s)
