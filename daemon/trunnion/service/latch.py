"""The emergency stop on disk, so that neither a restart nor a power cut lifts it."""

from contextlib import suppress
from pathlib import Path

from trunnion.safety.emergency import EmergencyStop, decode, encode
from trunnion.service.durable_file import draft_of, remove_durably, write_durably

_LONGEST_BYTES = 64 * 1024


class EmergencyLatch:
    """One small file: there while stopped, gone while not; no method raises.

    A draft that was left behind, by a power cut or on a full disk, counts as a stop too.
    """

    def __init__(self, path: Path) -> None:
        self._path = path

    def read(self) -> EmergencyStop | None:
        """The stop that is latched; a file that cannot be read or understood counts as one."""
        for path in (self._path, draft_of(self._path)):
            with suppress(FileNotFoundError):
                return decode(_text(path))
        return None

    def write(self, stop: EmergencyStop) -> str | None:
        """Keep the stop over a restart; says what went wrong, if anything did."""
        try:
            write_durably(self._path, encode(stop))
        except OSError as error:
            return f"cannot write {self._path}: {error.strerror or error}"
        return None

    def clear(self) -> str | None:
        """Lift the stop; says what went wrong, if anything did, and then the stop stays."""
        try:
            remove_durably(self._path)
        except OSError as error:
            return f"cannot remove {self._path}: {error.strerror or error}"
        return None


def _text(path: Path) -> str:
    try:
        with path.open("rb") as file:
            return file.read(_LONGEST_BYTES).decode("utf-8", errors="replace")
    except FileNotFoundError:
        raise
    except OSError as error:
        return f"unreadable: {error}"
