"""Puts on record what the control turn tells, in a thread of its own: it never waits for a disk."""

import logging
import sqlite3
from collections.abc import Iterable, Mapping
from contextlib import suppress
from pathlib import Path
from queue import Empty, SimpleQueue
from threading import Event as Signal
from threading import Thread

from trunnion.service.clock import Clock
from trunnion.service.records.damage import is_damaged, set_aside
from trunnion.service.records.retention import Retention
from trunnion.service.records.schema import ForeignFile
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

_log = logging.getLogger(__name__)

BATCH_S = 1.0
"""Entries of this long are written in one go."""
MOST_WAITING = 20_000
_MOST_KEPT_OVER_A_FAILURE = 500
_LONGEST_GOODBYE_S = 10.0


class RecordWriter:
    """Takes in entries at once and writes them later; lives until closed.

    No method raises for want of a disk: what cannot be written is dropped and counted, samples
    first, `trouble` says why, and writing resumes by itself.
    """

    def __init__(
        self,
        path: Path,
        clock: Clock,
        retention: Retention | None = None,
        most_waiting: int = MOST_WAITING,
    ) -> None:
        self._path = path
        self._clock = clock
        self._retention = retention or Retention()
        self._most_waiting = most_waiting
        self._waiting: SimpleQueue[Entry | Signal] = SimpleQueue()
        self._batch: list[Entry] = []
        self._store: RecordStore | None = None
        self._under_way: ContactStart | None = None
        self._hurry = Signal()
        self._is_closing = False
        self._dropped = 0
        self._trouble: str | None = None
        self._thread = Thread(target=self._run, name="records", daemon=True)
        self._thread.start()

    @property
    def trouble(self) -> str | None:
        """Why nothing is being written at this moment; None while all is well."""
        return self._trouble

    @property
    def dropped(self) -> int:
        """Entries that were lost since the start."""
        return self._dropped

    def begin_contact(self, start: ContactStart) -> None:
        """A contact begins; samples and events belong to it until its end."""
        self._put(start)
        self._hurry.set()  # so that a death at its very beginning leaves a trace

    def sample(self, sample: Sample) -> None:
        """One control turn of the contact under way; outside a contact it is not kept."""
        self._put(sample)

    def end_contact(self, utc_s: float, outcome: Outcome, summary: Mapping[str, object]) -> None:
        """The contact under way ends; the summary must be what JSON can hold."""
        self._put(ContactEnd(utc_s, outcome, summary))

    def event(self, utc_s: float, kind: EventKind, sentence: str) -> None:
        """Something happened that is worth a sentence."""
        self._put(Event(utc_s, kind, sentence))

    def flush(self, timeout_s: float = 10.0) -> bool:
        """Wait until all that was told before is written, or dropped; False when time ran out."""
        written = Signal()
        self._waiting.put(written)
        self._hurry.set()
        return written.wait(timeout_s)

    def close(self) -> None:
        """Write what waits, and end; idempotent."""
        self._is_closing = True
        self._hurry.set()
        self._thread.join(_LONGEST_GOODBYE_S)

    def _put(self, entry: Entry) -> None:
        if self._waiting.qsize() < self._most_waiting:
            self._waiting.put(entry)
        else:
            self._dropped += 1

    def _run(self) -> None:
        is_last = False
        while not is_last:
            self._hurry.wait(BATCH_S)
            self._hurry.clear()
            is_last = self._is_closing
            self._write_what_waits()
        self._close_store()

    def _write_what_waits(self) -> None:
        flushed = self._take()
        try:
            self._write()
        except (sqlite3.Error, OSError, ForeignFile) as error:
            self._tell(error)
            self._keep_over_a_failure()
            self._recover(error)
        except Exception as error:  # noqa: BLE001 - a mistake of ours in one entry must not end the records
            self._tell(error)
            self._lose_all()
        for signal in flushed:
            signal.set()

    def _take(self) -> list[Signal]:
        flushed = list[Signal]()
        with suppress(Empty):
            while True:
                entry = self._waiting.get_nowait()
                if isinstance(entry, Signal):
                    flushed.append(entry)
                else:
                    self._batch.append(entry)
        return flushed

    def _write(self) -> None:
        store = self._opened()
        store.write(self._batch)
        self._under_way = _under_way_after(self._batch, self._under_way)
        self._batch = []
        store.forget(self._retention, self._clock.utc_s())
        if self._trouble is not None:
            _log.info("records are written again; %d entries were lost", self._dropped)
            self._trouble = None

    def _opened(self) -> RecordStore:
        """The file, made anew where it is gone; the contact under way begins anew in it."""
        if self._store is not None and not self._store.is_in_place():
            _log.error("the records were removed from %s; new ones are begun", self._path)
            self._close_store()
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
        self._dropped += len(self._batch) - len(kept)
        self._batch = kept

    def _lose_all(self) -> None:
        self._dropped += len(self._batch)
        self._batch = []

    def _tell(self, error: Exception) -> None:
        if self._trouble is None:
            _log.error("records cannot be written to %s: %s", self._path, error)
        self._trouble = f"records cannot be written: {error}"

    def _recover(self, error: Exception) -> None:
        """Begin a new file where the old one is damaged; it is moved aside, not removed."""
        if not is_damaged(error):
            return
        self._close_store()
        with suppress(OSError):
            _log.error("the damaged records were moved to %s", set_aside(self._path))

    def _close_store(self) -> None:
        store, self._store = self._store, None
        if store is not None:
            with suppress(sqlite3.Error, OSError):
                store.close()


def _under_way_after(batch: Iterable[Entry], before: ContactStart | None) -> ContactStart | None:
    """The contact that has begun and not ended once all of these are written."""
    under_way = before
    for entry in batch:
        if isinstance(entry, ContactStart):
            under_way = entry
        elif isinstance(entry, ContactEnd):
            under_way = None
    return under_way
