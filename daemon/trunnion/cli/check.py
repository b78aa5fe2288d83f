"""`trunnion check`: everything that can be known of a plan before it is flown."""

from collections.abc import Mapping
from pathlib import Path
from typing import TYPE_CHECKING, Annotated

import typer

from trunnion.cli.arguments import AsJson, OptionalPlan, Station
from trunnion.cli.errors import FAILED
from trunnion.cli.output import number, print_json, print_table, print_text, say
from trunnion.sky.instants import format_utc

if TYPE_CHECKING:
    from trunnion.service.briefing import Briefing, ContactBriefing


def check(
    station: Station,
    *,
    plan: OptionalPlan = None,
    now: Annotated[
        str | None,
        typer.Option(metavar="TIME", help="Check as if it were this time; by default it is now."),
    ] = None,
    plot: Annotated[
        Path | None,
        typer.Option(
            metavar="FILE.svg",
            help="Draw the sky as seen and as flown, and the joints over time, into this file.",
        ),
    ] = None,
    safety: Annotated[
        bool, typer.Option("--safety", help="Print what the safety gate does in each case instead.")
    ] = False,
    as_json: AsJson = False,
) -> None:
    """Check a station and its plan: files, times, turns of the cable, rates, conflicts.

    Exit code 1 when something would fail.
    """
    from trunnion.service.briefing import brief
    from trunnion.service.briefing_order import BriefingOrder
    from trunnion.service.clock import SystemClock
    from trunnion.service.drivers import build_driver
    from trunnion.service.plan_words import FASTER, is_worth_comparing, plan_words
    from trunnion.service.sky_notes import sky_notes, sun_over_stow
    from trunnion.service.winds import build_wind

    if safety:
        _print_policy(as_json=as_json)
        return
    if plot is not None and plot.suffix.lower() != ".svg":
        raise typer.BadParameter(f"expected a file name that ends in .svg, got {plot.name}")
    now_s = SystemClock().utc_s() if now is None else _instant(now)
    order = BriefingOrder(station, plan, now_s)
    briefing = brief(order)
    build_driver(briefing.station, SystemClock())
    build_wind(briefing.station, SystemClock())
    if plot is not None:
        _draw(briefing, plot)
    faster = brief(order, FASTER) if is_worth_comparing(briefing) else None
    sky, ways = sky_notes(briefing), plan_words(briefing, faster)
    notes = {name: (*words, *sky.get(name, ())) for name, words in ways.items()}
    warnings = tuple(sun_over_stow(briefing.station))
    if as_json:
        print_json({**_plain(briefing, notes), "warnings": list(warnings)})
    else:
        _print(briefing, notes)
        for sentence in warnings:
            print_text(f"warning: {sentence}")
    if not all(each.is_served for each in briefing.contacts):
        raise typer.Exit(FAILED)


def _print_policy(*, as_json: bool) -> None:
    from trunnion.safety.page import COLUMNS, rows

    if as_json:
        print_json({"policy": [dict(zip(COLUMNS, row, strict=True)) for row in rows()]})
    else:
        print_table("What the safety gate does", COLUMNS, rows())


def _draw(briefing: "Briefing", file: Path) -> None:
    from trunnion.cli.pictures.page import picture
    from trunnion.service.antenna import beam_of, mount_of
    from trunnion.service.clearance import clearance_of

    station = briefing.station
    parts = mount_of(station), clearance_of(station), beam_of(station)
    file.write_text(picture(briefing.programme, *parts), encoding="utf-8")
    say(f"Wrote the picture of the plan to {file}.")


def _instant(text: str) -> float:
    from trunnion.sky.instants import parse_utc

    try:
        return parse_utc(text)
    except ValueError as error:
        raise typer.BadParameter(str(error)) from None


def _plain(briefing: "Briefing", notes: Mapping[str, tuple[str, ...]]) -> dict[str, object]:
    return {
        "station": briefing.station.site.name,
        "is_served": all(each.is_served for each in briefing.contacts),
        "contacts": [
            {**_plain_contact(each), "notes": list(notes.get(each.contact.id, ()))}
            for each in briefing.contacts
        ],
    }


def _plain_contact(each: "ContactBriefing") -> dict[str, object]:
    forecast = each.forecast
    told: dict[str, object] = {
        "id": each.contact.id,
        "target": each.contact.target,
        "priority": each.contact.priority,
        "is_served": each.is_served,
        "trouble": each.trouble,
        "element_age_days": each.element_age_days,
        "findings": [],
    }
    if forecast is not None:
        told |= {
            "rise": _time(forecast.begin_s),
            "culmination": _time(forecast.culmination_s),
            "set": _time(forecast.end_s),
            "highest_elevation_deg": forecast.highest_elevation_deg,
            "first_joint_deg": [forecast.first_joint_begin_deg, forecast.first_joint_end_deg],
            "worst_error_deg": forecast.worst_error_deg,
            "outside_beam_s": forecast.outside_beam_s,
            "findings": [
                {
                    "kind": finding.kind.value,
                    "is_failure": finding.is_failure,
                    "begin": format_utc(finding.begin_s),
                    "end": format_utc(finding.end_s),
                    "sentence": finding.sentence,
                }
                for finding in forecast.findings
            ],
        }
    return told


def _time(utc_s: float | None) -> str | None:
    return None if utc_s is None else format_utc(utc_s, 0)


def _print(briefing: "Briefing", notes: Mapping[str, tuple[str, ...]]) -> None:
    columns = (
        "contact",
        "target",
        "day, rise (UTC)",
        "highest",
        "set",
        "up to [°]",
        "first joint [°]",
        "error [°]",
        "age [days]",
        "",
    )
    print_table(f"Plan of {briefing.station.site.name}", columns, map(_row, briefing.contacts))
    for each in briefing.contacts:
        for sentence in (*each.sentences, *notes.get(each.contact.id, ())):
            print_text(f"{each.contact.id}: {sentence}")


def _row(each: "ContactBriefing") -> tuple[str, ...]:
    forecast = each.forecast
    verdict = "as asked" if each.is_served else "NOT as asked"
    if forecast is None or forecast.begin_s is None:
        return (each.contact.id, each.contact.target, *("–",) * 6, _age(each), verdict)
    begin_deg, end_deg = forecast.first_joint_begin_deg, forecast.first_joint_end_deg
    turns = f"{number(begin_deg, 0)} … {number(end_deg, 0)}"
    return (
        each.contact.id,
        each.contact.target,
        format_utc(forecast.begin_s, 0)[5:19].replace("T", " "),
        _clock(forecast.culmination_s),
        _clock(forecast.end_s),
        number(forecast.highest_elevation_deg, 1),
        turns,
        number(forecast.worst_error_deg, 3),
        _age(each),
        verdict,
    )


def _age(each: "ContactBriefing") -> str:
    return number(each.element_age_days, 1)


def _clock(utc_s: float | None) -> str:
    return "–" if utc_s is None else format_utc(utc_s, 0)[11:19]
