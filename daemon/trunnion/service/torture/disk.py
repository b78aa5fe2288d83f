"""The latch on a disk that may be full, or lose half of what was written when power goes."""

from pathlib import Path

from trunnion.safety.emergency import EmergencyStop
from trunnion.service.latch import EmergencyLatch


class TroubledLatch:
    """The daemon's own latch file, but for the disk under it."""

    def __init__(self, path: Path) -> None:
        self._path = path
        self._latch = EmergencyLatch(path)
        self.is_full = False

    def read(self) -> EmergencyStop | None:
        """What is on the disk."""
        return self._latch.read()

    def write(self, stop: EmergencyStop) -> str | None:
        """Write it where there is room."""
        return "no space left on device" if self.is_full else self._latch.write(stop)

    def clear(self) -> str | None:
        """Remove it."""
        return self._latch.clear()

    def tear(self) -> None:
        """Keep half of what was written last, as a power cut may; nothing where nothing was."""
        if self._path.exists():
            content = self._path.read_bytes()
            self._path.write_bytes(content[: len(content) // 2])
