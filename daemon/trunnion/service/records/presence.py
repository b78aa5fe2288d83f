"""Whether the writer of a records file is alive: a lock that the kernel lifts when it dies."""

import fcntl
import os
from contextlib import suppress
from pathlib import Path

_READABLE_BY_THE_GROUP = 0o640


class Presence:
    """Holds the lock until closed. Raises OSError; BlockingIOError where another writer lives."""

    def __init__(self, records_path: Path) -> None:
        flags = os.O_RDWR | os.O_CREAT | os.O_CLOEXEC
        self._file = os.fdopen(os.open(_lock_path(records_path), flags, _READABLE_BY_THE_GROUP))
        try:
            fcntl.flock(self._file, fcntl.LOCK_EX | fcntl.LOCK_NB)
        except BlockingIOError as error:
            self._file.close()
            raise BlockingIOError(error.errno, "another daemon writes to this file") from error

    def close(self) -> None:
        """Let go of it; idempotent."""
        self._file.close()


def is_being_written(records_path: Path) -> bool:
    """Whether somebody writes to these records at this moment."""
    with suppress(FileNotFoundError, PermissionError), _lock_path(records_path).open("rb") as file:
        try:
            fcntl.flock(file, fcntl.LOCK_SH | fcntl.LOCK_NB)
        except BlockingIOError:
            return True
    return False


def _lock_path(records_path: Path) -> Path:
    return records_path.with_name(records_path.name + ".lock")
