"""The mount's angles on disk, so that steel stays where it was when the daemon dies.

One line of fixed length, overwritten in place by one system call: a killed process leaves the old
line or the new one. A machine that loses its power may leave neither.
"""

import fcntl
import os
from math import isfinite
from pathlib import Path

from trunnion_drivers.interface.errors import LinkLost

_LINE = "{:+025.12f} {:+025.12f}\n"
_LENGTH = len(_LINE.format(0.0, 0.0))


class Memory:
    """Angles (deg) of both joints in a file that one process at a time has open."""

    def __init__(self, path: Path) -> None:
        self._path = path
        try:
            self._descriptor = os.open(path, os.O_RDWR | os.O_CREAT | os.O_CLOEXEC, 0o644)
        except OSError as error:
            raise LinkLost(f"simulated mount: {path}: {error.strerror}") from error
        try:
            fcntl.flock(self._descriptor, fcntl.LOCK_EX | fcntl.LOCK_NB)
        except OSError as error:
            os.close(self._descriptor)
            raise LinkLost(f"simulated mount: {path}: another process has this mount") from error
        self._written = b""

    def recall(self) -> tuple[float, float] | None:
        """The angles last kept; None for a new file. Raises LinkLost where it is damaged."""
        line = os.pread(self._descriptor, _LENGTH + 1, 0)
        if not line:
            return None
        try:
            first_deg, second_deg = map(float, line.decode("ascii").split())
        except ValueError:
            first_deg = second_deg = float("nan")
        if len(line) != _LENGTH or not (isfinite(first_deg) and isfinite(second_deg)):
            raise LinkLost(
                f"simulated mount: {self._path}: expected two angles, got {line[:60]!r}; "
                "delete the file to begin at the start position"
            )
        return first_deg, second_deg

    def keep(self, first_deg: float, second_deg: float) -> None:
        """Remember these angles; costs nothing while they stay the same."""
        line = _LINE.format(first_deg, second_deg).encode("ascii")
        if line != self._written:
            os.pwrite(self._descriptor, line, 0)
            self._written = line

    def close(self) -> None:
        """Let go of the file."""
        os.close(self._descriptor)
