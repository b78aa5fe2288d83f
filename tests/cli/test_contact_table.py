"""What became of the contacts of a plan, as `rehearse` and `demo` tell it."""

from dataclasses import dataclass, field
from typing import cast

import pytest

from trunnion.cli.contact_table import is_in_order, plain_results, print_results
from trunnion.files.plan import Contact
from trunnion.pilot.phase import Phase
from trunnion.service.briefing import Briefing, ContactBriefing
from trunnion.service.rehearsal import Rehearsal, Rehearsed
from trunnion.service.score import Score
from trunnion.track.programme import Finding, FindingKind, Forecast

BEGIN_S = 1_893_456_000.0
LATE = Finding(FindingKind.LATE, BEGIN_S, BEGIN_S + 9.0, "the first 9 s are missed", True)


@dataclass(frozen=True)
class Site:
    name: str = "Ternholm"


@dataclass(frozen=True)
class Station:
    site: Site = field(default_factory=Site)


@dataclass(frozen=True)
class Planned:
    id: str
    target: str = "LANTERN-G"


def planned(name: str, forecast_outside_s: float | None, *findings: Finding) -> ContactBriefing:
    """A contact that was to be outside the beam for so long; None for one that cannot be."""
    contact = cast("Contact", Planned(name))
    if forecast_outside_s is None:
        return ContactBriefing(contact, None, "expected a known target")
    forecast = Forecast(
        name, BEGIN_S, None, None, 41.3, None, None, 7.25, forecast_outside_s, findings
    )
    return ContactBriefing(contact, forecast, None)


def flown(outside_s: float) -> Rehearsed:
    """One that was outside the beam for so long."""
    score = Score(1.6, 0.32)
    score.add(BEGIN_S, 7.25, outside_s)
    score.add(BEGIN_S + outside_s, 0.013, 61.0 - outside_s)
    score.interventions = 3
    return Rehearsed(score, Phase.TRACKING)


def told(*contacts: ContactBriefing, **results: Rehearsed) -> tuple[Briefing, Rehearsal]:
    """What the table is made from: of both, the parts that it looks at."""

    @dataclass(frozen=True)
    class Both:
        station: Station
        contacts: tuple[ContactBriefing, ...]
        results: dict[str, Rehearsed]

    both = Both(Station(), contacts, results)
    return cast("Briefing", both), cast("Rehearsal", both)


@pytest.mark.parametrize(
    ("forecast_outside_s", "outside_s", "fate", "is_good"),
    [
        (0.0, 0.0, "tracked", True),
        (11.5, 0.0, "tracked", True),
        (11.5, 11.5, "in part, as forecast", True),
        (11.5, 13.4, "in part, as forecast", True),
        (11.5, 13.6, "lost for longer than forecast", False),
        (0.0, 1.9, "in part, as forecast", True),
        (0.0, 2.1, "lost for longer than forecast", False),
    ],
)
def test_the_fate_is_what_was_flown_beside_what_was_forecast(
    forecast_outside_s: float, outside_s: float, fate: str, *, is_good: bool
) -> None:
    briefing, rehearsal = told(planned("one", forecast_outside_s), one=flown(outside_s))
    results = plain_results(briefing, rehearsal)
    contacts = results["contacts"]
    assert isinstance(contacts, list)
    assert contacts[0]["fate"] == fate
    assert results["is_in_order"] is is_in_order(briefing, rehearsal) is is_good


def test_a_contact_that_was_not_flown_or_could_not_be_is_missed() -> None:
    briefing, rehearsal = told(planned("one", 0.0), planned("two", None), two=flown(0.0))
    contacts = plain_results(briefing, rehearsal)["contacts"]
    assert isinstance(contacts, list)
    assert [each["fate"] for each in contacts] == ["missed", "missed"]
    assert contacts[0]["last_phase"] is None
    assert not is_in_order(briefing, rehearsal)


def test_json_holds_the_score_and_the_findings() -> None:
    briefing, rehearsal = told(planned("one", 11.5, LATE), one=flown(11.5))
    contacts = plain_results(briefing, rehearsal)["contacts"]
    assert isinstance(contacts, list)
    (one,) = contacts
    assert (one["id"], one["target"], one["last_phase"]) == ("one", "LANTERN-G", "tracking")
    assert (one["seconds"], one["outside_beam_s"], one["interventions"]) == (61.0, 11.5, 3)
    assert one["worst_error_deg"] == 7.25
    assert one["findings"] == ["the first 9 s are missed"]


def test_the_table_has_a_row_a_contact_and_below_it_what_needs_a_sentence(
    capsys: pytest.CaptureFixture[str],
) -> None:
    print_results(*told(planned("one", 11.5, LATE), planned("two", 0.0), one=flown(11.5)))
    lines = capsys.readouterr().out.splitlines()
    (one,) = (line.split() for line in lines if line.startswith("one "))
    assert one[:7] == ["one", "61", "7.2500", "3.1479", "11.5", "11.5", "3"]
    assert " ".join(one[7:]) == "in part, as forecast"
    (two,) = (line.split() for line in lines if line.startswith("two "))
    assert two == ["two", *("–",) * 6, "missed"]
    assert lines[0] == "Contacts of Ternholm as flown"
    assert lines[-1] == "one: the first 9 s are missed"
