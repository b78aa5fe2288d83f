"""Arguments and options that several commands share."""

from pathlib import Path
from typing import Annotated

import typer

from trunnion.files.instant_text import parse_instant


def _instant(text: str | float) -> float:
    if isinstance(text, float):
        return text
    try:
        return parse_instant(text)
    except ValueError as error:
        raise typer.BadParameter(str(error)) from None


_INSTANT = "TIME"

Station = Annotated[Path, typer.Argument(metavar="STATION", help="The station file.")]

AsJson = Annotated[bool, typer.Option("--json", metavar="", help="Print JSON, and nothing else.")]

TargetText = Annotated[
    str,
    typer.Option(
        "--target",
        metavar="TARGET",
        help="A name in the station's targets or elements, a catalogue number, a file with one "
        "target (orbit elements, an ephemeris, an angle table), sun, moon or a planet, "
        "icrs:RIGHT_ASCENSION,DECLINATION, or fixed:AZIMUTH,ELEVATION.",
    ),
]

Geometric = Annotated[
    bool,
    typer.Option(
        "--geometric",
        metavar="",
        help="The straight line: no refraction, light time or aberration.",
    ),
]

Verbose = Annotated[
    bool,
    typer.Option(
        "--verbose", metavar="", help="Tell the models in use, too, and what may be wrong."
    ),
]

From = Annotated[
    float,
    typer.Option(
        "--from", metavar=_INSTANT, parser=_instant, help="Begin, such as 2026-12-01T10:15:00Z."
    ),
]

Until = Annotated[
    float, typer.Option("--until", metavar=_INSTANT, parser=_instant, help="End, written likewise.")
]

OptionalFrom = Annotated[
    float | None,
    typer.Option("--from", metavar=_INSTANT, parser=_instant, help="Begin of a series."),
]

OptionalUntil = Annotated[
    float | None,
    typer.Option("--until", metavar=_INSTANT, parser=_instant, help="End of a series."),
]

At = Annotated[
    list[float] | None,
    typer.Option(
        "--at",
        metavar=_INSTANT,
        parser=_instant,
        help="An instant, such as 2026-12-01T10:15:00Z; may be given several times.",
    ),
]

OptionalPlan = Annotated[
    Path | None,
    typer.Option("--plan", metavar="FILE", help="A plan file instead of the station's own."),
]
