"""Whether the mount stands still."""

from math import nextafter

import pytest

from tests.safety.bench_mount import LIMITS
from trunnion.mount.joints import Reading
from trunnion.safety.stillness import STILL_S, Stillness

# encoder error 0.05: up to 0.1 deg is no motion


def test_standing_still_takes_a_moment() -> None:
    stillness = Stillness(LIMITS)
    assert not stillness.is_still(Reading(71.25, 50.0, 41.3))
    assert not stillness.is_still(Reading(71.4375, 50.0, 41.3))
    assert stillness.is_still(Reading(71.453125, 50.0, 41.3))


@pytest.mark.parametrize("place", [(50.11, 41.3), (49.89, 41.3), (50.0, 41.41), (50.0, 41.19)])
def test_motion_begins_the_moment_anew(place: tuple[float, float]) -> None:
    stillness = Stillness(LIMITS)
    stillness.is_still(Reading(71.25, 50.0, 41.3))
    assert not stillness.is_still(Reading(71.5, *place))
    assert not stillness.is_still(Reading(71.625, *place))
    assert stillness.is_still(Reading(71.75, *place))


def test_the_encoders_error_is_no_motion() -> None:
    stillness = Stillness(LIMITS)
    stillness.is_still(Reading(71.25, 50.0, 41.3))
    assert stillness.is_still(Reading(71.5, 50.09, 41.21))


def test_what_is_forgotten_has_to_be_seen_again() -> None:
    stillness = Stillness(LIMITS)
    stillness.is_still(Reading(71.25, 50.0, 41.3))
    stillness.forget()
    assert not stillness.is_still(Reading(71.5, 50.0, 41.3))


def test_the_moment_is_over_when_it_has_passed() -> None:
    stillness = Stillness(LIMITS)
    stillness.is_still(Reading(0.0, 50.0, 41.3))
    assert not stillness.is_still(Reading(nextafter(STILL_S, 0.0), 50.0, 41.3))
    assert stillness.is_still(Reading(STILL_S, 50.0, 41.3))


@pytest.mark.parametrize("place", [(0.1, 0.0), (-0.1, 0.0), (0.0, 0.1), (0.0, -0.1)])
def test_just_the_encoders_error_at_both_ends_is_no_motion(place: tuple[float, float]) -> None:
    stillness = Stillness(LIMITS)
    stillness.is_still(Reading(71.25, 0.0, 0.0))
    assert stillness.is_still(Reading(71.5, *place))
