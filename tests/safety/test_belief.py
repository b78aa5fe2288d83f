"""Which readings are believed, which are not, and what they say of the motion."""

import math
from dataclasses import replace

import pytest

from tests.safety.bench_mount import LIMITS
from trunnion.mount.joints import Reading
from trunnion.mount.mount import JointLimits
from trunnion.safety.belief import Belief
from trunnion.safety.verdict import Rule

# travel -271…268 and 1.5…91, rates 6.3 and 4.7, encoder error 0.05


def found(belief: Belief, reading: Reading | None, age_s: float = 0.03) -> list[Rule]:
    mono_s = 0.0 if reading is None else reading.taken_s + age_s
    return [hazard.rule for hazard in belief.find(mono_s, reading)]


def settled() -> Belief:
    """Two readings that agree."""
    belief = Belief(LIMITS)
    assert found(belief, Reading(71.25, 201.7, 41.3)) == []
    assert found(belief, Reading(71.5, 202.2, 41.2)) == []
    return belief


def test_readings_that_follow_each_other_are_believed_and_show_the_motion() -> None:
    belief = settled()
    assert belief.reading == Reading(71.5, 202.2, 41.2)
    assert belief.measured is not None
    assert tuple(belief.measured) == pytest.approx((202.2, 41.2, 2.0, -0.4))


def test_none_is_no_reading() -> None:
    assert found(settled(), None) == [Rule.NO_READING]


@pytest.mark.parametrize(("age_s", "rules"), [(1.0, []), (1.01, [Rule.READING_OLD])])
def test_a_reading_may_be_as_old_as_the_limit(age_s: float, rules: list[Rule]) -> None:
    assert found(settled(), Reading(71.75, 202.2, 41.2), age_s) == rules


@pytest.mark.parametrize(
    "reading",
    [
        Reading(math.nan, 202.2, 41.2),
        Reading(71.75, math.nan, 41.2),
        Reading(71.75, 202.2, math.nan),
        Reading(71.75, math.inf, 41.2),
        Reading(71.75, 202.2, -math.inf),
        Reading(71.75, -281.01, 41.2),
        Reading(71.75, 278.01, 41.2),
        Reading(71.75, 202.2, -8.51),
        Reading(71.75, 202.2, 101.01),
    ],
)
def test_what_cannot_be_is_not_believed(reading: Reading) -> None:
    belief = settled()
    assert [hazard.rule for hazard in belief.find(71.8, reading)] == [Rule.READING_IMPOSSIBLE]
    assert belief.reading == Reading(71.5, 202.2, 41.2)


@pytest.mark.parametrize("reading", [Reading(71.75, -281.0, 41.2), Reading(71.75, 278.0, 101.0)])
def test_a_mount_may_be_a_little_outside(reading: Reading) -> None:
    assert found(Belief(LIMITS), reading) == []


@pytest.mark.parametrize(("ahead_s", "rules"), [(1.0, []), (1.01, [Rule.READING_IMPOSSIBLE])])
def test_a_reading_from_the_future_is_none(ahead_s: float, rules: list[Rule]) -> None:
    assert found(settled(), Reading(71.75, 202.2, 41.2), -ahead_s) == rules


@pytest.mark.parametrize(
    ("reading", "is_jump"),
    [
        (Reading(72.5, 202.2 + 9.64, 41.2), False),  # 1.5 x 6.3 x 1 s + 4 x 0.05
        (Reading(72.5, 202.2 + 9.66, 41.2), True),
        (Reading(72.5, 202.2 - 9.66, 41.2), True),
        (Reading(72.5, 202.2, 41.2 + 7.24), False),  # 1.5 x 4.7 x 1 s + 4 x 0.05
        (Reading(72.5, 202.2, 41.2 + 7.26), True),
    ],
)
def test_a_reading_may_be_as_far_as_the_mount_can_get(reading: Reading, is_jump: bool) -> None:
    rules = found(settled(), reading)
    assert rules == ([Rule.READING_JUMPED, Rule.POSITION_LOST] if is_jump else [])


