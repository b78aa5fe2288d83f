"""Orbit element files: two or three lines a satellite, many in a file, many files in a folder."""

from collections.abc import Iterator, Sequence
from pathlib import Path
from typing import NamedTuple

from trunnion.files.element_lines import catalogue_number, epoch_utc_s, faults
from trunnion.files.omm import Fault, element_set
from trunnion.files.omm_formats import Reader, reader_of
from trunnion.files.problems import FileProblems, Problem
from trunnion.files.reading import read_text
from trunnion.sky.elements import ElementSet

LIMIT_BYTES = 20_000_000
SUFFIXES = frozenset({".tle", ".txt", ".omm", ".kvn", ".xml", ".json", ".csv"})


class _Line(NamedTuple):
    number: int
    text: str

    @property
    def kind(self) -> str:
        """`1` or `2` for the lines of an element set, nothing for a name."""
        return self.text[0] if self.text[:2] in {"1 ", "2 "} else ""


def load_elements(path: Path) -> tuple[ElementSet, ...]:
    """Return every element set of a file, or of the element files of a folder, known by suffix.

    Mean-elements messages (OMM) in keywords, XML, JSON or CSV are known by their content.

    Else a set is two lines, with or without a line before them that names the satellite; that may
    begin with `0 `. Empty lines and lines that begin with `#` count for nothing. A satellite
    without a name is named by its catalogue number. Raises FileProblems with everything wrong.
    """
    found: list[ElementSet] = []
    problems: list[Problem] = []
    for file in _files(path):
        try:
            found.extend(_load_file(file))
        except FileProblems as error:
            problems.extend(error.problems)
    if problems:
        raise FileProblems(problems)
    return tuple(found)


def _files(path: Path) -> Sequence[Path]:
    if not path.is_dir():
        return [path]
    try:
        entries = sorted(path.iterdir())
    except OSError as error:
        message = f"cannot be read: {error.strerror}"
        raise FileProblems([Problem(str(path), None, "", message)]) from None
    files = [
        each
        for each in entries
        if each.suffix.lower() in SUFFIXES and not each.name.startswith(".") and each.is_file()
    ]
    if not files:
        message = "expected element files in the folder (.tle, .txt, .omm, …), got none"
        raise FileProblems([Problem(str(path), None, "", message)])
    return files


def _load_file(path: Path) -> list[ElementSet]:
    file = str(path)
    found: list[ElementSet] = []
    problems: list[Problem] = []
    text = read_text(path, LIMIT_BYTES)
    reader = reader_of(text)
    for item in _sets(list(_lines_with_content(text))) if reader is None else _omm(reader, text):
        if isinstance(item, ElementSet):
            found.append(item)
        else:
            problems.append(Problem(file, *item))
    if not found and not problems:
        problems.append(Problem(file, None, "", "expected orbit elements, got none"))
    if problems:
        raise FileProblems(problems)
    return found


def _lines_with_content(text: str) -> Iterator[_Line]:
    for number, line in enumerate(text.split("\n"), start=1):
        if line.strip() and not line.startswith("#"):
            yield _Line(number, line.rstrip())


def _omm(reader: Reader, text: str) -> Iterator[ElementSet | Fault]:
    """Element sets of mean-elements messages, and between them what is wrong."""
    place = 0
    try:
        for place, record in enumerate(reader(text), start=1):
            item = element_set(record)
            if isinstance(item, ElementSet):
                yield item
            else:
                yield from (_in_record(place, fault) for fault in item)
    except ValueError as error:
        yield None, "", str(error)


def _in_record(place: int, fault: Fault) -> Fault:
    line, key, message = fault
    return line, key, message if line is not None else f"record {place}: {message}"


def _sets(lines: Sequence[_Line]) -> Iterator[ElementSet | Fault]:
    """Element sets, and between them what is wrong."""
    place, name = 0, ""
    while place < len(lines):
        line = lines[place]
        following = lines[place + 1].kind if place + 1 < len(lines) else None
        match line.kind, following:
            case "1", "2":
                yield from _pair(name, line, lines[place + 1])
                place += 1
            case "1", _:
                yield line.number, "", "expected line 2 of the element set after it, got none"
            case "2", "1" if lines[place + 1].text[2:7] == line.text[2:7]:
                yield line.number, "", "expected line 1 before line 2, got them swapped"
                place += 1
            case "2", _:
                yield line.number, "", "expected line 1 of the element set before it, got none"
            case _, kind if kind not in {"1", "2"}:
                yield (
                    line.number,
                    "",
                    f"expected an element set after the name, got {line.text!r:.60}",
                )
        name = "" if line.kind else line.text
        place += 1


def _pair(name: str, first: _Line, second: _Line) -> Iterator[ElementSet | Fault]:
    wrong = [(line.number, "", fault) for line in (first, second) for fault in faults(line.text)]
    if wrong:
        yield from wrong
        return
    number = catalogue_number(first.text[2:7])
    if catalogue_number(second.text[2:7]) != number:
        yield (
            second.number,
            "",
            f"expected the catalogue number of line 1, {first.text[2:7]}, got {second.text[2:7]}",
        )
        return
    name = name.removeprefix("0 ").strip() or str(number)
    yield ElementSet(name, number, epoch_utc_s(first.text), first.text, second.text)
