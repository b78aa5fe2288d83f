"""What is known of a plan beforehand: every contact that cannot be had is told, the others stay."""

from pathlib import Path

import pytest

from tests.service.stations import write_plan, write_station
from trunnion.files.problems import FileProblems
from trunnion.service.briefing import Briefing, brief
from trunnion.service.briefing_order import BriefingOrder
from trunnion.sky.instants import parse_utc
from trunnion.track.programme import FindingKind

MORNING = parse_utc("2026-12-01T00:03:17Z")
GOOD = "{id: good, target: beacon, from: 2026-12-01T00:24:00Z, until: 2026-12-01T00:28:00Z}"


def brief_in(folder: Path, now_s: float = MORNING) -> Briefing:
    return brief(BriefingOrder(folder / "station.yaml", None, now_s))


def test_the_example_plan_is_served_but_for_the_contact_that_gives_way(tmp_path: Path) -> None:
    briefing = brief(BriefingOrder(write_station(tmp_path), None, MORNING))
    told = {each.contact.id: each for each in briefing.contacts}
    assert len(told) == 7
    assert all(each.trouble is None for each in briefing.contacts)
    forecast = told["osprell-long"].forecast
    assert forecast is not None
    assert FindingKind.GIVES_WAY in {finding.kind for finding in forecast.findings}
    assert told["brindle-4-morning"].is_served
    begins = [each.begin_s for each in briefing.assignments]
    assert begins == sorted(begins)


@pytest.mark.parametrize(
    ("contact", "sentence"),
    [
        ("target: BRINDEL-4", "did you mean 'BRINDLE-4'"),
        ("target: BRINDLE-4, from: 2026-12-12T00:10:00Z, until: 2026-12-12T00:30:00Z", "7 days"),
    ],
)
def test_a_contact_that_cannot_be_prepared_leaves_the_others(
    tmp_path: Path, contact: str, sentence: str
) -> None:
    write_station(tmp_path)
    times = "" if "from" in contact else ", from: 2026-12-01T00:40:00Z, until: 2026-12-01T00:44:00Z"
    write_plan(tmp_path, GOOD, f"{{id: bad, {contact}{times}}}")
    good, bad = brief_in(tmp_path).contacts
    assert good.is_served
    assert not bad.is_served
    assert bad.trouble is not None
    assert sentence in bad.trouble
    assert bad.sentences == (bad.trouble,)


@pytest.mark.parametrize(
    ("contact", "kind"),
    [
        (
            "target: 'fixed:10,2', from: 2026-12-01T00:40:00Z, until: 2026-12-01T00:44:00Z",
            FindingKind.NEVER_VISIBLE,
        ),
        (
            "target: beacon, from: 2026-11-30T00:24:00Z, until: 2026-11-30T00:28:00Z",
            FindingKind.PAST,
        ),
    ],
)
def test_a_contact_that_is_never_visible_or_past_is_told(
    tmp_path: Path, contact: str, kind: FindingKind
) -> None:
    write_station(tmp_path)
    write_plan(tmp_path, GOOD, f"{{id: bad, {contact}}}")
    good, bad = brief_in(tmp_path).contacts
    assert good.is_served
    assert not bad.is_served
    assert bad.forecast is not None
    assert kind in {finding.kind for finding in bad.forecast.findings}


def test_a_decayed_satellite_is_told(tmp_path: Path) -> None:
    """28350 of the SGP4 verification set (AIAA 2006-6753) has decayed 1560 minutes after epoch."""
    station = write_station(tmp_path, {"element_max_age_days: 7": "element_max_age_days: 9999"})
    (tmp_path / "elements.tle").write_text(
        "1 28350U 04020A   06167.21788666  .16154492  76267-5  18678-3 0  8894\n"
        "2 28350  64.9977 345.6130 0024870 260.7578  99.9590 16.47856722116490\n"
    )
    write_plan(
        tmp_path,
        "{id: x, target: '28350', from: 2006-06-18T05:00:00Z, until: 2006-06-18T06:00:00Z}",
    )
    (contact,) = brief(BriefingOrder(station, None, parse_utc("2006-06-17T00:00:00Z"))).contacts
    assert not contact.is_served
    assert "SGP4" in " ".join(contact.sentences)


def test_the_age_of_the_elements_is_the_largest_during_the_contact(tmp_path: Path) -> None:
    write_station(tmp_path)
    contacts = {each.contact.id: each for each in brief_in(tmp_path).contacts}
    assert contacts["sun-noon"].element_age_days is None
    age_days = contacts["lantern-g-relay"].element_age_days
    assert age_days is not None
    assert 0.1 < age_days < 1.0


def test_a_plan_that_cannot_be_read_is_told_with_all_its_problems(tmp_path: Path) -> None:
    write_station(tmp_path)
    write_plan(
        tmp_path,
        "{id: a, target: sun, from: 2026-12-01T02:00:00Z, until: 2026-12-01T01:00:00Z}",
        "{id: b, target: sun, from: 2026-12-01T02:00:00, until: tomorrow}",
    )
    with pytest.raises(FileProblems) as caught:
        brief_in(tmp_path)
    assert {each.line for each in caught.value.problems} == {2, 3}
    assert len(caught.value.problems) == 3


def test_what_is_wrong_with_plan_mask_and_elements_is_told_together(tmp_path: Path) -> None:
    write_station(tmp_path)
    write_plan(tmp_path, "{id: a, target: sun, form: 2026}")
    (tmp_path / "horizon.txt").write_text("10 four\n")
    (tmp_path / "elements.tle").write_text("1 90117U\n")
    with pytest.raises(FileProblems) as caught:
        brief_in(tmp_path)
    names = {Path(each.file).name for each in caught.value.problems}
    assert names == {"plan.yaml", "horizon.txt", "elements.tle"}
