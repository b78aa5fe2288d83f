"""The pilot's state machine, flown on a mount that obeys exactly."""

from itertools import pairwise

import pytest

from tests.pilot.flight import FACTS, MOUNT, START_UTC_S, Flight, contact
from trunnion.mount.joints import Joints, Motion, Reading
from trunnion.pilot.decision import Situation
from trunnion.pilot.phase import Phase, Wish
from trunnion.pilot.pilot import Pilot

RISING = Motion(203.7, 5.3, 0.41, 0.17)
FALLING = Motion(171.3, 61.9, -0.37, -0.29)


def test_without_a_reading_nothing_is_ordered() -> None:
    decision = Pilot(FACTS).decide(
        Situation(START_UTC_S, 17.3, None, None, (contact("a", -5.0, 300.0, RISING),))
    )
    assert (decision.phase, decision.demand) == (Phase.STARTING, None)


def test_with_nothing_to_do_it_goes_to_stow_and_rests_there() -> None:
    flight = Flight()
    assert flight.turn().phase is Phase.STOWING
    flight.fly_until(Phase.STOWED)
    assert flight.place == MOUNT.stow
    assert flight.fly(30.0).demand == Motion(*MOUNT.stow)


def test_it_waits_at_the_rise_point_before_the_contact_begins() -> None:
    flight = Flight((contact("a", 300.0, 200.0, RISING),))
    flight.fly_until(Phase.STOWED)
    departure_s = flight.turn().departure_s
    assert departure_s is not None
    flight.fly_until(Phase.SLEWING)
    assert flight.utc_s == pytest.approx(departure_s, abs=0.2)
    flight.fly_until(Phase.WAITING)
    assert flight.place == RISING.joints
    early_s = START_UTC_S + 300.0 - flight.utc_s
    assert early_s == pytest.approx(FACTS.timing.lead_s, abs=1.0)


def test_it_follows_the_path_exactly_once_it_has_caught_it() -> None:
    flight = Flight((contact("a", 120.0, 150.0, RISING),))
    flight.fly(125.0)
    for _ in range(700):
        decision = flight.turn()
        assert decision.assignment is not None
        assert decision.phase is Phase.TRACKING
        assert decision.demand == decision.assignment.path.at(flight.utc_s)
        assert decision.error_deg is not None
        assert decision.error_deg < 0.1


def test_a_pilot_started_in_mid_contact_takes_it_up() -> None:
    flight = Flight((contact("a", -100.0, 400.0, FALLING),), place=Joints(-133.9, 41.7))
    assert flight.turn().phase is Phase.ACQUIRING
    flight.fly_until(Phase.TRACKING, limit_s=90.0)
    flight.fly(5.0)
    assert flight.ordered == flight.assignments[0].path.at(flight.utc_s)


def test_a_long_pause_is_spent_in_stow_and_a_short_one_at_the_next_rise_point() -> None:
    long = Flight(
        (contact("a", 5.0, 60.0, FALLING), contact("b", 400.0, 60.0, RISING)),
        place=FALLING.joints,
    )
    long.fly(70.0)
    long.fly_until(Phase.STOWED)
    short = Flight(
        (contact("a", 5.0, 60.0, FALLING), contact("b", 130.0, 60.0, RISING)),
        place=FALLING.joints,
    )
    short.fly(129.0)
    phases = {each.phase for at_s, each in short.decisions if at_s > 65.2}
    assert phases == {Phase.SLEWING, Phase.WAITING}


def test_once_on_the_way_to_a_rise_point_it_does_not_turn_back() -> None:
    flight = Flight((contact("a", 90.0, 60.0, RISING),))
    flight.fly(89.0)
    phases = [each.phase for _, each in flight.decisions]
    assert Phase.STOWING not in phases[phases.index(Phase.SLEWING) :]


def test_after_the_contact_it_goes_home() -> None:
    flight = Flight((contact("a", 5.0, 30.0, FALLING),), place=FALLING.joints)
    flight.fly(34.0)
    assert flight.turn().phase is Phase.TRACKING
    flight.fly(3.0)
    assert flight.turn().phase is Phase.STOWING


def test_the_operator_can_stow_in_mid_contact_and_resume() -> None:
    flight = Flight((contact("a", 5.0, 500.0, FALLING),), place=FALLING.joints)
    flight.fly(20.0)
    flight.wish = Wish.STOW
    assert flight.turn().phase is Phase.STOWING
    flight.fly_until(Phase.STOWED)
    flight.fly(10.0)
    flight.wish = Wish.FOLLOW_PLAN
    assert flight.turn().phase is Phase.ACQUIRING
    flight.fly_until(Phase.TRACKING)


