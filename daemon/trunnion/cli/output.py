"""What a command says: tables for people, JSON alone on standard output, the rest on stderr."""

import json
import os
import sys
from collections.abc import Callable, Iterable, Iterator, Mapping, Sequence
from contextlib import contextmanager
from typing import Literal, TypeVar

from trunnion.sky.instants import format_utc

Item = TypeVar("Item")

_WIDTH_WITHOUT_TERMINAL = 160


def print_json(value: object) -> None:
    """Print a value as JSON; a number that is not finite is a mistake of ours, and raises."""
    print_text(json.dumps(value, indent=2, ensure_ascii=False, allow_nan=False))


def print_text(text: str) -> None:
    """Print the result of a command as it is."""
    sys.stdout.write(text.removesuffix("\n") + "\n")


def print_table(title: str, columns: Sequence[str], rows: Iterable[Sequence[str]]) -> None:
    """Print rows under their columns; a column whose name ends in a unit in brackets is numeric.

    As wide as the terminal; elsewhere as wide as `COLUMNS` says, or wide enough for most.
    """
    from rich.box import SIMPLE_HEAD
    from rich.console import Console
    from rich.table import Table
    from rich.text import Text

    table = Table(box=SIMPLE_HEAD, padding=(0, 1, 0, 0), pad_edge=False, show_edge=False)
    for column in columns:
        justify: Literal["left", "right"] = "right" if column.endswith("]") else "left"
        table.add_column(Text(column), justify=justify, overflow="fold")
    for row in rows:
        table.add_row(*map(Text, row))
    is_width_known = sys.stdout.isatty() or "COLUMNS" in os.environ
    width = None if is_width_known else _WIDTH_WITHOUT_TERMINAL
    console = Console(file=sys.stdout, width=width)
    console.print(Text(title, "bold"), soft_wrap=True)
    console.print(table)


def say(message: str) -> None:
    """Tell the user something that is not the result, on standard error."""
    sys.stderr.write(f"{message}\n")


@contextmanager
def progress(label: str, total: float) -> Iterator[Callable[[float], None]]:
    """Show a bar on standard error while something long goes on, if it is a terminal.

    What is yielded takes how much more is done, in the unit of the total.
    """
    if not sys.stderr.isatty():
        yield lambda _: None
        return
    from rich.console import Console
    from rich.progress import Progress

    with Progress(console=Console(stderr=True), transient=True) as bar:
        task = bar.add_task(label, total=total)
        yield lambda more: bar.advance(task, more)


def moment(utc_s: float | None) -> str:
    """Return UTC for a table whose column says so, to the second where it is a whole one."""
    if utc_s is None:
        return "–"
    digits = 0 if utc_s == int(utc_s) else 3
    return format_utc(utc_s, digits).removesuffix("Z").replace("T", " ")


def number(value: float | None, digits: int) -> str:
    """Return a number for a table; a dash stands for none."""
    return "–" if value is None else f"{value:.{digits}f}"


def flattened(value: Mapping[str, object], above: str = "") -> Iterator[tuple[str, str]]:
    """Yield the names and the words of a nested result, for a table of two columns."""
    for key, inner in value.items():
        name = f"{above}{_in_words(key)}"
        if isinstance(inner, Mapping):
            yield from flattened(inner, f"{name}: ")
        elif isinstance(inner, list):
            yield name, "; ".join(map(_word, inner)) or "none"
        else:
            yield name, _word(inner)


_UNITS = (("_m_s", "m/s"), ("_deg", "°"), ("_km", "km"), ("_s", "s"))
"""Endings of keys, the longer before the shorter, and how their units are written."""


def _in_words(key: str) -> str:
    """Return a key as people read it: `reading_age_s` is "reading age [s]"."""
    for ending, unit in _UNITS:
        if key.endswith(ending):
            return f"{key.removesuffix(ending).replace('_', ' ')} [{unit}]"
    return key.replace("_", " ")


def _word(value: object) -> str:
    if isinstance(value, bool):
        return "yes" if value else "no"
    if isinstance(value, float):
        return f"{value:.3f}"
    return "none" if value is None else str(value)
