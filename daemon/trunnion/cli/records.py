"""`trunnion records`: what happened in every contact."""

import sys
from collections.abc import Iterator, Sequence
from contextlib import closing, contextmanager
from pathlib import Path
from typing import TYPE_CHECKING, Annotated, Any

import typer
from typer.core import TyperGroup

from trunnion.cli.arguments import AsJson
from trunnion.cli.output import flattened, moment, print_json, print_table, say
from trunnion.sky.instants import format_utc

if TYPE_CHECKING:
    from trunnion.service.records.queries import ContactRecord, EventRecord, Records

_STATION = Path("station.yaml")


class _StationOrCommand(TyperGroup):
    """Takes a first word that is no command for the station file: `trunnion records STATION`."""

    def parse_args(self, ctx: Any, args: list[str]) -> list[str]:
        if args and not args[0].startswith("-") and args[0] not in self.commands:
            args = ["--station", *args]
        return super().parse_args(ctx, args)


def records_app() -> typer.Typer:
    """Return the group of commands about the records."""
    app = typer.Typer(cls=_StationOrCommand, invoke_without_command=True)
    app.callback()(records)
    app.command()(show)
    return app


def records(
    context: typer.Context,
    *,
    station: Annotated[
        Path, typer.Option(metavar="STATION", help="The station file; --station may be left out.")
    ] = _STATION,
    limit: Annotated[int, typer.Option(min=1, help="How many, the newest first.")] = 100,
    as_json: AsJson = False,
) -> None:
    """List the contacts that were, the newest first; `show` tells of one."""
    if context.invoked_subcommand is not None:
        return
    with _records_of(station) as kept:
        contacts = kept.contacts(limit)
    if as_json:
        print_json({"contacts": [_plain(contact) for contact in contacts]})
    else:
        _print_contacts(contacts)


def show(
    number: Annotated[int, typer.Argument(metavar="ID", help="The number in the list.")],
    station: Annotated[
        Path, typer.Argument(metavar="STATION", help="The station file.")
    ] = _STATION,
    *,
    csv: Annotated[
        Path | None,
        typer.Option(
            metavar="FILE", help="Write its samples as comma-separated values; - prints them."
        ),
    ] = None,
    as_json: AsJson = False,
) -> None:
    """Print one contact with its events, and export its samples."""
    with _records_of(station) as kept:
        contact = _contact(kept, number)
        events = kept.events(limit=1000, contact_id=number)[::-1]
        if csv is not None:
            _export(kept, number, csv)
            return
    if as_json:
        told = [
            {"time": format_utc(e.utc_s), "kind": e.kind.value, "what": e.sentence} for e in events
        ]
        print_json({"contact": _plain(contact), "events": told})
    else:
        _print_contact(contact, events)


@contextmanager
def _records_of(station: Path) -> "Iterator[Records]":
    from trunnion.files.station import load_station
    from trunnion.service.records.queries import Records

    with Records(load_station(station).files.records) as kept:
        yield kept


def _contact(kept: "Records", number: int) -> "ContactRecord":
    from trunnion.service.errors import ServiceError

    contact = kept.contact(number)
    if contact is None:
        raise ServiceError(f"expected the number of a contact on record, got {number}")
    return contact


def _export(kept: "Records", number: int, csv: Path) -> None:
    from trunnion.service.records.export import csv_lines

    with closing(kept.samples(number)) as samples:
        lines = (f"{line}\n" for line in csv_lines(samples))
        if csv == Path("-"):
            sys.stdout.writelines(lines)
            return
        with csv.open("x", encoding="utf-8") as stream:
            stream.writelines(lines)
    say(f"Wrote the samples of contact {number} to {csv}.")


def _plain(contact: "ContactRecord") -> dict[str, object]:
    return {
        "id": contact.contact_id,
        "contact": contact.contact,
        "target": contact.target,
        "begin": format_utc(contact.begin_utc_s),
        "end": None if contact.end_utc_s is None else format_utc(contact.end_utc_s),
        "planned_begin": format_utc(contact.planned_begin_s),
        "planned_end": format_utc(contact.planned_end_s),
        "outcome": contact.outcome.value,
        "samples": contact.samples,
        "summary": dict(contact.summary),
    }


def _print_contacts(contacts: "Sequence[ContactRecord]") -> None:
    rows = (
        (
            str(contact.contact_id),
            contact.contact,
            contact.target,
            moment(contact.begin_utc_s),
            moment(contact.end_utc_s),
            contact.outcome.value,
            str(contact.samples),
        )
        for contact in contacts
    )
    columns = ("ID", "contact", "target", "begin (UTC)", "end (UTC)", "outcome", "samples")
    print_table(f"Contacts on record: {len(contacts)}", columns, rows)


def _print_contact(contact: "ContactRecord", events: "Sequence[EventRecord]") -> None:
    print_table(f"Contact {contact.contact_id}", ("what", "how"), flattened(_plain(contact)))
    if events:
        rows = ((moment(e.utc_s), e.kind.value, e.sentence) for e in events)
        print_table("Events", ("time (UTC)", "kind", "what"), rows)