def test_told_to_hold_it_orders_nothing() -> None:
    flight = Flight((contact("a", 5.0, 500.0, FALLING),), place=FALLING.joints)
    flight.fly(20.0)
    flight.wish = Wish.HOLD
    decision = flight.turn()
    assert (decision.phase, decision.demand) == (Phase.HOLDING, None)


def test_a_hazard_that_asks_for_stow_comes_before_any_contact() -> None:
    flight = Flight((contact("a", 5.0, 500.0, FALLING),), place=FALLING.joints)
    flight.fly(20.0)
    flight.must_stow = True
    assert flight.turn().phase is Phase.STOWING


def test_told_to_hold_it_goes_to_stow_all_the_same_when_a_hazard_asks_for_it() -> None:
    flight = Flight((contact("a", 5.0, 500.0, FALLING),), place=FALLING.joints)
    flight.wish, flight.must_stow = Wish.HOLD, True
    assert flight.turn().phase is Phase.STOWING


def test_standing_still_no_hazard_starts_it() -> None:
    flight = Flight((contact("a", 5.0, 500.0, FALLING),), place=FALLING.joints)
    flight.fly(20.0)
    flight.wish, flight.must_stow = Wish.STAND, True
    decision = flight.turn()
    assert (decision.phase, decision.demand) == (Phase.HOLDING, None)


def test_stopped_it_orders_nothing_and_forgets_its_way() -> None:
    flight = Flight((contact("a", 5.0, 500.0, FALLING),))
    flight.fly(2.0)
    flight.is_stopped = True
    decision = flight.turn()
    assert (decision.phase, decision.demand) == (Phase.HALTED, None)
    flight.is_stopped = False
    decision = flight.turn()
    assert decision.demand is not None
    assert decision.demand.joints == pytest.approx(flight.place, abs=0.2)


def test_a_target_that_is_lost_in_mid_contact_is_said_and_the_next_one_served() -> None:
    flight = Flight(
        (
            contact("a", 5.0, 60.0, FALLING, lost_after_s=20.0),
            contact("b", 120.0, 60.0, RISING),
        ),
        place=FALLING.joints,
    )
    decision = flight.fly(30.0)
    assert (decision.phase, decision.demand) == (Phase.HOLDING, None)
    assert decision.trouble == "expected an orbit, got a decayed one"
    flight.fly(95.0)
    assert flight.turn().phase is Phase.TRACKING


def test_a_contact_that_no_clear_way_leads_to_is_said() -> None:
    beneath = Motion(171.3, 2.2, 0.1, 0.01)
    flight = Flight((contact("a", 5.0, 60.0, beneath),))
    decision = flight.fly(8.0)
    assert (decision.phase, decision.demand) == (Phase.HOLDING, None)
    assert decision.trouble


def test_every_demand_keeps_within_rate_and_acceleration() -> None:
    flight = Flight(
        (contact("a", 100.0, 60.0, FALLING), contact("b", 190.0, 60.0, RISING)),
        ordered=Motion(-133.9, 41.7),
    )
    flight.fly(400.0, dt_s=0.13)
    demands = [each.demand for _, each in flight.decisions if each.demand is not None]
    assert len(demands) > 3000
    for before, after in pairwise(demands):
        for limits, rates in (
            (MOUNT.first, (before.first_rate_deg_s, after.first_rate_deg_s)),
            (MOUNT.second, (before.second_rate_deg_s, after.second_rate_deg_s)),
        ):
            assert abs(rates[1]) <= limits.rate_deg_s + 1e-9
            assert abs(rates[1] - rates[0]) <= limits.acceleration_deg_s2 * 0.13 + 1e-5


def test_after_a_stall_the_demand_moves_on_by_one_short_step() -> None:
    flight = Flight((contact("a", 300.0, 200.0, RISING),))
    flight.fly(3.0)
    before = flight.place
    flight.turn(dt_s=11.0)
    assert abs(flight.place.first_deg - before.first_deg) < MOUNT.first.rate_deg_s * 0.3


def test_the_error_is_taken_at_the_instant_of_the_reading() -> None:
    assignment = contact("a", -10.0, 500.0, FALLING)
    late_s = 0.37
    utc_s, mono_s = START_UTC_S, 1234.5
    place = assignment.path.at(utc_s - late_s).joints
    decision = Pilot(FACTS).decide(
        Situation(utc_s, mono_s, Reading(mono_s - late_s, *place), None, (assignment,))
    )
    assert decision.error_deg == pytest.approx(0.0, abs=1e-6)
