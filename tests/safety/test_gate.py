"""The gate: what passes, what is slowed, what is halted, and what it says."""

from dataclasses import replace
from typing import Any

import pytest
from hypothesis import given
from hypothesis import strategies as st

from tests.mount.mounts import MOUNT
from tests.safety.bench_mount import CALM, LIMITS, Bench, rules
from trunnion.mount.joints import Joints, Motion, Reading
from trunnion.mount.motion import approach
from trunnion.mount.mount import JointBox
from trunnion.safety.emergency import EmergencyStop
from trunnion.safety.gate import Gate
from trunnion.safety.places import find_at, find_on_the_way, stopping_place
from trunnion.safety.verdict import Halt, Move, Rule, Verdict
from trunnion.safety.world import World

STILL = Motion(201.7, 41.3)
PLEASANT: dict[str, Any] = {"wind_gust_m_s": 3.7, "wind_mean_m_s": 2.9, "heartbeat_age_s": 0.4}


def test_a_demand_within_all_limits_leaves_as_it_is() -> None:
    bench = Bench().settle()
    bench.turn(STILL)
    demand = Motion(201.7101, 41.3023, 0.202, 0.046)
    assert bench.turn(demand) == Verdict(Move(demand))


def test_rest_is_no_intervention() -> None:
    assert Bench().turn(None) == Verdict(Halt())


def test_a_demand_that_leaps_is_slowed_to_what_the_joints_can_do() -> None:
    bench = Bench().settle()
    bench.turn(STILL)
    verdict = bench.turn(Motion(250.3, 60.1))
    assert isinstance(verdict.order, Move)
    expected = approach(STILL, Motion(250.3, 60.1), MOUNT, 0.1)
    assert tuple(verdict.order.motion) == pytest.approx(tuple(expected), abs=1e-9)
    assert rules(verdict) == {Rule.RATE}


@pytest.mark.parametrize(
    ("demand", "rule"),
    [
        (Motion(268.1, 41.3), Rule.TRAVEL),
        (Motion(201.7, 91.2), Rule.TRAVEL),
        (Motion(201.7, 5.2), Rule.FLOOR),
        (Motion(90.1, 8.7), Rule.MASK),
        (Motion(143.9, 20.3), Rule.KEEP_OUT),
        (Motion(float("nan"), 41.3), Rule.NOT_FINITE),
        (Motion(201.7, 41.3, float("inf"), 0.0), Rule.NOT_FINITE),
    ],
)
def test_a_demand_outside_is_halted(demand: Motion, rule: Rule) -> None:
    bench = Bench().settle()
    bench.turn(STILL)
    verdict = bench.turn(demand)
    assert verdict.order == Halt()
    assert rule in rules(verdict)


def test_the_way_counts_and_not_only_its_end() -> None:
    """The encoder says one side of the mast, the order is on the other."""
    gate = Gate(LIMITS)
    reading = Reading(99.9, 140.9, 20.3)
    beyond = Motion(147.1, 20.3)
    assert find_at(beyond.joints, LIMITS) is None
    gate.judge(99.9, Motion(140.9, 20.3), reading, CALM)
    found = find_on_the_way(reading.joints, beyond.joints, LIMITS)
    assert found is not None
    assert found.rule is Rule.KEEP_OUT


def test_a_descent_onto_the_floor_brakes_in_time() -> None:
    bench = Bench(place=Joints(201.7, 9.3)).settle()
    demand = Motion(201.7, 9.3)
    lowest_deg = 90.0
    seen = set()
    for _ in range(80):
        demand = approach(demand, Motion(201.7, 5.3, 0.0, -4.0), MOUNT, 0.1)
        verdict = bench.turn(demand)
        seen |= rules(verdict)
        if isinstance(verdict.order, Move):
            lowest_deg = min(lowest_deg, stopping_place(verdict.order.motion, LIMITS).second_deg)
    assert lowest_deg >= 5.3 - 1e-6
    assert Rule.STOPPING in seen


