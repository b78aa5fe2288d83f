"""Angle tables: CSV with a time, an azimuth and an elevation a row."""

import csv
from collections.abc import Iterator
from io import StringIO
from pathlib import Path

from trunnion.files.problems import FileProblems, Problem, did_you_mean
from trunnion.files.reading import read_text
from trunnion.sky.angle_table import AngleTable, Row, row_problems
from trunnion.sky.instants import parse_utc

LIMIT_BYTES = 20_000_000
COLUMNS = ("time", "azimuth_deg", "elevation_deg")
OPTIONAL = ("range_km",)


def load_angle_table(path: Path) -> AngleTable:
    """Return the table as a target that is named by its file.

    The first line names the columns: `time` (ISO 8601 with Z or an offset), `azimuth_deg`,
    `elevation_deg` and, if known, `range_km`. Raises FileProblems with everything wrong.
    """
    return read_angle_table(path, read_text(path, LIMIT_BYTES))


def read_angle_table(path: Path, text: str) -> AngleTable:
    """Return the table in a text; raises FileProblems."""
    reader = csv.reader(StringIO(text))
    try:
        lines = [(reader.line_num, [cell.strip() for cell in cells]) for cells in reader if cells]
    except csv.Error as error:
        message = f"expected comma-separated values: {error}"
        raise _problems(path, [(reader.line_num, message)]) from None
    if not lines:
        raise _problems(path, [(None, f"expected a first line {','.join(COLUMNS)}, got none")])
    (header_line, header), *body = lines
    wrong = list(_header_problems(header))
    if wrong:
        raise _problems(path, [(header_line, each) for each in wrong])
    rows, problems = _rows(header, body)
    problems = problems or [
        (body[min(index, len(body) - 1)][0] if body else header_line, sentence)
        for index, sentence in row_problems(rows)
    ]
    if problems:
        raise _problems(path, problems)
    return AngleTable(path.stem, rows)


def _header_problems(header: list[str]) -> Iterator[str]:
    known = (*COLUMNS, *OPTIONAL)
    for name in COLUMNS:
        if name not in header:
            yield f"expected a column {name!r} in {','.join(header)[:100]!r}"
    for name in header:
        if name not in known:
            yield f"expected the columns {', '.join(known)}, got {name[:40]!r}" + did_you_mean(
                name, known
            )
        elif header.count(name) > 1:
            yield f"expected each column once, got {name!r} again"


def _rows(
    header: list[str], body: list[tuple[int, list[str]]]
) -> tuple[tuple[Row, ...], list[tuple[int | None, str]]]:
    rows: list[Row] = []
    problems: list[tuple[int | None, str]] = []
    for line, cells in body:
        try:
            rows.append(_row(header, cells))
        except ValueError as error:
            problems.append((line, str(error)))
    return tuple(rows), problems


def _row(header: list[str], cells: list[str]) -> Row:
    if len(cells) != len(header):
        raise ValueError(f"expected {len(header)} values, got {len(cells)}")
    row = dict(zip(header, cells, strict=True))
    distance = row.get("range_km", "")
    return Row(
        parse_utc(row["time"]),
        _number(row["azimuth_deg"]),
        _number(row["elevation_deg"]),
        _number(distance) if distance else None,
    )


def _number(text: str) -> float:
    try:
        return float(text)
    except ValueError:
        raise ValueError(f"expected a number, got {text[:40]!r}") from None


def _problems(path: Path, found: list[tuple[int | None, str]]) -> FileProblems:
    return FileProblems(Problem(str(path), line, "", sentence) for line, sentence in found)
