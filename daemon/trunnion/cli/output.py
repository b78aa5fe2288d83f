"""What a command says: tables for people, JSON alone on standard output, the rest on stderr."""

import json
import sys
from collections.abc import Iterable, Iterator, Mapping, Sequence
from typing import TypeVar

Item = TypeVar("Item")

_WIDTH_WITHOUT_TERMINAL = 160


def print_json(value: object) -> None:
    """Print a value as JSON; a number that is not finite is a mistake of ours, and raises."""
    print_text(json.dumps(value, indent=2, ensure_ascii=False, allow_nan=False))


def print_text(text: str) -> None:
    """Print the result of a command as it is."""
    sys.stdout.write(text.removesuffix("\n") + "\n")


def print_table(title: str, columns: Sequence[str], rows: Iterable[Sequence[str]]) -> None:
    """Print rows under their columns; a column whose name ends in a unit in brackets is numeric."""
    from rich.box import SIMPLE_HEAD
    from rich.console import Console
    from rich.table import Table
    from rich.text import Text

    table = Table(box=SIMPLE_HEAD, pad_edge=False)
    for column in columns:
        table.add_column(Text(column), justify="right" if column.endswith("]") else "left")
    for row in rows:
        table.add_row(*map(Text, row))
    width = None if sys.stdout.isatty() else _WIDTH_WITHOUT_TERMINAL
    console = Console(file=sys.stdout, width=width)
    console.print(Text(title, "bold"), soft_wrap=True)
    console.print(table)


def say(message: str) -> None:
    """Tell the user something that is not the result, on standard error."""
    sys.stderr.write(f"{message}\n")


def number(value: float | None, digits: int) -> str:
    """Return a number for a table; a dash stands for none."""
    return "–" if value is None else f"{value:.{digits}f}"


def flattened(value: Mapping[str, object], above: str = "") -> Iterator[tuple[str, str]]:
    """Yield the names and the words of a nested result, for a table of two columns."""
    for key, inner in value.items():
        name = f"{above}{key.replace('_', ' ')}"
        if isinstance(inner, Mapping):
            yield from flattened(inner, f"{name}: ")
        elif isinstance(inner, list):
            yield name, ", ".join(map(str, inner)) or "none"
        else:
            yield name, _word(inner)


def _word(value: object) -> str:
    if isinstance(value, bool):
        return "yes" if value else "no"
    return "none" if value is None else str(value)
