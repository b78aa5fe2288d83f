"""An operator's correction: for which contact, until when, and what planning makes of it."""

from dataclasses import dataclass, field
from pathlib import Path

import pytest

from tests.service.stations import write_station
from trunnion.service.briefing import brief
from trunnion.service.briefing_order import BriefingOrder
from trunnion.service.clock import VirtualClock
from trunnion.service.corrections import Corrections, NothingToCorrect
from trunnion.service.standing_correction import CorrectionInForce, StandingCorrection
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


def started_anew(folder: Path, rig: Rig, *, is_plan_whole: bool = True) -> Corrections:
    """The corrections of a new process, with what is on disk."""
    standing = StandingCorrection(folder / "correction")
    return Corrections(
        rig.clock, lambda: rig.assignments, rig._plan, standing, lambda: is_plan_whole
    )


def test_a_restart_goes_on_with_it_until_its_contact_ends(tmp_path: Path, rig: Rig) -> None:
    given = started_anew(tmp_path, rig).give(BIAS, is_kept=False)
    rig.clock.sleep(6.5)
    again = started_anew(tmp_path, rig)
    assert (again.in_force, again.trouble) == (given, None)
    rig.clock.sleep(1.0)
    assert again.end_with_the_contact() == "one"
    assert started_anew(tmp_path, rig).in_force is None


def test_the_contact_of_that_name_on_another_day_is_another_one(tmp_path: Path, rig: Rig) -> None:
    started_anew(tmp_path, rig).give(BIAS, is_kept=False)
    rig.clock.sleep(86_400.0)
    rig.assignments = [assignment("one", 86_300.0, 86_500.0)]
    assert started_anew(tmp_path, rig).in_force is None


def test_a_contact_in_parts_keeps_it_to_the_end_of_the_last(tmp_path: Path, rig: Rig) -> None:
    rig.assignments.append(assignment("one", 95.0, 120.0))
    started_anew(tmp_path, rig).give(BIAS, is_kept=False)
    rig.clock.sleep(100.0)
    assert started_anew(tmp_path, rig).in_force == CorrectionInForce(BIAS, "one")


def test_until_the_whole_plan_is_known_none_is_ended(tmp_path: Path, rig: Rig) -> None:
    rig.clock.sleep(8.0)
    given = started_anew(tmp_path, rig).give(BIAS, is_kept=False)
    rig.assignments = []
    again = started_anew(tmp_path, rig, is_plan_whole=False)
    assert again.end_with_the_contact() is None
    assert again.in_force == given


def test_while_the_plan_is_being_made_one_is_asked_to_come_again(tmp_path: Path, rig: Rig) -> None:
    rig.assignments = []
    corrections = started_anew(tmp_path, rig, is_plan_whole=False)
    with pytest.raises(NothingToCorrect, match="still being made"):
        corrections.give(BIAS, is_kept=False)
    assert corrections.in_force is None


def test_a_kept_one_outlasts_restarts_and_a_cleared_one_does_not(tmp_path: Path, rig: Rig) -> None:
    first = started_anew(tmp_path, rig)
    first.give(BIAS, is_kept=True)
    rig.clock.sleep(1e6)
    second = started_anew(tmp_path, rig)
    assert second.in_force == CorrectionInForce(BIAS, None)
    second.clear()
    assert started_anew(tmp_path, rig).in_force is None


@pytest.mark.parametrize(
    "text",
    [
        "",
        "null",
        "[1, 2]",
        '{"contact": "one", "until_utc_s": 9e9}',
        '{"contact": 7, "until_utc_s": 9e9, "correction": {"azimuth_deg": 0.3}}',
        '{"contact": "one", "until_utc_s": null, "correction": {"azimuth_deg": 0.3}}',
        '{"contact": "one", "until_utc_s": 9e9, "correction": {"azimuth_deg": 77.0}}',
        '{"contact": "one", "until_utc_s": 9e9, "correction": {"zenith_deg": 0.3}}',
    ],
)
def test_what_is_no_correction_on_disk_corrects_nothing(
    tmp_path: Path, rig: Rig, text: str
) -> None:
    (tmp_path / "correction").write_text(text)
    assert started_anew(tmp_path, rig).in_force is None


def test_a_disk_that_cannot_keep_it_is_told_and_it_holds(tmp_path: Path, rig: Rig) -> None:
    (tmp_path / "correction.new").mkdir()
    corrections = started_anew(tmp_path, rig)
    assert corrections.give(BIAS, is_kept=False) == corrections.in_force
    assert "a restart would forget the correction" in str(corrections.trouble)


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
