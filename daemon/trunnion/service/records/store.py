"""The records file as its one writer has it: entries in, whole batches to disk."""

import json
import sqlite3
from collections.abc import Iterable, Mapping
from os.path import samestat
from pathlib import Path

from trunnion.service.records.presence import Presence
from trunnion.service.records.retention import Retention, forget_some
from trunnion.service.records.schema import SAMPLE_COLUMNS, prepare
from trunnion.service.records.values import (
    ContactEnd,
    ContactStart,
    Entry,
    Event,
    Outcome,
    Sample,
)

_INSERT_SAMPLE = f"INSERT INTO sample VALUES (?, ?, {', '.join('?' * len(SAMPLE_COLUMNS))})"  # noqa: S608 - constants alone
_PRAGMAS = (
    "PRAGMA journal_mode = WAL",
    "PRAGMA synchronous = NORMAL",
    f"PRAGMA journal_size_limit = {4 * 1024 * 1024}",
)
_BUSY_S = 2.0


class RecordStore:
    """One connection to the file; every method may raise sqlite3.Error, OSError or ForeignFile."""

    def __init__(self, path: Path) -> None:
        path.parent.mkdir(parents=True, exist_ok=True)
        self._presence = Presence(path)
        self._connection = sqlite3.connect(path, timeout=_BUSY_S, isolation_level=None)
        self._contact_id: int | None = None
        self._number = 0
        try:
            for pragma in _PRAGMAS:
                self._connection.execute(pragma)
            prepare(self._connection)
            self._end_what_was_interrupted()
            self._path, self._opened = path, path.stat()
        except BaseException:
            self.close()
            raise

    def is_in_place(self) -> bool:
        """Whether the file is still there; one that was removed is written to in vain."""
        try:
            return samestat(self._path.stat(), self._opened)
        except OSError:
            return False

    def write(self, batch: Iterable[Entry]) -> None:
        """Write all of it, or nothing."""
        before = self._contact_id, self._number
        self._connection.execute("BEGIN IMMEDIATE")
        try:
            for entry in batch:
                self._write(entry)
            self._connection.execute("COMMIT")
        except BaseException:
            self._contact_id, self._number = before
            if self._connection.in_transaction:
                self._connection.execute("ROLLBACK")
            raise

    def forget(self, retention: Retention, now_utc_s: float) -> None:
        """Remove a little of what is beyond the retention; to be called again and again."""
        forget_some(self._connection, retention, now_utc_s)

    def close(self) -> None:
        """Let go of the file."""
        self._connection.close()
        self._presence.close()

    def _write(self, entry: Entry) -> None:
        match entry:
            case Sample():
                self._write_sample(entry)
            case ContactStart():
                self._begin(entry)
            case ContactEnd():
                self._end(entry)
            case Event():
                self._connection.execute(
                    "INSERT INTO event (utc_s, kind, sentence, contact_id) VALUES (?, ?, ?, ?)",
                    (entry.utc_s, entry.kind.value, entry.sentence, self._contact_id),
                )

    def _begin(self, start: ContactStart) -> None:
        if self._contact_id is not None:
            self._end(ContactEnd(start.utc_s, Outcome.CUT_SHORT, {}))
        cursor = self._connection.execute(
            "INSERT INTO contact (begin_utc_s, contact, target, planned_begin_s, planned_end_s)"
            " VALUES (?, ?, ?, ?, ?)",
            start,
        )
        self._contact_id, self._number = cursor.lastrowid, 0

    def _write_sample(self, sample: Sample) -> None:
        if self._contact_id is not None:
            self._number += 1
            key = self._contact_id, self._number
            self._connection.execute(_INSERT_SAMPLE, key + _row(sample))

    def _end(self, end: ContactEnd) -> None:
        self._connection.execute(
            "UPDATE contact SET end_utc_s = ?, outcome = ?, summary = ? WHERE id = ?",
            (end.utc_s, end.outcome.value, _json(end.summary), self._contact_id),
        )
        self._contact_id = None

    def _end_what_was_interrupted(self) -> None:
        self._connection.execute(
            "UPDATE contact SET outcome = ?, end_utc_s ="
            " (SELECT max(utc_s) FROM sample WHERE contact_id = contact.id) WHERE outcome IS NULL",
            (Outcome.INTERRUPTED.value,),
        )


def _json(summary: Mapping[str, object]) -> str:
    try:
        return json.dumps(dict(summary), ensure_ascii=False, allow_nan=False)
    except (TypeError, ValueError) as error:
        return json.dumps({"unwritable": f"{error}: {summary!r}"}, ensure_ascii=False)


def _row(sample: Sample) -> tuple[object, ...]:
    look, reading = sample.look, sample.reading
    return (
        sample.utc_s,
        sample.phase,
        *((look.azimuth_deg, look.elevation_deg, look.range_km) if look else (None,) * 3),
        sample.error_deg,
        *(sample.demand or (None,) * 4),
        *(sample.order or (None,) * 4),
        *((reading.first_deg, reading.second_deg) if reading else (None,) * 2),
        sample.mono_s - reading.taken_s if reading else None,
        " ".join(sample.rules),
    )
