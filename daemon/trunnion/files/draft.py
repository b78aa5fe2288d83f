"""A draft plan: passes that were found, as text for the user to edit."""

from collections.abc import Iterable
from json import dumps
from math import ceil, floor

from trunnion.sky.instants import format_utc

_LONGEST_CONTACT_S = 7 * 86400.0


def draft_plan(target: str, spans: Iterable[tuple[float, float]]) -> str:
    """Return the text of a plan file with one contact of the target for each span of UTC seconds.

    Begin and end are taken to whole seconds inside the span; a span too short for that is left out,
    one longer than a contact may be is divided.
    """
    contacts = [
        f"  - target: {dumps(target, ensure_ascii=False)}\n"
        f"    from: {format_utc(begin_s, 0)}\n"
        f"    until: {format_utc(end_s, 0)}\n"
        for span in spans
        for begin_s, end_s in _whole_seconds(*span)
    ]
    head = "# A draft: passes as they were found. Choose, set priorities, then `trunnion check`.\n"
    return f"{head}contacts:\n{''.join(contacts)}" if contacts else f"{head}contacts: []\n"


def _whole_seconds(from_s: float, until_s: float) -> Iterable[tuple[float, float]]:
    begin_s, last_s = float(ceil(from_s)), float(floor(until_s))
    while begin_s < last_s:
        end_s = min(begin_s + _LONGEST_CONTACT_S, last_s)
        yield begin_s, end_s
        begin_s = end_s
