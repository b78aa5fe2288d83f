"""A records file that SQLite cannot read any more: moved aside, for somebody to look at."""

import sqlite3
from itertools import count
from pathlib import Path

_DAMAGED = (sqlite3.SQLITE_CORRUPT, sqlite3.SQLITE_NOTADB)
_PRIMARY_CODE = 0xFF  # extended result codes carry the primary one in their lowest byte


def is_damaged(error: Exception) -> bool:
    """Whether this error says that the file itself is broken."""
    code = getattr(error, "sqlite_errorcode", None)
    return code is not None and code & _PRIMARY_CODE in _DAMAGED


def set_aside(path: Path) -> Path:
    """Rename the file, and what belongs to it, to names that nobody uses; the new name."""
    for number in count(1):
        aside = path.with_name(f"{path.name}.damaged-{number}")
        if not aside.exists():
            break
    for suffix in ("-wal", "-shm"):
        part = path.with_name(path.name + suffix)
        if part.exists():
            part.rename(aside.with_name(aside.name + suffix))
    return path.rename(aside)
