"""Readings held against orders: behind, frozen, away."""

from dataclasses import replace

import pytest

from tests.safety.bench_mount import LIMITS
from trunnion.mount.joints import Motion, Reading
from trunnion.safety.limits import SafetyLimits
from trunnion.safety.obedience import Obedience
from trunnion.safety.verdict import Rule

# stall error 3.0, slip 1.0, encoder error 0.05: more than 1.1 deg counts
EXACT = replace(LIMITS, encoder_error_deg=0.0625)
"""More than 1.125 deg counts, without any rounding."""


class Watched:
    """An obedience that is fed with one joint's angles, the other one obeying exactly."""

    def __init__(self, joint: int, limits: SafetyLimits = LIMITS) -> None:
        self.obedience = Obedience(limits)
        self.joint = joint
        self.mono_s = 71.25

    def see(self, ordered_deg: float, read_deg: float, *, is_new: bool = True) -> set[Rule]:
        self.mono_s += 0.1 * is_new
        ordered, read = [20.3, 41.3], [20.3, 41.3]
        ordered[self.joint], read[self.joint] = ordered_deg, read_deg
        found = self.obedience.find(
            Motion(*ordered), self.mono_s - 0.07, Reading(self.mono_s, *read)
        )
        return {hazard.rule for hazard in found}


joints = pytest.mark.parametrize("joint", [0, 1])


@joints
def test_a_mount_that_ran_on_in_a_late_turn_and_is_led_back_is_not_disobedient(joint: int) -> None:
    obedience, seen, read_deg = Obedience(LIMITS), set(), [20.3, 41.3]
    ordered = list(read_deg)
    for mono_s in (71.2, 71.3, 71.4, 72.1, 72.2, 72.3):
        rates = [0.0, 0.0]
        rates[joint] = 4.5
        read_deg[joint] = 50.0 + 4.5 * (mono_s - 71.2)
        ordered[joint] = read_deg[joint] - (2.7 if mono_s > 72.0 else 0.0)
        reading = Reading(mono_s, *read_deg)
        seen |= {each.rule for each in obedience.find(Motion(*ordered, *rates), mono_s, reading)}
    assert seen == set()
    ordered[joint] = read_deg[joint] = 55.0 + 2.3
    ordered[joint] -= 2.3 + 2.7
    found = obedience.find(Motion(*ordered, *rates), 72.4, Reading(72.4, *read_deg))
    assert Rule.WRONG_WAY in {each.rule for each in found}


@joints
def test_a_joint_that_follows_its_orders_obeys(joint: int) -> None:
    watched = Watched(joint)
    for step in range(300):
        assert watched.see(30.0 + 0.1 * step, 30.0 + 0.1 * max(0, step - 8)) == set()


@joints
@pytest.mark.parametrize("side", [-1.0, 1.0])
def test_a_joint_may_be_behind_by_the_limit(joint: int, side: float) -> None:
    watched = Watched(joint)
    assert watched.see(50.0, 50.0) == set()
    assert watched.see(50.0 + side * 3.0, 50.0) == set()
    assert watched.see(50.0 + side * 3.01, 50.01 * 1.0 if side < 0 else 50.0) >= {Rule.STALLED}


@joints
@pytest.mark.parametrize("side", [-1.0, 1.0])
def test_moving_away_from_the_orders_shows_at_any_speed(joint: int, side: float) -> None:
    for step_deg in (0.02, 0.5):
        watched = Watched(joint)
        seen = set()
        for step in range(round(1.05 / step_deg)):
            seen |= watched.see(50.0 + side * step * step_deg, 50.0 - side * step * step_deg)
        assert Rule.WRONG_WAY not in seen
        for step in range(round(1.05 / step_deg), round(2.5 / step_deg)):
            seen |= watched.see(50.0 + side * step * step_deg, 50.0 - side * step * step_deg)
        assert Rule.WRONG_WAY in seen


def test_a_joint_that_runs_away_from_orders_to_stay_is_seen() -> None:
    watched = Watched(1)
    assert [watched.see(50.0, 50.0 + 0.4 * step) for step in range(4)] == [
        set(),
        set(),
        set(),
        {Rule.WRONG_WAY},
    ]


def test_a_mount_that_lags_may_go_on_while_its_orders_turn_back() -> None:
    """Cruising 1.9 deg behind; the orders turn at once, and meet it."""
    watched = Watched(0)
    seen = watched.see(52.0, 50.1)
    for step in range(20):
        seen |= watched.see(52.0 - 0.1 * step, min(50.1 + 0.1 * step, 52.0 - 0.1 * step))
    assert seen == set()


def test_catching_up_again_and_again_does_not_add_up() -> None:
    watched = Watched(0)
    for step in range(200):
        assert watched.see(50.0 + 0.2 * step, 50.0 + 0.2 * step - 0.9 * (step % 2)) == set()


@joints
def test_a_frozen_reading_shows_once_the_orders_have_moved_on(joint: int) -> None:
    watched = Watched(joint)
    for ordered_deg in (50.0, 50.4, 50.8, 51.0999):
        assert watched.see(ordered_deg, 50.0) == set()
    assert watched.see(51.11, 50.0) == {Rule.FROZEN}
    assert watched.see(48.89, 50.0) == {Rule.FROZEN}
    assert watched.see(51.3, 50.001) == set()


