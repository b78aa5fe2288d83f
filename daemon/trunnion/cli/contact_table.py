"""What became of the contacts of a plan that was flown: for people and for programs."""

from typing import TYPE_CHECKING

from trunnion.cli.output import number, print_table, print_text

if TYPE_CHECKING:
    from trunnion.service.briefing import Briefing, ContactBriefing
    from trunnion.service.rehearsal import Rehearsal


def is_in_order(briefing: "Briefing", rehearsal: "Rehearsal") -> bool:
    """Whether every contact was flown, and none left the beam for longer than its forecast says."""
    return all(_state(each, rehearsal) in _GOOD for each in briefing.contacts)


def plain_results(briefing: "Briefing", rehearsal: "Rehearsal") -> dict[str, object]:
    """Everything as JSON holds it."""
    return {
        "station": briefing.station.site.name,
        "contacts": [_plain(each, rehearsal) for each in briefing.contacts],
    }


def print_results(briefing: "Briefing", rehearsal: "Rehearsal") -> None:
    """Print a row a contact, and below the table what needs a sentence."""
    columns = (
        "contact",
        "target",
        "seconds [s]",
        "worst error [°]",
        "rms error [°]",
        "outside beam [s]",
        "outside tolerance [s]",
        "interventions [n]",
        "state",
    )
    title = f"Contacts of {briefing.station.site.name} as flown"
    print_table(title, columns, (_row(each, rehearsal) for each in briefing.contacts))
    for each in briefing.contacts:
        for sentence in _sentences(each):
            print_text(f"{each.contact.id}: {sentence}")


TRACKED, BRIEFLY_LOST, MISSED = "tracked", "tracked, the beam lost for a while", "missed"
_GOOD = frozenset({TRACKED})


def _state(each: "ContactBriefing", rehearsal: "Rehearsal") -> str:
    result = rehearsal.results.get(each.contact.id)
    if result is None:
        return MISSED
    return BRIEFLY_LOST if result.score.outside_beam_s > 0.0 else TRACKED


def _plain(each: "ContactBriefing", rehearsal: "Rehearsal") -> dict[str, object]:
    from trunnion.service.recorder import summary_of

    result = rehearsal.results.get(each.contact.id)
    return {
        "id": each.contact.id,
        "target": each.contact.target,
        "state": _state(each, rehearsal),
        **(summary_of(result.score) if result else {}),
        "findings": _sentences(each),
    }


def _row(each: "ContactBriefing", rehearsal: "Rehearsal") -> tuple[str, ...]:
    result = rehearsal.results.get(each.contact.id)
    if result is None:
        return (each.contact.id, each.contact.target, *("–",) * 6, MISSED)
    score = result.score
    return (
        each.contact.id,
        each.contact.target,
        number(score.seconds, 0),
        number(score.worst_error_deg, 4),
        number(score.rms_error_deg, 4),
        number(score.outside_beam_s, 1),
        number(score.outside_tolerance_s, 1),
        str(score.interventions),
        _state(each, rehearsal),
    )


def _sentences(each: "ContactBriefing") -> list[str]:
    found = [each.trouble] if each.trouble else []
    return found + [
        finding.sentence for finding in (each.forecast.findings if each.forecast else ())
    ]
