"""The circle round the Sun: nobody is sent into it, and a mount it moves over gets out."""

from dataclasses import replace
from math import inf, nan

import pytest
from hypothesis import given
from hypothesis import strategies as st

from tests.mount.mounts import hinges
from tests.safety.bench_mount import CALM, LIMITS, Bench, rules
from trunnion.mount.clearance import Clearance
from trunnion.mount.hinges import Hinges
from trunnion.mount.joints import Joints, Motion
from trunnion.mount.motion import approach
from trunnion.mount.mount import JointLimits, Mount
from trunnion.mount.sphere import separation_deg
from trunnion.safety.gate import Gate
from trunnion.safety.limits import SafetyLimits
from trunnion.safety.places import find_at, stopping_place
from trunnion.safety.sunshine import LEEWAY_DEG, UP_DEG, Sunshine, lit
from trunnion.safety.verdict import Halt, Move, Rule

RADIUS_DEG = 4.3
SUNNY = replace(LIMITS, sun_keep_out_deg=RADIUS_DEG)
SUN = (211.7, 41.3)
DAY = CALM._replace(sun=SUN)


def bench(place: Joints) -> Bench:
    made = Bench(place=place, gate=Gate(SUNNY))
    for _ in range(4):
        made.turn(None, DAY)
    return made


def test_without_the_key_there_is_no_circle_and_no_hazard() -> None:
    gate = Bench(place=Joints(*SUN)).settle()
    verdict = gate.turn(Motion(*SUN), DAY)
    assert (verdict.order, rules(verdict)) == (Move(Motion(*SUN)), set())


def test_an_order_into_the_circle_is_refused_and_says_how_near() -> None:
    verdict = bench(Joints(205.8, 41.3)).turn(Motion(206.1, 41.3), DAY)
    assert verdict.order == Halt()
    (intervention,) = verdict.interventions[-1:]
    assert intervention.rule is Rule.SUN
    assert "4.21° from the Sun, 4.3° have to be kept" in intervention.sentence
    allowed = Motion(205.803, 41.3)
    assert bench(Joints(205.8, 41.3)).turn(allowed, DAY).order == Move(allowed)


def test_a_slew_across_it_is_braked_before_its_edge() -> None:
    flown = bench(Joints(196.3, 41.3))
    demand, seen = Motion(196.3, 41.3), set()
    for _ in range(80):
        demand = approach(demand, Motion(231.7, 41.3), LIMITS.mount, 0.1)
        seen |= rules(flown.turn(demand, DAY))
        assert separation_deg(*flown.place, *SUN) > RADIUS_DEG
    assert Rule.STOPPING in seen
    assert flown.place.first_deg > 203.0


def test_the_sun_moving_over_a_tracking_mount_sends_it_to_stow_and_lets_it_out() -> None:
    flown = bench(Joints(205.8, 41.3))
    here = Motion(205.8, 41.3)
    assert not flown.turn(here, DAY).interventions
    over = CALM._replace(sun=(211.4, 41.3))
    verdict = flown.turn(here, over)
    assert Rule.SUN_IN_BEAM in rules(verdict)
    assert verdict.wants_stow
    goal = here
    for _ in range(60):
        goal = Motion(*(verdict.way_out or goal.joints))
        verdict = flown.turn(goal, over)
    assert separation_deg(*flown.place, 211.4, 41.3) > RADIUS_DEG + LEEWAY_DEG
    assert verdict.way_out is None
    assert isinstance(verdict.order, Move)
    assert verdict.wants_stow  # until the Sun has been out of the beam for a minute
    flown.turn(goal, over, dt_s=61.0)
    flown.turn(goal, over)
    assert not flown.turn(goal, over).wants_stow


def test_at_rest_in_the_circle_it_is_told_of_too() -> None:
    verdict = bench(Joints(211.9, 42.3)).turn(None, DAY)
    assert Rule.SUN_IN_BEAM in rules(verdict)
    assert verdict.order == Halt()


def test_from_inside_no_way_leads_nearer_to_the_sun() -> None:
    flown = bench(Joints(208.7, 41.3))
    verdict = flown.turn(Motion(209.7, 41.3), DAY)
    assert {Rule.SUN, Rule.SUN_IN_BEAM} <= rules(verdict)
    assert verdict.order == Halt()
    assert "no way nearer to the Sun" in verdict.interventions[-1].sentence
    assert flown.place == Joints(208.7, 41.3)


def test_the_way_out_is_the_nearest_and_only_for_the_sun() -> None:
    verdict = bench(Joints(211.7, 37.5)).turn(None, DAY)
    assert verdict.way_out == pytest.approx((211.7, 36.5))
    assert bench(Joints(170.3, 41.3)).turn(Motion(268.4, 41.3), DAY).way_out is None
    low = Bench(place=Joints(201.7, 4.9), gate=Gate(SUNNY))
    assert low.turn(None, DAY).way_out is None
    unread = Gate(SUNNY).judge(71.3, None, None, DAY)
    assert unread.way_out is None


def test_the_way_out_ends_outside_with_room_to_spare_and_not_much_more() -> None:
    # 4.3 to keep, 0.2 of leeway, 0.2 of room: 4.7
    near = bench(Joints(211.7, 37.58)).turn(None, DAY).way_out
    assert near == pytest.approx((211.7, 36.58))  # 4.72° away
    far = bench(Joints(211.7, 37.63)).turn(None, DAY).way_out
    assert far is not None
    assert separation_deg(*far, *SUN) > 4.7  # straight down would be 4.67°


