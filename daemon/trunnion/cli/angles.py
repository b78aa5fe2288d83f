"""`trunnion angles`: where a target stands, at single instants or at regular ones."""

from typing import TYPE_CHECKING, Annotated, Any

import typer

from trunnion.cli.arguments import (
    AsJson,
    At,
    Geometric,
    OptionalFrom,
    OptionalUntil,
    Station,
    TargetText,
    Verbose,
)
from trunnion.cli.output import moment, number, print_json, print_table, print_text
from trunnion.sky.instants import format_utc

if TYPE_CHECKING:
    from collections.abc import Mapping

    from trunnion.sky.look import Look

_MOST_INSTANTS = 1_000_000


def angles(
    station: Station,
    *,
    target: TargetText,
    at: At = None,
    from_s: OptionalFrom = None,
    until_s: OptionalUntil = None,
    every_s: Annotated[
        float | None, typer.Option("--every", metavar="S", help="Step of a series in seconds.")
    ] = None,
    geometric: Geometric = False,
    verbose: Verbose = False,
    as_json: AsJson = False,
) -> None:
    """Print the look angles of a target: azimuth, elevation, range, and how they change."""
    from trunnion.files.station import load_station
    from trunnion.service.targets import TargetBook
    from trunnion.service.trust_words import doubts_of, models_in_use
    from trunnion.service.viewpoint import viewpoint_of

    instants = _instants(at, from_s, until_s, every_s)
    loaded = load_station(station)
    viewpoint = viewpoint_of(loaded)
    seen_from = viewpoint.geometric() if geometric else viewpoint
    found = TargetBook(loaded, seen_from).resolve_or_read(target)
    looks = [(utc_s, found.look(utc_s)) for utc_s in instants]
    trust = {**models_in_use(seen_from), **doubts_of(found, instants)} if verbose else {}
    if as_json:
        print_json({"target": found.name, **trust, "angles": [_plain(*each) for each in looks]})
        return
    _print_looks(found.name, looks)
    if verbose:
        _print_trust(trust)


def _print_trust(trust: "Mapping[str, Any]") -> None:
    on_or_off = "on" if trust["light_time_and_aberration"] else "off"
    print_text(
        f"refraction: {trust['refraction']}; Earth orientation: {trust['earth_orientation']}; "
        f"light time and aberration: {on_or_off}"
    )
    print_text(f"expected error: {number(trust['expected_error_deg'], 4)}°")
    for each in trust["doubts"]:
        print_text(f"  {each['what']}: {number(each['angle_deg'], 4)}° ({each['source']})")


def _instants(
    at: list[float] | None, from_s: float | None, until_s: float | None, every_s: float | None
) -> list[float]:
    series = (from_s, until_s, every_s)
    if at and series == (None, None, None):
        return at
    if at or from_s is None or until_s is None or every_s is None:
        raise typer.BadParameter("expected either --at, or --from, --until and --every together")
    if until_s < from_s or not every_s > 0:
        raise typer.BadParameter("expected --until not before --from, and --every above 0")
    steps = (until_s - from_s) / every_s
    if steps > _MOST_INSTANTS:
        raise typer.BadParameter(f"expected at most {_MOST_INSTANTS} instants, got {steps:.0f}")
    return [from_s + step * every_s for step in range(int(steps + 1e-9) + 1)]


def _plain(utc_s: float, look: "Look") -> dict[str, object]:
    return {
        "time": format_utc(utc_s),
        "azimuth_deg": look.azimuth_deg,
        "elevation_deg": look.elevation_deg,
        "range_km": look.range_km,
        "azimuth_rate_deg_s": look.azimuth_rate_deg_s,
        "elevation_rate_deg_s": look.elevation_rate_deg_s,
        "range_rate_km_s": look.range_rate_km_s,
    }


def _print_looks(name: str, looks: list[tuple[float, "Look"]]) -> None:
    columns = (
        "time\n(UTC)",
        "azimuth\n[°]",
        "rate\n[°/s]",
        "elevation\n[°]",
        "rate\n[°/s]",
        "range\n[km]",
        "rate\n[km/s]",
    )
    rows = (
        (
            moment(utc_s),
            number(look.azimuth_deg, 4),
            number(look.azimuth_rate_deg_s, 4),
            number(look.elevation_deg, 4),
            number(look.elevation_rate_deg_s, 4),
            number(look.range_km, 3),
            number(look.range_rate_km_s, 4),
        )
        for utc_s, look in looks
    )
    print_table(f"Look angles of {name}", columns, rows)
