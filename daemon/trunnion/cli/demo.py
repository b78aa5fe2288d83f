"""`trunnion demo`: the invented scenario on the simulated mount, in fast motion."""

import sys
import time
from collections.abc import Callable
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
        _fly(rehearsal, lambda _: None, speed=float("inf"))
        print_json(plain_results(briefing, rehearsal))
    else:
        _show(briefing, rehearsal, speed)
        print_results(briefing, rehearsal)
        say("This was the simulator. `trunnion init FOLDER` writes the files of this station.")
    if not is_in_order(briefing, rehearsal):
        raise typer.Exit(FAILED)


def _show(briefing: "Briefing", rehearsal: "Rehearsal", speed: float) -> None:
    if not sys.stdout.isatty():
        _fly(rehearsal, _Teller(), speed)
        return
    from rich.live import Live

    from trunnion.cli.scene import draw

    with Live(auto_refresh=False, transient=True) as live:
        _fly(rehearsal, lambda turn: live.update(draw(briefing, turn), refresh=True), speed)


def _fly(rehearsal: "Rehearsal", show: "Callable[[Turn], None]", speed: float) -> None:
    """Fly at most so many times as fast as real time while the mount moves; rests are skipped."""
    from trunnion.service.rehearsal import RESTING

    before: Turn | None = None
    due_s = shown_s = time.monotonic()
    for turn in rehearsal.turns():
        if before is not None and before.decision.phase not in RESTING:
            due_s += (turn.mono_s - before.mono_s) / speed
        before = turn
        now_s = time.monotonic()
        if now_s >= shown_s + FRAME_S:
            shown_s = now_s
            show(turn)
        if due_s > now_s + FRAME_S:
            time.sleep(due_s - now_s)
        due_s = max(due_s, now_s - FRAME_S)


class _Teller:
    """Without a terminal: a line whenever the mount begins to do something else."""

    def __init__(self) -> None:
        self._told: tuple[object, object] | None = None

    def __call__(self, turn: "Turn") -> None:
        from trunnion.sky.instants import format_utc

        assignment = turn.decision.assignment
        contact = assignment.contact if assignment else ""
        told = (turn.decision.phase, contact)
        if told != self._told:
            self._told = told
            say(f"{format_utc(turn.utc_s, 0)}  {turn.decision.phase.value:<10} {contact}")
