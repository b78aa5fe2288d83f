"""Demands brought within the limits, refused, or braked."""

from dataclasses import replace

import pytest

from tests.safety.bench_mount import LIMITS
from trunnion.mount.clearance import Clearance, Sector
from trunnion.mount.joints import Motion, Reading
from trunnion.mount.motion import approach
from trunnion.safety.orders import Mounted, examine
from trunnion.safety.verdict import Rule

# rates 6.3 and 4.7, accelerations 2.9 and 2.1, of which four fifths count for braking


def mounted(
    base: Motion, place: tuple[float, float] | None = None, measured: Motion | None = None
) -> Mounted:
    return Mounted(base, Reading(71.2, *(place or base.joints)), measured or base)


def test_what_can_be_done_leaves_as_it_was_asked() -> None:
    demand = Motion(201.71, 41.3, 0.2, 0.0)
    assert examine(demand, mounted(Motion(201.7, 41.3)), 0.1, LIMITS) == (demand, ())


def test_what_asks_for_too_much_is_told_of() -> None:
    examined = examine(Motion(220.0, 41.3), mounted(Motion(201.7, 41.3)), 0.1, LIMITS)
    assert examined.motion == approach(Motion(201.7, 41.3), Motion(220.0, 41.3), LIMITS.mount, 0.1)
    (hazard,) = examined.hazards
    assert hazard == (Rule.RATE, "asked for 220.0°/41.3°, more than a joint can do at once")


def test_what_leads_outside_in_the_end_is_refused_before_it_does() -> None:
    examined = examine(Motion(201.7, 2.0), mounted(Motion(201.7, 41.3)), 0.1, LIMITS)
    assert examined.motion is None
    assert [hazard.rule for hazard in examined.hazards] == [Rule.RATE, Rule.FLOOR]
    assert examined.hazards[1].finding == (
        "asked for 201.7°/2.0°: elevation 2.00°, the floor is 5.3°"
    )


def test_without_room_to_stop_it_brakes() -> None:
    base = Motion(201.7, 7.7, 0.0, -2.0)
    demand = Motion(201.7, 7.5, 0.0, -2.0)
    examined = examine(demand, mounted(base), 0.1, LIMITS)
    assert examined.motion is not None
    assert tuple(examined.motion) == pytest.approx((201.7, 7.5084, 0.0, -1.832))
    (hazard,) = examined.hazards
    assert hazard.rule is Rule.STOPPING
    assert hazard.finding.startswith("asked for 201.7°/7.5°, could not stop in time: elevation")


def test_room_for_the_turn_that_passes_counts_unless_it_brakes_already() -> None:
    """The mask stands at 6.31: rest after 1.19 deg, and 0.2 deg more before anybody reacts."""
    steady = examine(
        Motion(201.7, 7.6, 0.0, -2.0), mounted(Motion(201.7, 7.8, 0.0, -2.0)), 0.1, LIMITS
    )
    assert [hazard.rule for hazard in steady.hazards] == [Rule.STOPPING]
    braking = examine(
        Motion(201.7, 7.6, 0.0, -2.0), mounted(Motion(201.7, 7.81, 0.0, -2.2)), 0.1, LIMITS
    )
    assert braking == (Motion(201.7, 7.6, 0.0, -2.0), ())


def test_where_even_braking_is_not_clear_nothing_leaves() -> None:
    """The mount is beyond the mast; braking along the order's way would drag it through."""
    base = Motion(139.9, 20.3, 2.0, 0.0)
    demand = Motion(140.1, 20.3, 2.0, 0.0)
    assert examine(demand, mounted(base, (140.0, 20.3)), 0.1, LIMITS).motion is not None
    examined = examine(demand, mounted(base, (148.0, 20.3)), 0.1, LIMITS)
    assert examined.motion is None


def test_braking_from_within_a_limit_that_came_near_is_refused() -> None:
    base = Motion(201.7, 6.35, 0.0, -2.0)
    demand = Motion(201.7, 6.5, 0.0, -0.1)
    examined = examine(demand, mounted(base, (201.7, 6.4)), 0.1, LIMITS)
    assert examined.motion is None


def test_where_the_braking_step_itself_is_forbidden_nothing_leaves() -> None:
    """The order would just clear the mask at 6.309; braking on the way up falls short of it."""
    base, demand = Motion(201.7, 6.21, 0.0, 1.0), Motion(201.7, 6.31, 0.0, 1.0)
    assert examine(demand, mounted(base, (201.7, 6.4)), 0.1, LIMITS) == (demand, ())
    falling = Motion(201.7, 6.4, 0.0, -4.0)
    examined = examine(demand, mounted(base, (201.7, 6.4), falling), 0.1, LIMITS)
    assert examined.motion is None
    assert [hazard.rule for hazard in examined.hazards] == [Rule.STOPPING]


def test_a_mount_faster_than_its_orders_needs_its_own_room() -> None:
    base = Motion(201.7, 9.4)
    slow = Motion(201.7, 9.4)
    assert examine(slow, mounted(base), 0.1, LIMITS) == (slow, ())
    fast = Motion(201.7, 9.0, 0.0, -4.0)
    examined = examine(slow, mounted(base, (201.7, 9.0), fast), 0.1, LIMITS)
    assert [hazard.rule for hazard in examined.hazards] == [Rule.STOPPING]
    up = Motion(201.7, 9.0, 0.0, 4.0)
    assert examine(slow, mounted(base, (201.7, 9.0), up), 0.1, LIMITS) == (slow, ())


