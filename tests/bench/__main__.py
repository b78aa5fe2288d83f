"""The benchmark: `python -m tests.bench` or `python tests/bench`; exits with 1 for a figure missed.

Each module `bench_*.py` beside this one has a function `rows()`, which measures both sides of each
of its figures in the same run. Words on the command line choose modules whose names contain them;
modules whose names end with `_long` take half an hour and more and run only for such a word as
`long`.
"""

import sys
from collections.abc import Iterator
from importlib import import_module
from pathlib import Path

ROOT = Path(__file__).parents[2]
LONG = "_long"
if not __package__:
    sys.path.insert(0, str(ROOT))

from rich.console import Console  # noqa: E402 - after the path, so that both ways of calling work
from rich.table import Table  # noqa: E402

from tests.bench.row import Row  # noqa: E402


def main(words: list[str]) -> int:
    """Measure, print the table; the exit code."""
    names = modules(words)
    if not names:
        sys.exit(f"expected words that a module's name contains, got {' '.join(words)}")
    console = Console(width=None if sys.stdout.isatty() else 120)
    table = Table(title="Figures, each against its baseline in the same run")
    for column in ("figure", "ours", "baseline", "ratio", "limit", ""):
        table.add_column(column, justify="left" if column in {"figure", ""} else "right")
    missed = 0
    with console.status("") as status:
        for name in names:
            status.update(f"measuring {name} …")
            for row in measured(name):
                table.add_row(*cells(row), style=None if row.holds else "bold red")
                missed += not row.holds
    console.print(table)
    console.print(f"{missed} missed" if missed else "all met")
    return 1 if missed else 0


def modules(words: list[str]) -> list[str]:
    """The names of the modules to measure, in order."""
    found = sorted(path.stem for path in Path(__file__).parent.glob("bench_*.py"))
    brief = [name for name in found if not name.endswith(LONG)]
    long = [name for name in found if name.endswith(LONG)]
    if not words:
        return brief
    chosen = [name for name in brief if any(word in name for word in words)]
    return chosen + [
        name for name in long if any("long" in word and word in name for word in words)
    ]


def measured(name: str) -> Iterator[Row]:
    """The rows of one module; one that fails counts as a figure missed, and the others go on."""
    try:
        yield from import_module(f"tests.bench.{name}").rows()
    except Exception as error:  # noqa: BLE001 - one module's failure must not hide the others' figures
        yield Row(
            f"{name}: {type(error).__name__}: {error}", "failed", "", float("nan"), 0.0, False
        )


def cells(row: Row) -> tuple[str, ...]:
    """One line of the table."""
    sign = "≥" if row.is_at_least else "≤"
    verdict = "met" if row.holds else "MISSED"
    return (
        row.figure,
        row.ours,
        row.baseline,
        f"{row.ratio:.3g}",
        f"{sign} {row.limit:g}",
        verdict,
    )


if __name__ == "__main__":
    sys.exit(main(sys.argv[1:]))