@pytest.mark.parametrize(
    ("change", "rule"),
    [
        ({"emergency": EmergencyStop("somebody pressed it", 17.3)}, Rule.EMERGENCY_STOP),
        ({"is_link_up": False}, Rule.LINK_DOWN),
        ({"lateness_s": 0.51}, Rule.TURN_LATE),
        ({"mount_fault": "drive too hot"}, Rule.MOUNT_FAULT),
    ],
)
def test_what_is_wrong_around_halts_and_the_end_of_it_lets_go(
    change: dict[str, object], rule: Rule
) -> None:
    bench = Bench().settle()
    bench.turn(STILL)
    verdict = bench.turn(STILL, World(**{**CALM._asdict(), **change}))
    assert verdict.order == Halt()
    assert rules(verdict) == {rule}
    assert bench.settle().turn(STILL).order == Move(STILL)


def test_an_old_reading_halts_and_a_missing_one_too() -> None:
    bench = Bench()
    assert rules(bench.turn(STILL, age_s=1.01)) == {Rule.READING_OLD}
    assert rules(bench.gate.judge(bench.mono_s, STILL, None, CALM)) == {Rule.NO_READING}


@pytest.mark.parametrize("wild", [Joints(311.7, 41.3), Joints(231.7, 41.3)])
def test_one_wild_reading_costs_nothing(wild: Joints) -> None:
    bench = Bench().settle()
    bench.turn(STILL)
    place, bench.place = bench.place, wild
    assert bench.turn(STILL) == Verdict(Move(STILL))
    bench.place = place
    assert bench.turn(STILL) == Verdict(Move(STILL))


@pytest.mark.parametrize(
    ("wild", "rule"),
    [
        (Joints(311.7, 41.3), Rule.READING_IMPOSSIBLE),
        (Joints(231.7, 41.3), Rule.READING_JUMPED),
    ],
)
def test_wild_readings_in_a_row_halt(wild: Joints, rule: Rule) -> None:
    bench = Bench().settle()
    bench.turn(STILL)
    verdicts = []
    for _ in range(4):
        bench.place = wild
        verdicts.append(bench.turn(STILL))
    assert [isinstance(each.order, Move) for each in verdicts] == [True, True, True, False]
    assert rules(verdicts[-1]) == {rule}


def test_a_mount_that_stays_behind_is_stopped_for_good() -> None:
    bench = Bench()
    demand, stuck, latched = STILL, bench.place, None
    seen: list[Verdict] = []
    for _ in range(60):
        demand = approach(demand, Motion(231.7, 41.3), MOUNT, 0.1)
        verdict = bench.turn(demand)
        latched = latched or verdict.latch
        bench.place = bench.place._replace(first_deg=stuck.first_deg + 0.001 * (len(seen) % 3))
        seen.append(verdict)
    assert latched is not None
    assert "from where it was ordered to be" in latched


def test_a_mount_that_moves_by_itself_is_stopped_for_good() -> None:
    bench = Bench()
    for _ in range(80):
        assert bench.turn(None).latch is None
    bench.place = Joints(201.7, 41.1)
    for _ in range(9):
        bench.place = Joints(201.7, bench.place.second_deg - 0.2)
        verdict = bench.turn(None)
    assert verdict.latch is not None
    assert verdict.must_cut_power
    assert rules(verdict) == {Rule.SLIPPED, Rule.EMERGENCY_STOP}


def test_a_mount_wired_the_wrong_way_is_stopped_for_good() -> None:
    bench = Bench().settle()
    demand, latched = STILL, None
    for _ in range(20):
        demand = approach(demand, Motion(231.7, 41.3), MOUNT, 0.1)
        latched = latched or bench.turn(demand).latch
        bench.place = Joints(2 * STILL.first_deg - demand.first_deg, 41.3)
    assert latched == "the first joint moves away from its orders"


