"""The records of a flight on a disk that may be full, or lose the end of what was written."""

from collections.abc import Mapping
from pathlib import Path

from trunnion.service.clock import Clock
from trunnion.service.records.journal import Journal
from trunnion.service.records.store import RecordStore
from trunnion.service.records.values import (
    ContactEnd,
    ContactStart,
    Entry,
    Event,
    EventKind,
    Outcome,
    Sample,
)

BATCH = 10
"""Turns of so many are written in one go: a second's, as the daemon does."""


class TroubledBook:
    """The daemon's own journal, but for the disk under it; a Book for the recorder."""

    def __init__(self, path: Path, clock: Clock) -> None:
        self._path = path
        self._journal = Journal(path, clock)
        self._waiting: list[Entry] = []
        self._turns = 0

    @property
    def trouble(self) -> str | None:
        """Why nothing is being written at this moment."""
        return self._journal.trouble

    def begin_contact(self, start: ContactStart) -> None:
        """A contact begins."""
        self._waiting.append(start)

    def sample(self, sample: Sample) -> None:
        """One control turn of the contact under way."""
        self._waiting.append(sample)

    def end_contact(self, utc_s: float, outcome: Outcome, summary: Mapping[str, object]) -> None:
        """The contact under way ends."""
        self._waiting.append(ContactEnd(utc_s, outcome, summary))

    def event(self, utc_s: float, kind: EventKind, sentence: str) -> None:
        """Something happened that is worth a sentence."""
        self._waiting.append(Event(utc_s, kind, sentence))

    def turn_over(self, *, is_full: bool) -> None:
        """Write when it is time, and where there is room."""
        self._turns += 1
        if self._turns % BATCH == 0 and not is_full:
            waiting, self._waiting = self._waiting, []
            self._journal.write(waiting)

    def die(self, *, is_torn: bool) -> None:
        """End without a word; torn, the disk loses the end of what was written last."""
        disk = {each: each.read_bytes() for each in self._files() if each.exists()}
        self._journal.close()
        for file, content in disk.items():
            is_log = file != self._path
            file.write_bytes(content[: 2 * len(content) // 3] if is_torn and is_log else content)

    def _files(self) -> tuple[Path, Path]:
        return self._path, self._path.with_name(self._path.name + "-wal")


def cannot_open(path: Path) -> str | None:
    """Why the records that a flight has left cannot be opened; None where they can."""
    try:
        RecordStore(path).close()
    except Exception as error:  # noqa: BLE001 - whatever it is, that is what is asked
        return f"{type(error).__name__}: {error}"
    return None
