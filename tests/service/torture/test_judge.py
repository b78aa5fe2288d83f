"""The judge of the torture, shown what must never be."""

from dataclasses import replace

from trunnion.mount.joints import Motion
from trunnion.pilot.phase import Wish
from trunnion.service.torture.checker import Checker
from trunnion.service.torture.flight import Instant
from trunnion.service.torture.mishap import Mishap, MishapKind
from trunnion.service.torture.scenario import START_UTC_S, Scenario, draw

UNSTOPPABLE = Mishap(MishapKind.UNSTOPPABLE, 5.0, 90.0, 1.0, 0)
POWER = "3 stop takes the power"


def scenario(*mishaps: Mishap) -> Scenario:
    return replace(draw(71), mishaps=(UNSTOPPABLE, *mishaps))


def broken(flown: Scenario, rate_deg_s: float, until_s: float = 60.0) -> set[str]:
    """The promises broken by a joint that moves on like this, stopped from the begin."""
    judge, found = Checker(flown), set()
    for turn in range(round(until_s / 0.1)):
        since_s = 0.1 * turn
        true = Motion(*flown.mount.stow, rate_deg_s, 0.0)
        now = Instant(
            since_s,
            START_UTC_S + since_s,
            true,
            "stop",
            Wish.STAND,
            may_transmit=False,
            is_alive=True,
            interventions=(),
        )
        found |= {violation.guarantee for violation in judge.note(now)}
    return found


def test_a_joint_that_runs_on_after_a_stop_has_power_and_must_not() -> None:
    assert POWER in broken(scenario(), rate_deg_s=2.3)
    assert POWER not in broken(scenario(), rate_deg_s=0.0)
    assert POWER not in broken(scenario(), rate_deg_s=2.3, until_s=2.0)


def test_nobody_can_take_the_power_over_a_cable_that_is_pulled() -> None:
    pulled = Mishap(MishapKind.CABLE_PULLED, 0.0, 90.0, 1.0, 0)
    assert POWER not in broken(scenario(pulled), rate_deg_s=2.3)


def outside() -> Scenario:
    """A flight that begins outside the travel, and whose operator asks for the way back."""
    flown = draw(71)
    start = flown.mount.stow._replace(first_deg=flown.mount.first.upper_deg + 1.9)
    back = Mishap(MishapKind.RECOVER, 5.0, 0.0, 1.0, 0)
    return replace(flown, start=start, mishaps=(back,))


def returned(rate_deg_s: float, begin_s: float = 5.0) -> set[str]:
    """The promises broken by a mount that goes inwards (or, below zero, outwards) at this rate."""
    flown = outside()
    judge, found = Checker(flown), set()
    first_deg, second_deg = flown.start
    inwards = flown.mount.stow[0] - first_deg, flown.mount.stow[1] - second_deg
    for turn in range(70):
        since_s = 0.1 * turn
        way_deg = max(0.0, since_s - begin_s) * rate_deg_s
        share = way_deg / max(map(abs, inwards))
        true = Motion(first_deg + share * inwards[0], second_deg + share * inwards[1])
        now = Instant(since_s, START_UTC_S + since_s, true, None, Wish.STAND,
                      may_transmit=False, is_alive=True, interventions=())  # fmt: skip
        found |= {violation.guarantee for violation in judge.note(now)}
    return found


def test_the_way_back_inside_is_slow_never_outwards_and_only_by_leave() -> None:
    assert "6 outside" not in returned(0.4)
    assert "6 outside" in returned(2.0)
    assert "6 outside" in returned(-0.3)
    assert "6 outside" in returned(0.4, begin_s=2.0)


def test_records_that_are_not_written_are_a_broken_promise() -> None:
    flown = scenario()
    now = Instant(7.3, START_UTC_S + 7.3, Motion(*flown.mount.stow), None, Wish.FOLLOW_PLAN,
                  may_transmit=False, is_alive=True, interventions=())  # fmt: skip
    told = now._replace(records_trouble="records cannot be written: disk I/O error")
    assert "records" not in {each.guarantee for each in Checker(flown).note(now)}
    assert "records" in {each.guarantee for each in Checker(flown).note(told)}