def test_a_stop_that_nobody_keeps_holds_in_the_gate_itself() -> None:
    bench = Bench().settle()
    bench.place = Joints(201.7, 39.1)
    for _ in range(20):
        bench.turn(None)
        bench.place = Joints(201.7, max(35.0, bench.place.second_deg - 0.3))
    for _ in range(9):
        verdict = bench.turn(STILL)
        assert (verdict.order, verdict.latch is None) == (Halt(), False)


def test_once_kept_and_reset_it_begins_anew_and_moves_when_told_to() -> None:
    bench = Bench().settle()
    for _ in range(20):
        bench.turn(None)
        bench.place = Joints(201.7, max(35.0, bench.place.second_deg - 0.3))
    stopped = CALM._replace(emergency=EmergencyStop("the mount moved", 17.3))
    assert bench.turn(None, stopped).latch is None
    bench.place = Joints(120.1, 61.7)
    bench.turn(None, stopped)
    assert bench.turn(None) == Verdict(Halt())
    assert bench.settle().turn(Motion(*bench.place)) == Verdict(Move(Motion(*bench.place)))


def test_after_a_halt_nothing_moves_before_the_mount_rests() -> None:
    bench = Bench().settle()
    bench.turn(STILL)
    bench.turn(None)
    for _ in range(5):
        bench.place = Joints(bench.place.first_deg + 0.15, 41.3)
        assert bench.turn(Motion(*bench.place)) == Verdict(Halt())
    waited = [bench.turn(Motion(*bench.place)) for _ in range(3)]
    assert [isinstance(each.order, Move) for each in waited] == [False, False, True]


def test_a_mount_that_does_not_come_to_rest_is_told_of() -> None:
    bench = Bench(place=Joints(12.7, 41.3))
    verdict = Verdict(Halt())
    for _ in range(13):
        bench.place = Joints(bench.place.first_deg + 0.15, 41.3)
        verdict = bench.turn(Motion(*bench.place))
    assert Rule.UNSETTLED in rules(verdict)


def test_a_mount_outside_does_not_move_without_leave() -> None:
    bench = Bench(place=Joints(201.7, 4.9)).settle()
    bench.turn(None)
    assert rules(bench.turn(Motion(201.7, 41.3))) == {Rule.OUTSIDE}


def test_with_leave_it_moves_inwards_and_slowly_however_far_is_asked_for() -> None:
    bench = Bench(place=Joints(201.7, 3.1)).settle()
    leave = CALM._replace(may_recover=True)
    fastest, heights = 0.0, [3.1]
    bench.turn(None)
    for _ in range(80):
        order = bench.turn(Motion(201.7, 5.9), leave).order
        assert isinstance(order, Move)
        fastest = max(fastest, order.motion.second_rate_deg_s)
        heights.append(order.motion.second_deg)
    assert heights == sorted(heights)
    assert (heights[-1], fastest) == (5.9, 0.5)


@pytest.mark.parametrize(
    "demand",
    [Motion(201.7, 2.1), Motion(260.3, 3.1), Motion(float("nan"), 5.9)],
    ids=["outwards", "along and deeper", "nowhere"],
)
def test_with_leave_it_moves_nowhere_else(demand: Motion) -> None:
    bench = Bench(place=Joints(201.7, 3.1)).settle()
    leave = CALM._replace(may_recover=True)
    bench.turn(None)
    bench.turn(demand, leave)
    assert rules(bench.turn(demand, leave)) == {Rule.OUTSIDE}