@pytest.mark.parametrize(
    ("rate_deg_s", "needs_room"), [(-4.09, False), (-4.1, False), (-4.11, True)]
)
def test_a_little_faster_is_the_encoders_noise(rate_deg_s: float, needs_room: bool) -> None:
    base, demand = Motion(201.7, 11.9, 0.0, -4.0), Motion(201.7, 11.5, 0.0, -4.0)
    measured = Motion(201.7, 11.2, 0.0, rate_deg_s)
    examined = examine(demand, mounted(base, (201.7, 11.2), measured), 0.1, LIMITS)
    assert bool(examined.hazards) == needs_room


@pytest.mark.parametrize(
    ("was_deg_s", "place_deg", "is_braking"), [(-2.147, 7.505, True), (-2.105, 7.52, False)]
)
def test_seven_tenths_of_full_braking_is_braking_and_half_is_not(
    was_deg_s: float, place_deg: float, is_braking: bool
) -> None:
    base = Motion(201.7, place_deg + 0.05 * (2.0 - was_deg_s), 0.0, was_deg_s)
    demand = Motion(201.7, place_deg, 0.0, -2.0)
    examined = examine(demand, mounted(base), 0.1, LIMITS)
    assert (examined == (demand, ())) == is_braking


@pytest.mark.parametrize(
    ("was_deg_s", "place_deg", "is_allowed"),
    [
        (-2.0, 7.69, False),
        (-2.0, 7.71, True),
        (-1.95, 7.71, True),
        (-2.2, 7.48, False),
    ],
)
def test_a_whole_turn_counts_for_a_joint_that_goes_on_and_none_for_one_that_brakes(
    was_deg_s: float, place_deg: float, is_allowed: bool
) -> None:
    """The mask stands at 6.309; 1.190 deg to rest, and 0.2 deg in the turn that passes."""
    base = Motion(201.7, place_deg + 0.05 * (2.0 - was_deg_s), 0.0, was_deg_s)
    demand = Motion(201.7, place_deg, 0.0, -2.0)
    assert (examine(demand, mounted(base), 0.1, LIMITS) == (demand, ())) == is_allowed


@pytest.mark.parametrize(("rate_deg_s", "needs_room"), [(4.1, False), (4.11, True)])
def test_the_first_joint_may_be_a_little_faster_too(rate_deg_s: float, needs_room: bool) -> None:
    base, demand = Motion(263.7, 41.3, 4.0, 0.0), Motion(264.1, 41.3, 4.0, 0.0)
    measured = Motion(264.45, 41.3, rate_deg_s, 0.0)
    examined = examine(demand, mounted(base, (264.45, 41.3), measured), 0.1, LIMITS)
    assert bool(examined.hazards) == needs_room


@pytest.mark.parametrize(
    ("rate_deg_s", "is_braked"), [(-1.52, False), (-1.55, True), (-2.7, True), (-4.0, True)]
)
def test_room_round_the_reading_is_not_room_to_stop_from_any_speed(
    rate_deg_s: float, *, is_braked: bool
) -> None:
    """The floor is 1.01 deg below: 0.69 or 0.72 to stop, and twice 0.15 before it does."""
    limits = replace(LIMITS, clearance=Clearance(5.3, None))
    base = Motion(201.7, 6.31, 0.0, rate_deg_s)
    demand = Motion(201.7, 6.31 + 0.1 * rate_deg_s, 0.0, rate_deg_s)
    examined = examine(demand, mounted(base), 0.1, limits, has_room=True)
    assert (examined == (demand, ())) != is_braked


@pytest.mark.parametrize(("second_deg", "is_near"), [(41.3, True), (40.6, False)])
def test_an_order_far_from_the_reading_has_no_room(second_deg: float, *, is_near: bool) -> None:
    """Rates may be small and the order still be beyond what is near the reading."""
    pole = Sector("the pole", 202.3, 202.6, 40.1, 40.9)
    limits = replace(LIMITS, clearance=Clearance(5.3, None, (pole,)))
    base = Motion(202.45, second_deg)
    examined = examine(base, mounted(base, (201.7, 41.3)), 0.1, limits, has_room=True)
    assert (examined == (base, ())) == is_near


def test_a_mount_faster_than_its_orders_needs_more_room() -> None:
    limits = replace(LIMITS, clearance=Clearance(5.3, None))
    base = Motion(201.7, 6.35)
    measured = Motion(201.7, 6.35, 0.0, -2.3)
    examined = examine(base, mounted(base, measured=measured), 0.1, limits, has_room=True)
    assert examined != (base, ())


def test_however_hard_a_joint_brakes_it_needs_the_room_from_where_it_is() -> None:
    """The mask stands at 6.309, and rest would be at 6.29."""
    base, demand = Motion(201.7, 7.69, 0.0, -2.2), Motion(201.7, 7.48, 0.0, -2.0)
    examined = examine(demand, mounted(base, measured=demand), 0.1, LIMITS)
    assert [hazard.rule for hazard in examined.hazards] == [Rule.STOPPING]
