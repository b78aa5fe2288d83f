"""Batches of entries to the records file, come what may to the disk: no thread, no queue."""

import logging
import sqlite3
from collections.abc import Iterable
from contextlib import suppress
from pathlib import Path

from trunnion.service.clock import Clock
from trunnion.service.records.damage import is_damaged, set_aside
from trunnion.service.records.retention import Retention
from trunnion.service.records.schema import ForeignFile
from trunnion.service.records.store import RecordStore
from trunnion.service.records.values import ContactEnd, ContactStart, Entry, Sample

_log = logging.getLogger(__name__)

_MOST_KEPT_OVER_A_FAILURE = 500


class Journal:
    """Opens the file when it is needed, and anew when it is gone or damaged.

    No method raises for want of a disk: what cannot be written is dropped and counted, samples
    first, `trouble` says why, and writing resumes by itself.
    """

    def __init__(self, path: Path, clock: Clock, retention: Retention | None = None) -> None:
        self._path = path
        self._clock = clock
        self._retention = retention or Retention()
        self._batch: list[Entry] = []
        self._store: RecordStore | None = None
        self._under_way: ContactStart | None = None
        self.dropped = 0
        self.trouble: str | None = None

    def write(self, entries: Iterable[Entry]) -> None:
        """Write these, and what was kept over an earlier failure."""
        self._batch += entries
        try:
            self._write()
        except (sqlite3.Error, OSError, ForeignFile) as error:
            self._tell(error)
            self._keep_over_a_failure()
            self._recover(error)
        except Exception as error:  # noqa: BLE001 - a mistake of ours in one entry must not end the records
            self._tell(error)
            self._lose_all()

    def close(self) -> None:
        """Let go of the file; the next write opens it again."""
        store, self._store = self._store, None
        if store is not None:
            with suppress(sqlite3.Error, OSError):
                store.close()

    def _write(self) -> None:
        store = self._opened()
        store.write(self._batch)
        self._under_way = _under_way_after(self._batch, self._under_way)
        self._batch = []
        store.forget(self._retention, self._clock.utc_s())
        if self.trouble is not None:
            _log.info("records are written again; %d entries were lost", self.dropped)
            self.trouble = None

    def _opened(self) -> RecordStore:
        """The file, made anew where it is gone; the contact under way begins anew in it."""
        if self._store is not None and not self._store.is_in_place():
            _log.error("the records were removed from %s; new ones are begun", self._path)
            self.close()
        if self._store is None:
            self._store = RecordStore(self._path)
            if self._under_way is not None:
                self._batch.insert(0, self._under_way)
                self._under_way = None
        return self._store

    def _keep_over_a_failure(self) -> None:
        """Samples may go; what began, ended and happened is kept for the next attempt."""
        kept: list[Entry] = [entry for entry in self._batch if not isinstance(entry, Sample)]
        kept = kept[-_MOST_KEPT_OVER_A_FAILURE:]
        self.dropped += len(self._batch) - len(kept)
        self._batch = kept

    def _lose_all(self) -> None:
        self.dropped += len(self._batch)
        self._batch = []

    def _tell(self, error: Exception) -> None:
        if self.trouble is None:
            _log.error("records cannot be written to %s: %s", self._path, error)
        self.trouble = f"records cannot be written: {error}"

    def _recover(self, error: Exception) -> None:
        """Begin a new file where the old one is damaged; it is moved aside, not removed."""
        if not is_damaged(error):
            return
        self.close()
        with suppress(OSError):
            _log.error("the damaged records were moved to %s", set_aside(self._path))


def _under_way_after(batch: Iterable[Entry], before: ContactStart | None) -> ContactStart | None:
    """The contact that has begun and not ended once all of these are written."""
    under_way = before
    for entry in batch:
        if isinstance(entry, ContactStart):
            under_way = entry
        elif isinstance(entry, ContactEnd):
            under_way = None
    return under_way
