"""What became of the contacts of a plan that was flown: for people and for programs."""

from enum import Enum
from typing import TYPE_CHECKING

from trunnion.cli.output import number, print_table, print_text

if TYPE_CHECKING:
    from trunnion.service.briefing import Briefing, ContactBriefing
    from trunnion.service.rehearsal import Rehearsal

FORECAST_MARGIN_S = 2.0
"""So much longer than forecast a target may be outside the beam before that counts against it."""


class Fate(Enum):
    """What became of one contact."""

    TRACKED = "tracked"
    IN_PART = "in part, as forecast"
    LOST = "lost for longer than forecast"
    MISSED = "missed"


def is_in_order(briefing: "Briefing", rehearsal: "Rehearsal") -> bool:
    """Whether every contact was flown as well as was forecast."""
    bad = {Fate.LOST, Fate.MISSED}
    return not any(_fate(each, rehearsal) in bad for each in briefing.contacts)


def plain_results(briefing: "Briefing", rehearsal: "Rehearsal") -> dict[str, object]:
    """Everything as JSON holds it."""
    return {
        "station": briefing.station.site.name,
        "is_in_order": is_in_order(briefing, rehearsal),
        "contacts": [_plain(each, rehearsal) for each in briefing.contacts],
    }


def print_results(briefing: "Briefing", rehearsal: "Rehearsal") -> None:
    """Print a row a contact, and below the table what needs a sentence."""
    columns = (
        "contact",
        "flown [s]",
        "worst error [°]",
        "rms [°]",
        "out of beam [s]",
        "of tolerance [s]",
        "gate [n]",
        "",
    )
    title = f"Contacts of {briefing.station.site.name} as flown"
    print_table(title, columns, (_row(each, rehearsal) for each in briefing.contacts))
    for each in briefing.contacts:
        for sentence in each.sentences:
            print_text(f"{each.contact.id}: {sentence}")


def _fate(each: "ContactBriefing", rehearsal: "Rehearsal") -> Fate:
    result = rehearsal.results.get(each.contact.id)
    if result is None or each.forecast is None:
        return Fate.MISSED
    outside_s = result.score.outside_beam_s
    if outside_s == 0.0:
        return Fate.TRACKED
    forecast_s = each.forecast.outside_beam_s + FORECAST_MARGIN_S
    return Fate.IN_PART if outside_s <= forecast_s else Fate.LOST


def _plain(each: "ContactBriefing", rehearsal: "Rehearsal") -> dict[str, object]:
    from trunnion.service.recorder import summary_of  # loads astronomy, which `stop` must not

    result = rehearsal.results.get(each.contact.id)
    return {
        "id": each.contact.id,
        "target": each.contact.target,
        "fate": _fate(each, rehearsal).value,
        "last_phase": result.last_phase.value if result else None,
        **(summary_of(result.score) if result else {}),
        "findings": list(each.sentences),
    }


def _row(each: "ContactBriefing", rehearsal: "Rehearsal") -> tuple[str, ...]:
    result, fate = rehearsal.results.get(each.contact.id), _fate(each, rehearsal).value
    if result is None:
        return (each.contact.id, *("–",) * 6, fate)
    score = result.score
    return (
        each.contact.id,
        number(score.seconds, 0),
        number(score.worst_error_deg, 4),
        number(score.rms_error_deg, 4),
        number(score.outside_beam_s, 1),
        number(score.outside_tolerance_s, 1),
        str(score.interventions),
        fate,
    )
