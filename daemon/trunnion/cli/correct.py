"""`trunnion correct`: an operator's correction of where the target is looked for."""

from pathlib import Path
from typing import Annotated, Any

import typer

from trunnion.cli.control import Daemon, ask
from trunnion.cli.output import print_text
from trunnion.track.correction import MOST_OFFSET_DEG, MOST_TIME_S, Correction


def _offset(told: str) -> Any:
    return typer.Option(min=-MOST_OFFSET_DEG, max=MOST_OFFSET_DEG, metavar="DEG", help=told)


def correct(
    daemon: Daemon = Path("station.yaml"),
    *,
    time_bias: Annotated[
        float,
        typer.Option(
            min=-MOST_TIME_S,
            max=MOST_TIME_S,
            metavar="S",
            help="Point where the target is said to be so much later (negative: earlier).",
        ),
    ] = 0.0,
    azimuth: Annotated[float, _offset("Added to the azimuth.")] = 0.0,
    elevation: Annotated[float, _offset("Added to the elevation.")] = 0.0,
    along: Annotated[float, _offset("Ahead of the target, on the sky.")] = 0.0,
    across: Annotated[float, _offset("To the right of its motion, on the sky.")] = 0.0,
    keep: Annotated[
        bool, typer.Option("--keep", help="For all contacts until cleared, or a new start.")
    ] = False,
    clear: Annotated[bool, typer.Option("--clear", help="Correct nothing any more.")] = False,
) -> None:
    """Correct where the antenna looks for the target of this contact, or else of the next.

    It replaces the correction before, and ends with the contact unless kept. The antenna goes over
    to it as soon as the rest of the plan is made anew, a few seconds later.
    """
    values = {
        "time_bias_s": time_bias,
        "azimuth_deg": azimuth,
        "elevation_deg": elevation,
        "along_deg": along,
        "across_deg": across,
    }
    given: dict[str, object] = {key: value for key, value in values.items() if value}
    if clear == bool(given) or (clear and keep):
        raise typer.BadParameter("expected something to correct, or --clear alone")
    try:
        Correction(**values)
    except ValueError as error:  # not a number, which no bound catches
        raise typer.BadParameter(str(error)) from None
    if clear:
        ask(daemon, "correct", {"clear": True})
        print_text("Nothing is corrected any more.")
        return
    ask(daemon, "correct", {**given, "keep": keep})
    print_text("The correction is being planned in; `trunnion status` shows it.")