def test_from_its_middle_every_mount_gets_out() -> None:
    for hinges_of in (Hinges.x_y_north_south(), Hinges.hour_angle_declination(47.3)):
        mount = replace(LIMITS.mount, hinges=hinges_of, second=JointLimits(-88.0, 91.0, 4.7, 2.1))
        limits = replace(SUNNY, mount=mount, clearance=Clearance(-5.0, None))
        place = Joints(-31.7, 21.3)
        day = CALM._replace(sun=hinges_of.boresight(Joints(-32.9, 20.7)))
        flown = Bench(place=place, gate=Gate(limits))
        way_out = None
        for _ in range(150):
            verdict = flown.turn(None if way_out is None else Motion(*way_out), day)
            way_out = verdict.way_out or way_out
        assert find_at(flown.place, lit(limits, *day.sun or (nan, nan))) is None


def test_it_leaves_slowly() -> None:
    flown = bench(Joints(208.7, 41.3))
    for _ in range(20):
        order = flown.turn(Motion(190.3, 41.3), DAY).order
        if isinstance(order, Move):
            assert abs(order.motion.first_rate_deg_s) <= SUNNY.recovery_rate_deg_s + 1e-9
    assert flown.place.first_deg < 208.3


def test_what_else_a_mount_is_outside_of_still_needs_leave() -> None:
    """Below the mask, and the Sun there too."""
    low = (201.7, 7.3)
    flown = Bench(place=Joints(201.7, 4.9), gate=Gate(SUNNY))
    for _ in range(5):
        verdict = flown.turn(Motion(201.7, 12.3), CALM._replace(sun=low))
    assert verdict.order == Halt()
    assert Rule.OUTSIDE in rules(verdict)


@pytest.mark.parametrize("sun", [None, (nan, 41.3), (211.7, nan), (inf, 41.3)])
def test_a_sun_that_is_not_known_halts(sun: tuple[float, float] | None) -> None:
    flown = bench(Joints(170.3, 41.3))
    verdict = flown.turn(Motion(170.3, 41.3), CALM._replace(sun=sun))
    assert (verdict.order, rules(verdict)) == (Halt(), {Rule.SUN_UNKNOWN})


def test_while_it_is_not_known_the_circle_stays_where_it_was() -> None:
    sunshine = Sunshine(SUNNY)
    there = sunshine.limits_in(DAY)
    assert there == lit(SUNNY, *SUN)
    assert sunshine.limits_in(CALM) is there
    assert sunshine.limits_in(CALM._replace(sun=(nan, 3.1))) is there
    assert sunshine.limits_in(DAY) is there
    assert sunshine.limits_in(CALM._replace(sun=(12.1, 33.3))) == lit(SUNNY, 12.1, 33.3)
    assert Sunshine(LIMITS).limits_in(DAY) is LIMITS


@pytest.mark.parametrize(("elevation_deg", "is_drawn"), [(-1.0, True), (-1.01, False)])
def test_below_the_horizon_it_does_not_matter(elevation_deg: float, *, is_drawn: bool) -> None:
    assert bool(lit(SUNNY, 211.7, elevation_deg).clearance.circles) == is_drawn
    night = CALM._replace(sun=(211.7, elevation_deg))
    assert bool(Sunshine(SUNNY).limits_in(night).clearance.circles) == is_drawn


def test_no_encoders_error_is_forgiven_and_room_is_room() -> None:
    limits = lit(SUNNY, *SUN)
    below_deg = 41.3 - RADIUS_DEG
    assert find_at(Joints(211.7, below_deg + 0.001), limits, 0.05) is not None
    assert find_at(Joints(211.7, below_deg - 0.001), limits) is None
    assert find_at(Joints(211.7, below_deg - 0.19), limits, -0.2) is not None
    assert find_at(Joints(211.7, below_deg - 0.21), limits, -0.2) is None


joint_angles = st.floats(-170.0, 170.0)
asked = st.lists(
    st.tuples(st.floats(-20.0, 20.0), st.floats(-20.0, 20.0), st.floats(-6.0, 6.0)),
    min_size=1,
    max_size=6,
)


@given(hinges, joint_angles, st.floats(-80.0, 80.0), st.floats(0.0, 360.0), asked, st.booleans())
def test_no_mount_whatever_its_geometry_is_sent_into_the_circle(
    turned: Hinges,
    first_deg: float,
    second_deg: float,
    azimuth_deg: float,
    asked: list[tuple[float, float, float]],
    is_ahead: bool,
) -> None:
    limits = SafetyLimits(
        Mount(
            turned,
            JointLimits(-400.0, 400.0, 6.3, 2.9),
            JointLimits(-95.0, 95.0, 4.7, 2.1),
            Joints(12.7, 3.3),
        ),
        Clearance(-90.0, None),
        transmit_floor_deg=3.0,
        sun_keep_out_deg=RADIUS_DEG,
    )
    ahead = turned.boresight(Joints(first_deg + asked[0][0], second_deg + asked[0][1]))
    sun = ahead if is_ahead else (azimuth_deg, 33.1)
    begin = turned.boresight(Joints(first_deg, second_deg))
    if sun[1] < UP_DEG or separation_deg(*begin, *sun) <= RADIUS_DEG:
        return
    flown = Bench(place=Joints(first_deg, second_deg), gate=Gate(limits))
    day = CALM._replace(sun=sun)
    for _ in range(4):
        flown.turn(None, day)
    demand = Motion(first_deg, second_deg)
    for first, second, rate in asked:
        goal = Motion(first_deg + first, second_deg + second, rate, -0.7 * rate)
        for _ in range(15):
            demand = approach(demand, goal, limits.mount, 0.1)
            order = flown.turn(demand, day).order
            rest = flown.place
            if isinstance(order, Move):
                rest = stopping_place(order.motion, limits)
            for place in (flown.place, rest):
                away_deg = separation_deg(*turned.boresight(place), *sun)
                assert away_deg >= RADIUS_DEG - 1e-6
