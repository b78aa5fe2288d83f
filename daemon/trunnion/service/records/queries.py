"""What the records tell: contacts, their samples, events. Reads while the daemon writes."""

import json
import sqlite3
from collections.abc import Generator, Iterator, Mapping
from contextlib import closing
from pathlib import Path
from typing import Any, NamedTuple, Self

from trunnion.service.errors import ServiceError
from trunnion.service.records.presence import is_being_written
from trunnion.service.records.schema import SAMPLE_COLUMNS, ForeignFile, version_of
from trunnion.service.records.values import EventKind, Outcome

_BUSY_S = 5.0
_CONTACT = (
    "SELECT id, contact, target, begin_utc_s, end_utc_s, planned_begin_s, planned_end_s, outcome,"
    " summary, (SELECT count(*) FROM sample WHERE contact_id = contact.id) FROM contact"
)


class NoRecords(ServiceError):  # noqa: N818 - named for what it means
    """There is no records file at this path, or it cannot be read."""


class ContactRecord(NamedTuple):
    """One contact as it went; `summary` is what was kept at its end, empty before."""

    contact_id: int
    contact: str
    target: str
    begin_utc_s: float
    end_utc_s: float | None
    planned_begin_s: float
    planned_end_s: float
    outcome: Outcome
    summary: Mapping[str, Any]
    samples: int


class SampleRecord(NamedTuple):
    """One control turn; an order of None is a halt, `rules` the names of the rules that acted."""

    utc_s: float
    phase: str
    target_azimuth_deg: float | None
    target_elevation_deg: float | None
    target_range_km: float | None
    error_deg: float | None
    demand_first_deg: float | None
    demand_second_deg: float | None
    demand_first_rate_deg_s: float | None
    demand_second_rate_deg_s: float | None
    order_first_deg: float | None
    order_second_deg: float | None
    order_first_rate_deg_s: float | None
    order_second_rate_deg_s: float | None
    reading_first_deg: float | None
    reading_second_deg: float | None
    reading_age_s: float | None
    rules: str


class EventRecord(NamedTuple):
    """Something that happened, during a contact or outside one."""

    utc_s: float
    kind: EventKind
    sentence: str
    contact_id: int | None


class Records:
    """One records file, open for reading. Raises NoRecords."""

    def __init__(self, path: Path) -> None:
        self._path = path
        self._connection = _opened(path)

    def contacts(self, limit: int = 100) -> tuple[ContactRecord, ...]:
        """The newest contacts, newest first."""
        rows = self._rows(f"{_CONTACT} ORDER BY id DESC LIMIT ?", limit)
        return tuple(self._contact(row) for row in rows)

    def contact(self, contact_id: int) -> ContactRecord | None:
        """One contact; None where there is none of this number."""
        for row in self._rows(f"{_CONTACT} WHERE id = ?", contact_id):
            return self._contact(row)
        return None

    def samples(self, contact_id: int) -> Generator[SampleRecord, None, None]:
        """The samples of one contact in order of time."""
        columns = ", ".join(SAMPLE_COLUMNS)
        query = f"SELECT {columns} FROM sample WHERE contact_id = ? ORDER BY number"  # noqa: S608 - constants alone
        return (SampleRecord(*row) for row in self._rows(query, contact_id))

    def events(self, limit: int = 100, contact_id: int | None = None) -> tuple[EventRecord, ...]:
        """The newest events, of one contact or of all, newest first."""
        query = (
            "SELECT utc_s, kind, sentence, contact_id FROM event"
            " WHERE ?1 IS NULL OR contact_id = ?1 ORDER BY id DESC LIMIT ?2"
        )
        rows = self._rows(query, contact_id, limit)
        return tuple(EventRecord(row[0], EventKind(row[1]), *row[2:]) for row in rows)

    def close(self) -> None:
        """Let go of the file."""
        self._connection.close()

    def __enter__(self) -> Self:
        return self

    def __exit__(self, *_: object) -> None:
        self.close()

    def _contact(self, row: tuple[Any, ...]) -> ContactRecord:
        *told, outcome, summary, samples = row
        kept = json.loads(summary) if summary else {}
        return ContactRecord._make((*told, self._outcome(outcome), kept, samples))

    def _outcome(self, outcome: str | None) -> Outcome:
        if outcome is not None:
            return Outcome(outcome)
        return Outcome.UNDER_WAY if is_being_written(self._path) else Outcome.INTERRUPTED

    def _rows(self, query: str, *values: object) -> Iterator[tuple[Any, ...]]:
        try:
            with closing(self._connection.execute(query, values)) as cursor:
                yield from cursor
        except sqlite3.Error as error:
            raise NoRecords(f"cannot read the records in {self._path}: {error}") from error


def _opened(path: Path) -> sqlite3.Connection:
    if not path.is_file():
        raise NoRecords(f"no records yet: expected a file at {path}")
    try:
        return _connected(path)
    except (sqlite3.Error, ForeignFile, OSError) as error:
        raise NoRecords(f"cannot read the records in {path}: {error}") from error


def _connected(path: Path) -> sqlite3.Connection:
    """Open for reading alone; where no writer is about, a folder that is read-only will do too."""
    log_is_there = path.with_name(path.name + "-wal").exists()
    mode = "mode=ro" if log_is_there or is_being_written(path) else "mode=ro&immutable=1"
    uri = f"{path.absolute().as_uri()}?{mode}"
    connection = sqlite3.connect(uri, uri=True, timeout=_BUSY_S)
    try:
        version_of(connection)
    except BaseException:
        connection.close()
        raise
    return connection
