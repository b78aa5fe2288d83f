"""Notices that a plan, or anything it was made from, was replaced on disk.

In a thread of its own: a disk that hangs makes no control turn late.
"""

from collections.abc import Iterable
from pathlib import Path
from threading import Event, Thread

Signature = tuple[tuple[str, int, int], ...]

LOOK_EVERY_S = 2.0


class FileWatch:
    """Looks at files and folders from time to time; lives until closed."""

    def __init__(self, paths: Iterable[Path]) -> None:
        self._paths = tuple(paths)
        self._is_closing = Event()
        self._has_changed = Event()
        self._seen = signature_of(self._paths)
        self._thread = Thread(target=self._run, name="file-watch", daemon=True)
        self._thread.start()

    def take_change(self) -> bool:
        """Whether anything was replaced since the last call."""
        if not self._has_changed.is_set():
            return False
        self._has_changed.clear()
        return True

    def close(self) -> None:
        """Look no more; does not wait."""
        self._is_closing.set()

    def _run(self) -> None:
        while not self._is_closing.wait(LOOK_EVERY_S):
            now = signature_of(self._paths)
            if now != self._seen:
                self._seen = now
                self._has_changed.set()


def signature_of(paths: Iterable[Path]) -> Signature:
    """Name, time of change and size of all files, those in folders included."""
    return tuple(_stamp(file) for path in paths for file in _files(path))


def _files(path: Path) -> list[Path]:
    try:
        return sorted(path.iterdir()) if path.is_dir() else [path]
    except OSError:  # not permitted, or gone since
        return [path]


def _stamp(file: Path) -> tuple[str, int, int]:
    try:
        found = file.stat()
    except OSError:
        return str(file), 0, 0
    return str(file), found.st_mtime_ns, found.st_size
