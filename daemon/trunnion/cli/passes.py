"""`trunnion passes`: when a target is up, and a draft plan of it."""

from pathlib import Path
from typing import TYPE_CHECKING, Annotated

import typer

from trunnion.cli.arguments import AsJson, From, Geometric, Station, TargetText, Until
from trunnion.cli.output import moment, number, print_json, print_table, progress, say
from trunnion.sky.instants import format_utc

if TYPE_CHECKING:
    from trunnion.sky.passes import Pass

_LONGEST_WINDOW_S = 366 * 86400.0


def passes(
    station: Station,
    *,
    target: TargetText,
    from_s: From,
    until_s: Until,
    above_deg: Annotated[
        float | None,
        typer.Option(
            "--above",
            metavar="DEG",
            help="Lowest elevation that counts; without it the elevation floor and the horizon "
            "mask.",
        ),
    ] = None,
    geometric: Geometric = False,
    write_plan: Annotated[
        Path | None,
        typer.Option(
            "--write-plan", metavar="FILE", help="Write a draft plan of them; overwrites nothing."
        ),
    ] = None,
    as_json: AsJson = False,
) -> None:
    """Print when a target rises, culminates and sets as seen from a station."""
    from trunnion.files.station import load_station
    from trunnion.service.clearance import clearance_of
    from trunnion.service.pass_search import search_passes
    from trunnion.service.targets import TargetBook
    from trunnion.service.viewpoint import viewpoint_of

    _must_make_sense(from_s, until_s, above_deg)
    loaded = load_station(station)
    viewpoint = viewpoint_of(loaded)
    book = TargetBook(loaded, viewpoint.geometric() if geometric else viewpoint)
    found = book.resolve_or_read(target)
    above = clearance_of(loaded).lowest_deg if above_deg is None else above_deg
    with progress(f"Passes of {found.name}", until_s - from_s) as advance:
        events = search_passes(found, from_s, until_s, above, advance)
    if write_plan is not None:
        name = found.name if book.means_file(target) else target
        _write_draft(write_plan, name, events, from_s, until_s)
    if as_json:
        print_json({"target": found.name, "passes": [_plain(each) for each in events]})
    else:
        _print_passes(found.name, events)


def _must_make_sense(from_s: float, until_s: float, above_deg: float | None) -> None:
    if until_s <= from_s:
        raise typer.BadParameter("expected --until after --from")
    if until_s - from_s > _LONGEST_WINDOW_S:
        raise typer.BadParameter("expected at most a year (366 days) between --from and --until")
    if above_deg is not None and not -90 <= above_deg <= 90:
        raise typer.BadParameter(f"expected --above of -90 to 90, got {above_deg:g}")


def _plain(each: "Pass") -> dict[str, object]:
    return {
        "rise": _time(each.rise_s),
        "culmination": _time(each.culmination_s),
        "set": _time(each.set_s),
        "highest_elevation_deg": each.highest_elevation_deg,
    }


def _time(utc_s: float | None) -> str | None:
    return None if utc_s is None else format_utc(utc_s)


def _second(utc_s: float | None, otherwise: str) -> str:
    return otherwise if utc_s is None else moment(float(round(utc_s)))


def _print_passes(name: str, events: "tuple[Pass, ...]") -> None:
    columns = ("rise (UTC)", "culmination (UTC)", "set (UTC)", "highest [°]")
    rows = (
        (
            _second(each.rise_s, "before the window"),
            _second(each.culmination_s, "outside the window"),
            _second(each.set_s, "after the window"),
            number(each.highest_elevation_deg, 2),
        )
        for each in events
    )
    print_table(f"Passes of {name}: {len(events)}", columns, rows)


def _write_draft(
    file: Path, target: str, events: "tuple[Pass, ...]", from_s: float, until_s: float
) -> None:
    from trunnion.files.draft import draft_plan

    spans = [
        (
            from_s if each.rise_s is None else each.rise_s,
            until_s if each.set_s is None else each.set_s,
        )
        for each in events
    ]
    with file.open("x", encoding="utf-8") as stream:
        stream.write(draft_plan(target, spans))
    say(f"Wrote a draft plan of {len(spans)} contacts to {file}.")
