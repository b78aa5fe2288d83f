"""The tables of the records file, and its version."""

import sqlite3

VERSION = 1
APPLICATION_ID = 0x54726E6E
"""Tells a records file from any other SQLite file (`PRAGMA application_id`)."""

SAMPLE_COLUMNS = (
    "utc_s",
    "phase",
    "target_azimuth_deg",
    "target_elevation_deg",
    "target_range_km",
    "error_deg",
    "demand_first_deg",
    "demand_second_deg",
    "demand_first_rate_deg_s",
    "demand_second_rate_deg_s",
    "order_first_deg",
    "order_second_deg",
    "order_first_rate_deg_s",
    "order_second_rate_deg_s",
    "reading_first_deg",
    "reading_second_deg",
    "reading_age_s",
    "rules",
)
"""The columns of a sample in order, less its key; an order without angles is a halt."""

_TABLES = f"""
    CREATE TABLE contact (
        id INTEGER PRIMARY KEY AUTOINCREMENT,
        begin_utc_s REAL NOT NULL,
        contact TEXT NOT NULL,
        target TEXT NOT NULL,
        planned_begin_s REAL NOT NULL,
        planned_end_s REAL NOT NULL,
        end_utc_s REAL,
        outcome TEXT,
        summary TEXT
    );
    CREATE TABLE sample (
        contact_id INTEGER NOT NULL,
        number INTEGER NOT NULL,
        {", ".join(SAMPLE_COLUMNS)},
        PRIMARY KEY (contact_id, number)
    ) WITHOUT ROWID;
    CREATE TABLE event (
        id INTEGER PRIMARY KEY,
        utc_s REAL NOT NULL,
        kind TEXT NOT NULL,
        sentence TEXT NOT NULL,
        contact_id INTEGER
    );
    PRAGMA application_id = {APPLICATION_ID};
    PRAGMA user_version = {VERSION};
"""


class ForeignFile(Exception):  # noqa: N818 - named for what it is
    """A SQLite file that is not a records file of this version."""


def version_of(connection: sqlite3.Connection) -> int:
    """The version of the tables, 0 in an empty file; raises ForeignFile for another program's."""
    (version,) = connection.execute("PRAGMA user_version").fetchone()
    (application,) = connection.execute("PRAGMA application_id").fetchone()
    (tables,) = connection.execute("SELECT count(*) FROM sqlite_schema").fetchone()
    if tables and application != APPLICATION_ID:
        raise ForeignFile("expected a records file, got another program's database")
    if version > VERSION:
        raise ForeignFile(f"expected tables of version {VERSION} or older, got {version}")
    return int(version)


def prepare(connection: sqlite3.Connection) -> None:
    """Make the tables in an empty file; leave those of this version. Raises ForeignFile."""
    if version_of(connection) == 0:
        connection.executescript(f"BEGIN IMMEDIATE; {_TABLES} COMMIT;")
