"""The two lines of an element set: their columns, their checksum, and what may stand in them.

Columns as NASA and the Space Force publish them (counted from 1 in the comments' source, from 0
here): the checksum is the sum of all digits, a minus sign counting one, modulo ten.
"""

import re
from collections.abc import Iterator
from datetime import UTC, datetime, timedelta
from typing import NamedTuple

WIDTH = 69
_EARLIEST_YEAR = 57
"""Two digits of a year from here on mean 19.., below it 20..; nothing was in orbit before 1957."""
_ALPHA_5 = "ABCDEFGHJKLMNPQRSTUVWXYZ"
"""First character of a catalogue number from 100 000 on: A is 10; I and O are left out."""

_DECIMAL = r" *\d+\.\d+ *"
_EXPONENT = r"[ +-]\d{5}[ +-]\d"


class Column(NamedTuple):
    """Where a value stands, what it looks like, and its bounds where it has some."""

    name: str
    begin: int
    end: int
    pattern: str
    bounds: tuple[float, float] | None = None


_NUMBER = Column("catalogue number", 2, 7, rf" *\d+|[{_ALPHA_5}]\d{{4}}")

LINE_1 = (
    _NUMBER,
    Column("epoch's year", 18, 20, r"[ \d]\d"),
    Column("epoch's day of the year", 20, 32, _DECIMAL, (1.0, 367.0)),
    Column("first derivative of the mean motion", 33, 43, r"[ +-]\d?\.\d{8}"),
    Column("second derivative of the mean motion", 44, 52, _EXPONENT),
    Column("drag term", 53, 61, _EXPONENT),
)
LINE_2 = (
    _NUMBER,
    Column("inclination", 8, 16, _DECIMAL, (0.0, 180.0)),
    Column("right ascension of the ascending node", 17, 25, _DECIMAL, (0.0, 360.0)),
    Column("eccentricity", 26, 33, r" *\d+"),
    Column("argument of perigee", 34, 42, _DECIMAL, (0.0, 360.0)),
    Column("mean anomaly", 43, 51, _DECIMAL, (0.0, 360.0)),
    Column("mean motion", 52, 63, _DECIMAL, (0.01, 20.0)),
)


def faults(line: str) -> Iterator[str]:
    """Everything wrong with line 1 or line 2, as sentences."""
    if not line.isascii():
        yield "expected plain ASCII characters"
    elif len(line) != WIDTH:
        yield f"expected {WIDTH} characters, got {len(line)}"
    elif line[-1] != str(checksum(line)):
        yield f"expected the checksum {checksum(line)}, got {line[-1]!r}"
    else:
        yield from _faults_in_columns(line, LINE_1 if line[0] == "1" else LINE_2)


def checksum(line: str) -> int:
    """The sum of all digits before the last column, a minus sign counting one, modulo ten."""
    body = line[: WIDTH - 1]
    return (sum(int(each) for each in body if each.isdigit()) + body.count("-")) % 10


def catalogue_number(text: str) -> int:
    """A catalogue number in five characters, from 100 000 on with a letter first (alpha-5)."""
    text = text.strip()
    if text[:1] in _ALPHA_5 and len(text) > 1:
        return (10 + _ALPHA_5.index(text[0])) * 10_000 + int(text[1:])
    return int(text)


def epoch_utc_s(line_1: str) -> float:
    """The epoch in line 1, UTC as POSIX seconds."""
    year = int(line_1[18:20])
    year += 1900 if year >= _EARLIEST_YEAR else 2000
    days = float(line_1[20:32]) - 1.0
    return (datetime(year, 1, 1, tzinfo=UTC) + timedelta(days=days)).timestamp()


def _faults_in_columns(line: str, columns: tuple[Column, ...]) -> Iterator[str]:
    for column in columns:
        text = line[column.begin : column.end]
        place = f"columns {column.begin + 1} to {column.end}"
        if not re.fullmatch(column.pattern, text):
            yield f"expected the {column.name} in {place}, got {text!r}"
        elif column.bounds and not column.bounds[0] <= float(text) <= column.bounds[1]:
            low, high = column.bounds
            yield f"expected the {column.name} from {low:g} to {high:g}, got {text.strip()}"
