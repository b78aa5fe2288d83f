"""Wind from a command that prints JSON."""

import subprocess
from collections.abc import Mapping
from pathlib import Path
from typing import Annotated, Self

from pydantic import Field

from trunnion_drivers.interface.errors import LinkLost, NoReply
from trunnion_drivers.interface.values import Clock
from trunnion_drivers.interface.wind import WindInput, WindReading
from trunnion_drivers.settings import Settings, checked
from trunnion_drivers.wind.json_text import wind_from_json


class JsonCommandSettings(Settings):
    """The command and its arguments, run without a shell, and the time it is given."""

    command: Annotated[tuple[str, ...], Field(min_length=1, max_length=20)]
    within_s: Annotated[float, Field(gt=0.0, le=30.0)] = 5.0


class JsonCommandWind(WindInput):
    """Runs the command anew for every reading."""

    def __init__(self, settings: JsonCommandSettings, folder: Path, clock: Clock) -> None:
        super().__init__(clock)
        self._settings = settings
        self._folder = folder

    @classmethod
    def from_settings(cls, settings: Mapping[str, object], folder: Path, clock: Clock) -> Self:
        """Build it; runs nothing. Raises BadSettings."""
        return cls(checked(JsonCommandSettings, settings), folder, clock)

    def _open(self) -> None:
        pass

    def _close(self) -> None:
        pass

    def _read(self) -> WindReading:
        name, within_s = self._settings.command[0], self._settings.within_s
        try:
            done = subprocess.run(
                self._settings.command,
                cwd=self._folder,
                stdin=subprocess.DEVNULL,
                capture_output=True,
                timeout=within_s,
                check=True,
            )
        except subprocess.TimeoutExpired as error:
            raise NoReply(f"{name}: expected an answer within {within_s:g} s, got none") from error
        except subprocess.CalledProcessError as error:
            raise LinkLost(f"{name}: expected exit code 0, got {error.returncode}") from error
        except OSError as error:
            raise LinkLost(f"{name}: {error.strerror}") from error
        return wind_from_json(done.stdout, self._clock.monotonic_s())
