"""An emergency stop asked for by a file: as long as it is there, the stop is there.

For whoever has a file system and nothing else: a script, a programmable controller with a share, a
person with `touch`. In a thread of its own, so that a disk that hangs makes no control turn late.
"""

from collections.abc import Callable
from pathlib import Path
from threading import Event, Thread

LOOK_EVERY_S = 0.05


class StopFile:
    """Looks for the file from construction on until closed; what cannot be looked at is there."""

    def __init__(self, path: Path, stop: Callable[[str], None]) -> None:
        self._path = path
        self._stop = stop
        self._is_closing = Event()
        self.look()  # a stop that is asked for already comes before the first order
        self._thread = Thread(target=self._run, name="stop-file", daemon=True)
        self._thread.start()

    def asked(self) -> str | None:
        """What is asked for at this moment, in words; None for nothing."""
        try:
            self._path.lstat()
        except FileNotFoundError:
            return None if self._path.parent.is_dir() else f"the folder of {self._path} is gone"
        except OSError as error:
            return f"cannot look for {self._path}: {error.strerror or error}"
        return f"the file {self._path} asks for it"

    def look(self) -> None:
        """Stop if it is asked for; again and again, as long as it is."""
        if cause := self.asked():
            self._stop(cause)

    def close(self) -> None:
        """Look no more; does not wait."""
        self._is_closing.set()

    def _run(self) -> None:
        while not self._is_closing.wait(LOOK_EVERY_S):
            self.look()
