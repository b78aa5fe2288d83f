"""`trunnion rehearse`: the whole daemon through a plan on the simulator, as fast as it goes."""

from typing import TYPE_CHECKING

import typer

from trunnion.cli.arguments import AsJson, OptionalPlan, Station
from trunnion.cli.contact_table import is_in_order, plain_results, print_results
from trunnion.cli.errors import FAILED
from trunnion.cli.output import print_json

if TYPE_CHECKING:
    from trunnion.service.rehearsal import Rehearsal


def rehearse(station: Station, *, plan: OptionalPlan = None, as_json: AsJson = False) -> None:
    """Fly a plan in virtual time: pilot, gate and turn as in `run`, on a simulated mount.

    Exit code 1 when a contact was not pointed within the beam.
    """
    from trunnion.service.rehearsal import rehearsal_of

    briefing, rehearsal = rehearsal_of(station, plan)
    _fly(rehearsal)
    if as_json:
        print_json(plain_results(briefing, rehearsal))
    else:
        print_results(briefing, rehearsal)
    if not is_in_order(briefing, rehearsal):
        raise typer.Exit(FAILED)


def _fly(rehearsal: "Rehearsal") -> None:
    from rich.console import Console
    from rich.progress import BarColumn, Progress, TextColumn, TimeRemainingColumn

    columns = (TextColumn("rehearsing"), BarColumn(), TimeRemainingColumn())
    console = Console(stderr=True)
    with Progress(*columns, console=console, disable=not console.is_terminal) as progress:
        bar = progress.add_task("", total=max(1.0, rehearsal.end_s - rehearsal.begin_s))
        for number, turn in enumerate(rehearsal.turns()):
            if number % 500 == 0:
                progress.update(bar, completed=turn.utc_s - rehearsal.begin_s)
