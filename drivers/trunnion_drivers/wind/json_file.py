"""Wind from a file that something else writes, as JSON."""

import time
from collections.abc import Mapping
from pathlib import Path
from typing import Annotated, Self

from pydantic import Field

from trunnion_drivers.interface.errors import LinkLost
from trunnion_drivers.interface.values import Clock
from trunnion_drivers.interface.wind import WindInput, WindReading
from trunnion_drivers.settings import Settings, checked
from trunnion_drivers.wind.json_text import wind_from_json


class JsonFileSettings(Settings):
    """The file; whoever writes it should write another one and rename it."""

    path: Annotated[str, Field(min_length=1)]


class JsonFileWind(WindInput):
    """A reading is as old as the file, by its time of modification when it is first seen."""

    def __init__(self, path: Path, clock: Clock) -> None:
        super().__init__(clock)
        self._path = path
        self._seen_ns: int | None = None
        self._taken_s = 0.0

    @classmethod
    def from_settings(cls, settings: Mapping[str, object], folder: Path, clock: Clock) -> Self:
        """Build it; opens nothing. Raises BadSettings."""
        return cls(folder / checked(JsonFileSettings, settings).path, clock)

    def _open(self) -> None:
        self._seen_ns = None

    def _close(self) -> None:
        pass

    def _read(self) -> WindReading:
        try:
            modified_ns = self._path.stat().st_mtime_ns
            text = self._path.read_bytes()
        except OSError as error:
            raise LinkLost(f"{self._path}: {error.strerror}") from error
        if modified_ns != self._seen_ns:
            self._seen_ns = modified_ns
            age_s = max(0.0, time.time() - modified_ns * 1e-9)
            self._taken_s = self._clock.monotonic_s() - age_s
        return wind_from_json(text, self._taken_s)