@pytest.mark.parametrize(
    ("limits", "world", "rule"),
    [
        ({"wind_stow_gust_m_s": 17.0}, {"wind_gust_m_s": 17.2}, Rule.WIND),
        ({"wind_stow_mean_m_s": 12.0}, {"wind_mean_m_s": 12.3}, Rule.WIND),
        ({"wind_stow_gust_m_s": 17.0}, {"wind_gust_m_s": None}, Rule.WIND_UNKNOWN),
        ({"heartbeat_max_age_s": 5.0}, {"heartbeat_age_s": 5.2}, Rule.HEARTBEAT_LOST),
        ({"heartbeat_max_age_s": 5.0}, {"heartbeat_age_s": None}, Rule.HEARTBEAT_LOST),
    ],
)
def test_what_asks_for_stow_lets_the_mount_go_there(
    limits: dict[str, float], world: dict[str, Any], rule: Rule
) -> None:
    world = {**PLEASANT, **world}
    bench = Bench(gate=Gate(replace(LIMITS, **limits)))  # type: ignore[arg-type]
    for _ in range(4):
        bench.turn(None, CALM._replace(**PLEASANT))
    verdict = bench.turn(STILL, CALM._replace(**world))
    assert (verdict.order, verdict.wants_stow, rules(verdict)) == (Move(STILL), True, {rule})


def test_a_mount_that_does_not_reach_stow_in_time_is_halted() -> None:
    bench = Bench().settle()
    lost = CALM._replace(heartbeat_age_s=9.9)
    bench.gate = Gate(replace(LIMITS, heartbeat_max_age_s=5.0))
    orders = [bench.turn(STILL, lost, dt_s=1.0) for _ in range(310)]
    assert isinstance(orders[299].order, Move)
    assert (orders[-1].order, Rule.STOW_OVERDUE in rules(orders[-1])) == (Halt(), True)


def test_a_mount_that_is_in_stow_may_stay_there() -> None:
    bench = Bench(place=Joints(13.6, 87.4))
    bench.gate = Gate(replace(LIMITS, heartbeat_max_age_s=5.0))
    lost = CALM._replace(heartbeat_age_s=9.9)
    verdicts = [bench.turn(Motion(*bench.place), lost, dt_s=1.0) for _ in range(310)]
    assert isinstance(verdicts[-1].order, Move)


def test_a_step_of_the_clock_halts_until_it_has_run_evenly() -> None:
    bench = Bench().settle()
    halts = []
    for turn in range(60):
        utc_s = 1_796_083_217.3 + bench.mono_s + (20.0 if turn >= 10 else 0.0)
        halts.append(bench.turn(STILL, CALM._replace(utc_s=utc_s + 0.1)).order == Halt())
    assert not any(halts[:10])
    assert all(halts[10:30])
    assert not any(halts[32:])


@pytest.mark.parametrize("error_s", [0.31, None])
def test_a_clock_that_may_be_wrong_halts(error_s: float | None) -> None:
    bench = Bench(gate=Gate(replace(LIMITS, clock_max_error_s=0.3)))
    verdict = bench.turn(STILL, CALM._replace(clock_error_s=error_s))
    assert (verdict.order, rules(verdict)) == (Halt(), {Rule.CLOCK_UNTRUSTED})


wild = st.floats(-400.0, 400.0)
demands = st.one_of(
    st.none(),
    st.builds(Motion, wild, wild, wild, wild),
    st.builds(Motion, st.floats(-271.0, 268.0), st.floats(1.5, 91.0), wild, wild),
)


@given(st.lists(st.tuples(demands, st.sampled_from([0.05, 0.1, 0.13, 1.0])), max_size=40))
def test_whatever_is_asked_what_leaves_is_within_every_limit(
    asked: list[tuple[Motion | None, float]],
) -> None:
    bench = Bench()
    before: Motion | None = None
    for demand, dt_s in asked:
        place = bench.place
        order = bench.turn(demand, dt_s=dt_s).order
        if isinstance(order, Move):
            base = before or Motion(*place)
            assert find_at(order.motion.joints, LIMITS) is None
            assert find_on_the_way(place, order.motion.joints, LIMITS) is None
            assert find_at(stopping_place(order.motion, LIMITS), LIMITS, 1e-6) is None
            for joint, limits in enumerate((MOUNT.first, MOUNT.second)):
                assert abs(order.motion[2 + joint]) <= limits.rate_deg_s + 1e-9
                change = abs(order.motion[2 + joint] - base[2 + joint])
                assert change <= limits.acceleration_deg_s2 * dt_s + 1e-9
        before = order.motion if isinstance(order, Move) else None


