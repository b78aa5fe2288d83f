"""The tools that drivers bring along: each has a command line of its own, found by entry point."""

from importlib.metadata import entry_points
from pathlib import Path
from typing import NoReturn

import typer

from trunnion.cli.errors import FAILED
from trunnion.cli.output import say

GROUP = "trunnion.tools"
"""The entry-point group of functions that take a list of arguments and return an exit code."""

AS_TYPED = {"allow_extra_args": True, "ignore_unknown_options": True}


def bench(context: typer.Context) -> None:
    """Put a simulated mount where the station's driver looks for the real one."""
    _hand_over("bench", context.args)


def dialect(context: typer.Context) -> None:
    """Show what a dialect file would send, and how a captured answer is read."""
    _hand_over("dialect", context.args)


def commission(context: typer.Context) -> None:
    """Try a new mount step by step, slowly, with your agreement at each.

    Refused while a daemon has the mount, or an emergency stop is in force.
    """
    from trunnion.files.station import load_station
    from trunnion.service.commissioning import free_to_commission

    named = [Path(each) for each in context.args if Path(each).is_file()]
    if not named:
        _hand_over("commission", context.args)
    with free_to_commission(load_station(named[0]).files.latch):
        _hand_over("commission", context.args)


def _hand_over(name: str, arguments: list[str]) -> NoReturn:
    found = entry_points(group=GROUP, name=name)
    if not found:
        say(f"expected an installed tool {name!r}, and there is none; is the installation whole?")
        raise typer.Exit(FAILED)
    raise typer.Exit(next(iter(found)).load()(arguments))
