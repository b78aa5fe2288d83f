"""The permission to transmit: slow to come, quick to go."""

from math import nan

import pytest

from tests.safety.bench_mount import LIMITS
from trunnion.mount.joints import Reading
from trunnion.safety.transmit import SETTLED_S, VALIDITY_S, TransmitJudge, TransmitPermit
from trunnion.safety.verdict import Action, Halt, Intervention, Rule, Verdict

TOLERANCE_DEG = 0.37
BEGIN_S = 812.6
HIGH_DEG = LIMITS.transmit_floor_deg + 17.3
GOOD = Verdict(Halt())


def reading(mono_s: float, elevation_deg: float = HIGH_DEG) -> Reading:
    return Reading(mono_s - 0.07, 41.9, elevation_deg)


def settled() -> TransmitJudge:
    judge = TransmitJudge(LIMITS, TOLERANCE_DEG)
    judge.judge(BEGIN_S, 0.21, reading(BEGIN_S), GOOD)
    return judge


def test_comes_only_after_a_time_on_target() -> None:
    judge, soon_s, later_s = settled(), BEGIN_S + 0.9 * SETTLED_S, BEGIN_S + 1.1 * SETTLED_S
    soon = judge.judge(soon_s, 0.21, reading(soon_s), GOOD)
    later = judge.judge(later_s, 0.21, reading(later_s), GOOD)
    assert soon.until_s is None
    assert "too short a time" in str(soon.reason)
    assert later == TransmitPermit(later_s + VALIDITY_S, None)


def test_expires_by_itself() -> None:
    permit = TransmitPermit(BEGIN_S + VALIDITY_S, None)
    assert permit.is_good_at(BEGIN_S + 0.9 * VALIDITY_S)
    assert not permit.is_good_at(BEGIN_S + VALIDITY_S)
    assert not TransmitPermit(None, "no contact is on").is_good_at(BEGIN_S)


@pytest.mark.parametrize(
    ("error_deg", "seen", "verdict", "why"),
    [
        (None, "fresh", GOOD, "no contact"),
        (0.38, "fresh", GOOD, "off"),
        (nan, "fresh", GOOD, "off"),
        (0.21, "none", GOOD, "nobody knows"),
        (0.21, "old", GOOD, "nobody knows"),
        (0.21, "low", GOOD, "transmit floor"),
        (0.21, "fresh", Verdict(Halt(), latch="the joint stalled"), "the joint stalled"),
        (
            0.21,
            "fresh",
            Verdict(Halt(), (Intervention(Rule.WIND, Action.STOW, "gusts of 31 m/s"),)),
            "gusts of 31",
        ),
    ],
)
def test_goes_at_once_and_begins_anew(
    error_deg: float | None, seen: str, verdict: Verdict, why: str
) -> None:
    judge, now_s = settled(), BEGIN_S + 1.1 * SETTLED_S
    seen_now = {
        "fresh": reading(now_s),
        "none": None,
        "old": reading(now_s - 1.2 * LIMITS.reading_max_age_s),
        "low": reading(now_s, LIMITS.transmit_floor_deg - 0.04),
    }[seen]
    permit = judge.judge(now_s, error_deg, seen_now, verdict)
    assert permit.until_s is None
    assert why in str(permit.reason)
    after_s = now_s + 0.1
    assert judge.judge(after_s, 0.21, reading(after_s), GOOD).until_s is None


def test_a_slowed_order_does_not_forbid() -> None:
    slowed = Verdict(Halt(), (Intervention(Rule.RATE, Action.SLOW, "asked for more"),))
    judge, now_s = settled(), BEGIN_S + 1.1 * SETTLED_S
    assert judge.judge(now_s, 0.21, reading(now_s), slowed).until_s is not None
