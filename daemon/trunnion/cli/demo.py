"""`trunnion demo`: the invented scenario on the simulated mount, in fast motion."""

import sys
import time
from collections.abc import Iterator
from typing import TYPE_CHECKING, Annotated

import typer

from trunnion.cli.contact_table import is_in_order, plain_results, print_results
from trunnion.cli.errors import FAILED
from trunnion.cli.output import print_json, say

if TYPE_CHECKING:
    from trunnion.service.briefing import Briefing
    from trunnion.service.rehearsal import Rehearsal
    from trunnion.service.turn import Turn

FRAME_S = 0.1
"""Time from picture to picture."""


def demo(
    *,
    speed: Annotated[
        float,
        typer.Option(min=1, max=100_000, metavar="TIMES", help="Times as fast as real time."),
    ] = 300.0,
    as_json: Annotated[
        bool, typer.Option("--json", help="Print JSON at the end, and nothing else.")
    ] = False,
) -> None:
    """Track an invented plan with a simulated mount, in fast motion; ends with a table."""
    from trunnion.cli.init import example_folder
    from trunnion.service.rehearsal import rehearsal_of

    briefing, rehearsal = rehearsal_of(example_folder() / "station.yaml", None)
    if as_json:
        for _ in rehearsal.turns():
            pass
        print_json(plain_results(briefing, rehearsal))
    else:
        _show(briefing, rehearsal, speed)
        print_results(briefing, rehearsal)
        say("This was the simulator. `trunnion init FOLDER` writes the files of this station.")
    if not is_in_order(briefing, rehearsal):
        raise typer.Exit(FAILED)


def _show(briefing: "Briefing", rehearsal: "Rehearsal", speed: float) -> None:
    paced = _paced(rehearsal.turns(), speed)
    if not sys.stdout.isatty():
        _tell(paced)
        return
    from rich.live import Live

    from trunnion.cli.scene import draw

    shown_s = time.monotonic()
    with Live(auto_refresh=False, transient=True) as live:
        for turn in paced:
            if time.monotonic() >= shown_s + FRAME_S:
                shown_s = time.monotonic()
                live.update(draw(briefing, turn), refresh=True)


def _paced(turns: "Iterator[Turn]", speed: float) -> "Iterator[Turn]":
    """The turns, at most so many times as fast as real time while the mount moves."""
    from trunnion.service.rehearsal import RESTING

    before: Turn | None = None
    due_s = time.monotonic()
    for turn in turns:
        yield turn
        if before is not None and before.decision.phase not in RESTING:
            due_s += (turn.mono_s - before.mono_s) / speed
        before, now_s = turn, time.monotonic()
        if due_s > now_s + FRAME_S:
            time.sleep(due_s - now_s)
        due_s = max(due_s, now_s - FRAME_S)


def _tell(turns: "Iterator[Turn]") -> None:
    """Without a terminal: a line whenever the mount begins to do something else."""
    from trunnion.sky.instants import format_utc

    told: tuple[object, str] | None = None
    for turn in turns:
        assignment = turn.decision.assignment
        now = (turn.decision.phase, assignment.contact if assignment else "")
        if now != told:
            told = now
            say(f"{format_utc(turn.utc_s, 0)}  {turn.decision.phase.value:<10} {now[1]}")
