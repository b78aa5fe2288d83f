"""Puts on record what the control turn tells, in a thread of its own: it never waits for a disk."""

from collections.abc import Mapping
from contextlib import suppress
from pathlib import Path
from queue import Empty, SimpleQueue
from threading import Event as Signal
from threading import Thread

from trunnion.service.clock import Clock
from trunnion.service.records.journal import Journal
from trunnion.service.records.retention import Retention
from trunnion.service.records.values import (
    ContactEnd,
    ContactStart,
    Entry,
    Event,
    EventKind,
    Outcome,
    Sample,
)

BATCH_S = 1.0
"""Entries of this long are written in one go."""
MOST_WAITING = 20_000
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
        self._journal = Journal(path, clock, retention)
        self._most_waiting = most_waiting
        self._waiting: SimpleQueue[Entry | Signal] = SimpleQueue()
        self._hurry = Signal()
        self._is_closing = False
        self._overflow = 0
        self._thread = Thread(target=self._run, name="records", daemon=True)
        self._thread.start()

    @property
    def trouble(self) -> str | None:
        """Why nothing is being written at this moment; None while all is well."""
        return self._journal.trouble

    @property
    def dropped(self) -> int:
        """Entries that were lost since the start."""
        return self._overflow + self._journal.dropped

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
            self._overflow += 1

    def _run(self) -> None:
        is_last = False
        while not is_last:
            self._hurry.wait(BATCH_S)
            self._hurry.clear()
            is_last = self._is_closing
            self._write_what_waits()
        self._journal.close()

    def _write_what_waits(self) -> None:
        entries, flushed = self._take()
        self._journal.write(entries)
        for signal in flushed:
            signal.set()

    def _take(self) -> tuple[list[Entry], list[Signal]]:
        entries, flushed = list[Entry](), list[Signal]()
        with suppress(Empty):
            while True:
                entry = self._waiting.get_nowait()
                if isinstance(entry, Signal):
                    flushed.append(entry)
                else:
                    entries.append(entry)
        return entries, flushed