def test_an_intervention_says_what_was_found_what_is_done_and_until_when() -> None:
    bench = Bench().settle()
    bench.turn(STILL)
    verdict = bench.turn(STILL, CALM._replace(lateness_s=0.73))
    (intervention,) = verdict.interventions
    assert intervention.sentence == (
        "the control turn came 0.73 s late, 0.5 s are allowed (control turn late): "
        "halted until the turns come in time"
    )


def test_joint_angles_that_are_forbidden_are_kept_out_of() -> None:
    strut = JointBox("the strut", 199.1, 204.3, 55.1, 61.7)
    limits = replace(LIMITS, mount=replace(MOUNT, forbidden=(strut,)))
    found = find_at(Joints(201.7, 58.3), limits)
    assert found is not None
    assert (found.rule, "the strut" in found.finding) == (Rule.KEEP_OUT, True)
    assert find_at(Joints(201.7, 61.8), limits) is None


def test_a_mount_that_runs_ahead_of_its_orders_is_braked_for_its_own_speed() -> None:
    """The orders alone would stop in time; the readings show that the mount will not."""
    bench = Bench(place=Joints(201.7, 9.4)).settle()
    bench.turn(Motion(201.7, 9.4))
    bench.place = Joints(201.7, 9.0)
    verdict = bench.turn(Motion(201.7, 9.39, 0.0, -0.1))
    assert Rule.STOPPING in rules(verdict)


@pytest.mark.parametrize(("dt_s", "step_s"), [(0.24, 0.24), (0.25, 0.25), (0.45, 0.25)])
def test_after_a_pause_an_order_moves_on_by_a_quarter_of_a_second_at_most(
    dt_s: float, step_s: float
) -> None:
    bench = Bench().settle()
    bench.turn(STILL)
    goal = Motion(250.3, 60.1)
    order = bench.turn(goal, dt_s=dt_s).order
    assert isinstance(order, Move)
    assert tuple(order.motion) == pytest.approx(tuple(approach(STILL, goal, MOUNT, step_s)))


@pytest.mark.parametrize(
    ("place", "is_stowed"),
    [
        (Joints(13.5, 87.25), True),
        (Joints(13.52, 88.25), False),
        (Joints(12.5, 87.23), False),
    ],
)
def test_a_degree_from_stow_is_stowed(place: Joints, is_stowed: bool) -> None:
    mount = replace(MOUNT, stow=Joints(12.5, 88.25))
    bench = Bench(place=place, gate=Gate(replace(LIMITS, mount=mount, heartbeat_max_age_s=5.0)))
    lost = CALM._replace(heartbeat_age_s=9.9)
    verdicts = [bench.turn(None, lost, dt_s=1.0) for _ in range(310)]
    assert (Rule.STOW_OVERDUE not in rules(verdicts[-1])) == is_stowed


def test_a_turn_as_late_as_is_allowed_still_watches_the_mount() -> None:
    bench = Bench().settle()
    latched = None
    for _ in range(30):
        latched = latched or bench.turn(None, CALM._replace(lateness_s=0.5)).latch
        bench.place = Joints(201.7, bench.place.second_deg - 0.2)
    assert latched is not None


def test_a_mount_that_is_halted_anyhow_is_not_blamed_for_what_is_asked_of_it() -> None:
    bench = Bench().settle()
    bench.turn(STILL)
    late = CALM._replace(lateness_s=0.73)
    assert rules(bench.turn(Motion(268.1, 60.1), late)) == {Rule.TURN_LATE}
