"""An operator's correction: for which contact, until when, and what planning makes of it."""

from dataclasses import dataclass, field
from pathlib import Path

import pytest

from tests.service.stations import write_station
from trunnion.service.briefing import brief
from trunnion.service.briefing_order import BriefingOrder
from trunnion.service.clock import VirtualClock
from trunnion.service.corrections import CorrectionInForce, Corrections, NothingToCorrect
from trunnion.sky.fixed import FixedDirection
from trunnion.sky.instants import parse_utc
from trunnion.track.correction import Correction
from trunnion.track.path import Assignment

BEGIN_S = 1_893_456_000.0
BIAS = Correction(time_bias_s=2.25, elevation_deg=0.4)


def assignment(contact: str, begin_s: float, end_s: float) -> Assignment:
    target = FixedDirection(211.3, 34.7)
    return Assignment(contact, target, BEGIN_S + begin_s, BEGIN_S + end_s, None, 50)  # type: ignore[arg-type]


@dataclass
class Rig:
    clock: VirtualClock = field(default_factory=lambda: VirtualClock(BEGIN_S, 41.5))
    plans: int = 0
    assignments: list[Assignment] = field(default_factory=list)

    def __post_init__(self) -> None:
        self.corrections = Corrections(self.clock, lambda: self.assignments, self._plan)

    def _plan(self) -> None:
        self.plans += 1


@pytest.fixture
def rig() -> Rig:
    rig = Rig()
    rig.assignments = [assignment("one", -50.0, 7.0), assignment("two", 60.0, 90.0)]
    return rig


def test_it_is_for_the_contact_that_is_on_and_has_it_planned_anew(rig: Rig) -> None:
    assert rig.corrections.give(BIAS, is_kept=False) == CorrectionInForce(BIAS, "one")
    assert rig.plans == 1


def test_between_contacts_it_is_for_the_next(rig: Rig) -> None:
    rig.clock.sleep(8.5)
    assert rig.corrections.give(BIAS, is_kept=False).contact == "two"


def test_it_ends_with_its_contact_and_the_rest_is_planned_without(rig: Rig) -> None:
    rig.corrections.give(BIAS, is_kept=False)
    rig.clock.sleep(6.5)
    assert rig.corrections.end_with_the_contact() is None
    assert rig.corrections.in_force is not None
    rig.clock.sleep(1.0)
    assert rig.corrections.end_with_the_contact() == "one"
    assert rig.corrections.in_force is None
    assert rig.plans == 2
    assert rig.corrections.end_with_the_contact() is None


def test_a_kept_one_outlasts_every_contact(rig: Rig) -> None:
    rig.corrections.give(BIAS, is_kept=True)
    rig.clock.sleep(1000.0)
    assert rig.corrections.end_with_the_contact() is None
    assert rig.corrections.in_force == CorrectionInForce(BIAS, None)


def test_after_the_last_contact_there_is_nothing_to_correct(rig: Rig) -> None:
    rig.clock.sleep(90.5)
    with pytest.raises(NothingToCorrect):
        rig.corrections.give(BIAS, is_kept=False)
    assert rig.plans == 0


@pytest.mark.parametrize("contact", ["quillon-2-north", None])
def test_planning_corrects_its_contact_or_all(tmp_path: Path, contact: str | None) -> None:
    station = write_station(tmp_path)
    now_s = parse_utc("2026-12-01T00:00:00Z")
    plain = brief(BriefingOrder(station, None, now_s)).assignments
    given = CorrectionInForce(BIAS, contact)
    corrected = brief(BriefingOrder(station, None, now_s, None, given)).assignments
    for name in ("brindle-4-morning", "quillon-2-north"):
        before = next(each for each in plain if each.contact == name)
        after = next(each for each in corrected if each.contact == name)
        utc_s = 0.4 * before.begin_s + 0.6 * before.end_s
        is_meant = contact in (None, name)
        moved_s = utc_s + (2.25 if is_meant else 0.0)
        expected_deg = before.target.look(moved_s).elevation_deg + (0.4 if is_meant else 0.0)
        assert after.path.look(utc_s).elevation_deg == pytest.approx(expected_deg, abs=1e-3)
        assert after.path.at(utc_s).second_deg == pytest.approx(expected_deg, abs=5e-3)