def test_a_slow_mount_has_not_frozen_before_it_has_spoken_again() -> None:
    watched = Watched(0)
    assert watched.see(50.0, 50.0) == set()
    for ordered_deg in (50.9, 51.2, 51.9, 52.1):
        assert watched.see(ordered_deg, 50.0, is_new=False) == set()
    assert watched.see(52.2, 50.0) == set()
    assert watched.see(52.3, 50.0) == {Rule.FROZEN}


def test_a_joint_that_was_halted_begins_anew() -> None:
    watched = Watched(0)
    for step in range(3):
        watched.see(50.0, 50.0 + 0.4 * step)
    watched.obedience.forget()
    assert watched.see(50.0, 51.2) == set()
    assert watched.see(50.0, 52.2) == set()
    assert watched.see(50.0, 52.4) == {Rule.WRONG_WAY}


@joints
def test_having_moved_by_just_what_is_allowed_it_is_still_judged_from_its_begin(joint: int) -> None:
    watched = Watched(joint, EXACT)
    assert watched.see(0.0, 0.0) == set()
    assert watched.see(0.0, 1.125) == set()
    assert watched.see(0.0, 1.25) == {Rule.WRONG_WAY}


@joints
def test_a_gap_that_has_grown_by_just_what_is_allowed_is_allowed(joint: int) -> None:
    watched = Watched(joint, EXACT)
    watched.see(0.0, 0.0)
    assert watched.see(-0.125, -1.25) == set()


@joints
@pytest.mark.parametrize(
    ("aside_deg", "found"), [(1.125, {Rule.WRONG_WAY}), (1.25, set())], ids=["just", "more"]
)
def test_only_an_order_farther_aside_than_any_slip_begins_anew(
    joint: int, aside_deg: float, found: set[Rule]
) -> None:
    watched = Watched(joint, EXACT)
    watched.see(0.0, 0.0)
    assert watched.see(aside_deg, -1.25) == found


@joints
def test_however_little_slip_is_allowed_the_way_is_told_from_the_orders_side(joint: int) -> None:
    strict = replace(LIMITS, slip_deg=0.25, encoder_error_deg=0.0)
    away = Watched(joint, strict)
    away.see(0.0, 0.0)
    assert away.see(0.0, -0.375) == {Rule.WRONG_WAY}
    behind = Watched(joint, strict)
    ways = ((0.0, 0.0), (0.25, 0.05), (0.5, 0.1), (0.75, 0.15), (0.875, 0.375))
    assert [behind.see(*way) for way in ways] == [set()] * 5


@joints
def test_orders_that_moved_on_by_just_what_is_allowed_freeze_nothing(joint: int) -> None:
    watched = Watched(joint, EXACT)
    for ordered_deg in (0.0, 0.5, 0.75, 1.0, 1.125):
        assert watched.see(ordered_deg, 0.0) == set()
    assert watched.see(1.25, 0.0) == {Rule.FROZEN}


def test_it_has_gone_on_for_no_longer_than_since_the_order() -> None:
    ordered, reading = Motion(50.0, 41.3, 10.0, 0.0), Reading(71.35, 54.2, 41.3)
    (found,) = Obedience(LIMITS).find(ordered, 71.25, reading)
    assert found.rule is Rule.STALLED


def test_findings_name_the_joint() -> None:
    obedience = Obedience(LIMITS)
    found = list(obedience.find(Motion(50.0, 41.3), 71.2, Reading(71.3, 45.2, 46.9)))
    assert [hazard.finding for hazard in found] == [
        "the first joint is 4.8° from where it was ordered to be",
        "the second joint is 5.6° from where it was ordered to be",
    ]


def test_a_mount_may_have_gone_on_since_it_was_ordered_or_not() -> None:
    ordered = Motion(50.0, 41.3, 2.0, -1.0)
    for first_deg, second_deg in ((50.0, 41.3), (58.0, 37.3), (61.0, 34.3), (47.0, 44.3)):
        reading = Reading(75.25, first_deg, second_deg)
        assert list(Obedience(LIMITS).find(ordered, 71.25, reading)) == []
    for first_deg, second_deg in ((61.01, 37.3), (58.0, 34.29)):
        reading = Reading(75.25, first_deg, second_deg)
        (found,) = Obedience(LIMITS).find(ordered, 71.25, reading)
        assert found.rule is Rule.STALLED


def test_a_reading_older_than_the_order_is_held_against_the_order_itself() -> None:
    reading = Reading(71.0, 46.99, 41.3)
    (found,) = Obedience(LIMITS).find(Motion(50.0, 41.3, 2.0, 0.0), 71.25, reading)
    assert found.rule is Rule.STALLED


@pytest.mark.parametrize(("rate_deg_s", "read_deg"), [(0.125, 53.5), (-0.125, 53.0)])
def test_a_short_run_counts_to_its_side_alone(rate_deg_s: float, read_deg: float) -> None:
    ordered, reading = Motion(50.0, 41.25, rate_deg_s, 0.0), Reading(75.25, read_deg, 41.25)
    assert list(Obedience(LIMITS).find(ordered, 71.25, reading)) == []
