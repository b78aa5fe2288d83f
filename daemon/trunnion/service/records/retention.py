"""How long records are kept, so that no disk ever fills up with them."""

import sqlite3
from dataclasses import dataclass
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from trunnion.files.station import StationFile

_SAMPLES_AT_ONCE = 10_000
_EVENTS_AT_ONCE = 1_000
_DAY_S = 86_400.0
_MIB = 1024 * 1024


@dataclass(frozen=True, slots=True)
class Retention:
    """How much is kept: contacts and events of so many days, and a file of about so many bytes.

    Beyond the size, the oldest samples go; the summaries of their contacts stay. The file keeps the
    room that it has had once, and uses it again.
    """

    longest_days: float | None = None
    largest_bytes: int = 512 * _MIB


def retention_of(station: "StationFile") -> Retention:
    """What the station file asks for."""
    return Retention(station.files.records_keep_days, station.files.records_most_mib * _MIB)


def forget_some(connection: sqlite3.Connection, retention: Retention, now_utc_s: float) -> None:
    """Remove a little of what is beyond the retention: one contact, some samples, some events.

    Days are counted back from the newest contact at the latest, so that a clock that was set far
    ahead by mistake does not cost everything.
    """
    if retention.longest_days is not None:
        newest_utc_s = _first(
            connection, "SELECT begin_utc_s FROM contact ORDER BY id DESC LIMIT 1"
        )
        if newest_utc_s is not None:
            now_utc_s = min(now_utc_s, newest_utc_s)
        _forget_older(connection, now_utc_s - retention.longest_days * _DAY_S)
    if _used_bytes(connection) > retention.largest_bytes:
        _forget_oldest(connection)


def _forget_older(connection: sqlite3.Connection, utc_s: float) -> None:
    old = "SELECT id FROM contact WHERE begin_utc_s < ? AND outcome IS NOT NULL LIMIT 1"
    contact_id = _first(connection, old, utc_s)
    connection.execute("BEGIN IMMEDIATE")
    if contact_id is not None:
        connection.execute("DELETE FROM sample WHERE contact_id = ?", (contact_id,))
        connection.execute("DELETE FROM contact WHERE id = ?", (contact_id,))
    connection.execute("DELETE FROM event WHERE utc_s < ?", (utc_s,))
    connection.execute("COMMIT")


def _forget_oldest(connection: sqlite3.Connection) -> None:
    gone = connection.execute(
        "DELETE FROM sample WHERE (contact_id, number) IN (SELECT contact_id, number"
        " FROM sample ORDER BY contact_id, number LIMIT ?)",
        (_SAMPLES_AT_ONCE,),
    ).rowcount
    if not gone:
        connection.execute(
            "DELETE FROM event WHERE id IN (SELECT id FROM event ORDER BY id LIMIT ?)",
            (_EVENTS_AT_ONCE,),
        )


def _used_bytes(connection: sqlite3.Connection) -> float:
    pages, free, page_bytes = (
        _first(connection, f"PRAGMA {name}") or 0
        for name in ("page_count", "freelist_count", "page_size")
    )
    return (pages - free) * page_bytes


def _first(connection: sqlite3.Connection, query: str, *values: object) -> float | None:
    row = connection.execute(query, values).fetchone()
    return None if row is None else row[0]
