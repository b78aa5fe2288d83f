"""The emergency stop on disk, so that neither a restart nor a power cut lifts it."""

import os
from contextlib import suppress
from pathlib import Path

from trunnion.safety.emergency import EmergencyStop, decode, encode

_LONGEST_BYTES = 64 * 1024


class EmergencyLatch:
    """One small file: there while stopped, gone while not; no method raises.

    The file is replaced whole, and both it and its folder are flushed to the disk before `write`
    returns. A draft that was left behind, by a power cut or on a full disk, counts as a stop too.
    """

    def __init__(self, path: Path) -> None:
        self._path = path
        self._draft = path.with_name(path.name + ".new")

    def read(self) -> EmergencyStop | None:
        """The stop that is latched; a file that cannot be read or understood counts as one."""
        for path in (self._path, self._draft):
            with suppress(FileNotFoundError):
                return decode(_text(path))
        return None

    def write(self, stop: EmergencyStop) -> str | None:
        """Keep the stop over a restart; says what went wrong, if anything did."""
        try:
            self._replace_by(encode(stop).encode(errors="replace"))
        except OSError as error:
            return f"cannot write {self._path}: {error.strerror or error}"
        return None

    def clear(self) -> str | None:
        """Lift the stop; says what went wrong, if anything did, and then the stop stays."""
        try:
            self._draft.unlink(missing_ok=True)
            self._path.unlink(missing_ok=True)
            self._flush_folder()
        except OSError as error:
            return f"cannot remove {self._path}: {error.strerror or error}"
        return None

    def _replace_by(self, content: bytes) -> None:
        with self._draft.open("wb") as file:
            file.write(content)
            file.flush()
            os.fsync(file.fileno())
        self._draft.replace(self._path)
        self._flush_folder()

    def _flush_folder(self) -> None:
        folder = os.open(self._path.parent, os.O_RDONLY | os.O_DIRECTORY)
        try:
            os.fsync(folder)
        finally:
            os.close(folder)


def _text(path: Path) -> str:
    try:
        with path.open("rb") as file:
            return file.read(_LONGEST_BYTES).decode("utf-8", errors="replace")
    except FileNotFoundError:
        raise
    except OSError as error:
        return f"unreadable: {error}"