def test_a_jump_is_no_less_one_for_staying_there() -> None:
    """The mount was moving at 2 deg/s and is halted: it gets 0.69 deg further, not more."""
    belief = settled()
    for later_s in (0.25, 0.5, 1.0, 2.0, 5.0):
        shifted = Reading(71.5 + later_s, 206.2, 41.2)
        assert found(belief, shifted) == [Rule.READING_JUMPED, Rule.POSITION_LOST]


def test_after_a_jump_the_way_to_rest_is_allowed_for() -> None:
    belief = settled()  # 1.5 x (6.3 x 0.25 + 2²/(2 x 2.9)) + 0.2 = 3.60
    found(belief, Reading(71.75, 250.0, 41.2))
    assert found(belief, Reading(72.75, 202.2 + 3.65, 41.2)) != []
    assert found(belief, Reading(72.75, 202.2 + 3.55, 41.2)) == []


def test_one_wild_reading_changes_nothing_that_follows() -> None:
    belief = settled()
    assert found(belief, Reading(71.75, 250.0, 41.2)) != []
    assert found(belief, Reading(72.0, 202.2, 41.2)) == []
    assert found(belief, Reading(74.0, 202.2 + 6.0, 41.2)) == []


def test_a_first_reading_that_is_contradicted_gives_way() -> None:
    belief = Belief(LIMITS)
    assert found(belief, Reading(71.25, 12.7, 41.3)) == []
    assert found(belief, Reading(71.35, 201.7, 41.3)) == [Rule.READING_JUMPED]
    assert belief.reading == Reading(71.35, 201.7, 41.3)
    assert belief.measured is None
    assert found(belief, Reading(71.45, 201.7, 41.3)) == []


def test_the_same_reading_again_and_an_older_one_are_no_news() -> None:
    belief = settled()
    measured = belief.measured
    assert found(belief, Reading(71.5, 202.2, 41.2), 0.2) == []
    assert found(belief, Reading(71.3, 202.1, 41.2), 0.3) == []
    assert (belief.reading, belief.measured) == (Reading(71.5, 202.2, 41.2), measured)


def test_what_is_forgotten_is_neither_held_against_anybody_nor_confirmed() -> None:
    belief = settled()
    belief.forget()
    assert (belief.reading, belief.measured) == (None, None)
    assert found(belief, Reading(71.6, 12.7, 41.3)) == []
    assert found(belief, Reading(71.7, 201.7, 41.3)) == [Rule.READING_JUMPED]
    assert found(belief, Reading(71.8, 201.7, 41.3)) == []


def test_findings_say_what_was_read() -> None:
    belief = settled()
    (jump, lost) = belief.find(71.8, Reading(71.75, 250.0, 41.2))
    assert jump.finding == "the reading jumped from 202.2°/41.2° to 250.0°/41.2°"
    assert lost.finding == "the reading jumped from 202.2°/41.2° to 250.0°/41.2° and stays there"
    (old,) = belief.find(75.0, Reading(71.75, 202.2, 41.2))
    assert old.finding == "the last reading is 3.2 s old, 1 s are allowed"
    (wild,) = belief.find(71.8, Reading(71.75, 311.7, 41.2))
    assert wild.finding == "the mount says it is at 311.7°/41.2°"


@pytest.mark.parametrize("joint", [0, 1])
def test_exactly_as_far_as_the_mount_can_get_is_no_jump(joint: int) -> None:
    """Numbers that are exact in binary: 1.5 x 4 deg/s x 1 s + 4 x 0.0625 = 6.25 deg."""
    limits = JointLimits(-271.0, 268.0, 4.0, 2.0)
    exact = replace(
        LIMITS, mount=replace(LIMITS.mount, first=limits, second=limits), encoder_error_deg=0.0625
    )
    place, further = [20.5, 40.5], [20.5, 40.5]
    further[joint] += 6.25
    belief = Belief(exact)
    for reading in (Reading(70.0, *place), Reading(71.0, *place), Reading(72.0, *further)):
        assert found(belief, reading) == []
