"""A mount that was halted comes to rest, and stays there."""

from tests.safety.bench_mount import LIMITS
from trunnion.mount.joints import Motion, Reading
from trunnion.safety.rest import Rest

# slip 1.0, accelerations 2.9 and 2.1: from (2.9, 1.05) deg/s settled after 1 + 1.5 x 1 = 2.5 s


def see(rest: Rest, mono_s: float, motion: Motion) -> bool:
    reading = Reading(mono_s - 0.03, motion.first_deg, motion.second_deg)
    return bool(list(rest.find(mono_s, reading, motion)))


def test_on_its_way_to_rest_it_may_move() -> None:
    rest = Rest(LIMITS)
    assert not see(rest, 71.0, Motion(50.0, 41.3, 2.9, 1.05))
    assert not see(rest, 73.5, Motion(57.0, 47.3))


def test_then_it_stays_within_the_limit_of_where_it_came_to_rest() -> None:
    rest = Rest(LIMITS)
    see(rest, 71.0, Motion(50.0, 41.3, 2.9, 1.05))
    see(rest, 73.5, Motion(57.0, 47.3))
    assert not see(rest, 73.6, Motion(58.0, 46.3))
    assert see(rest, 73.7, Motion(58.01, 47.3))
    assert see(rest, 73.8, Motion(57.0, 46.29))


def test_the_slower_braking_joint_counts() -> None:
    rest = Rest(LIMITS)
    see(rest, 71.0, Motion(50.0, 41.3, -0.29, -4.2))  # 1 + 1.5 x 2 s
    assert not see(rest, 75.0, Motion(50.0, 37.3))
    assert see(rest, 75.1, Motion(50.0, 35.3))


def test_a_mount_at_rest_gets_only_the_time_to_hear_of_it() -> None:
    rest = Rest(LIMITS)
    see(rest, 71.0, Motion(50.0, 41.3))
    assert not see(rest, 72.0, Motion(51.2, 41.3))
    assert see(rest, 72.1, Motion(52.3, 41.3))


def test_after_other_orders_it_begins_anew() -> None:
    rest = Rest(LIMITS)
    see(rest, 71.0, Motion(50.0, 41.3))
    see(rest, 72.5, Motion(50.0, 41.3))
    rest.forget()
    assert not see(rest, 73.0, Motion(60.0, 41.3))


def test_the_finding_says_how_far() -> None:
    rest = Rest(LIMITS)
    see(rest, 71.0, Motion(50.0, 41.3))
    (hazard,) = rest.find(72.5, Reading(72.47, 50.0, 43.0), Motion(50.0, 43.0))
    assert hazard.finding == "the mount moved 1.7° that nobody ordered"
