"""The eight guarantees, held against anything that hypothesis can think of.

Each test names the guarantee that would go unnoticed without it.
"""

from dataclasses import replace
from math import inf, nan

from hypothesis import given, settings
from hypothesis import strategies as st

from tests.mount.mounts import hinges
from tests.safety.bench_mount import CALM, LIMITS, Bench
from trunnion.mount.clearance import Clearance, Sector
from trunnion.mount.horizon import HorizonMask
from trunnion.mount.joints import Joints, Motion, Reading
from trunnion.mount.mount import JointLimits, Mount
from trunnion.safety.emergency import EmergencyStop
from trunnion.safety.gate import Gate
from trunnion.safety.limits import SafetyLimits
from trunnion.safety.transmit import TransmitJudge
from trunnion.safety.verdict import Halt, Move
from trunnion.safety.world import World

odd = st.one_of(st.sampled_from([nan, inf, -inf]), st.floats(-400.0, 400.0))
angles = st.builds(Joints, st.floats(-271.0, 268.0), st.floats(1.5, 91.0))
demands = st.one_of(
    st.none(),
    st.builds(Motion, odd, odd, odd, odd),
    st.builds(Motion, st.floats(-271.0, 268.0), st.floats(1.5, 91.0)),
)
steps = st.lists(st.tuples(demands, st.sampled_from([0.05, 0.1, 0.13, 1.0])), max_size=40)
STOP = EmergencyStop("somebody pressed it", 17.3)


def stations() -> st.SearchStrategy[SafetyLimits]:
    """Stations of any geometry, with masks and keep-outs."""
    joint = st.builds(
        JointLimits,
        st.floats(-270.0, -60.0),
        st.floats(60.0, 270.0),
        st.floats(1.0, 9.0),
        st.floats(0.5, 6.0),
    )
    mounts = st.builds(Mount, hinges, joint, joint, st.just(Joints(3.7, 41.3)))
    masks = st.builds(
        HorizonMask,
        st.lists(
            st.tuples(st.floats(0.0, 359.0), st.floats(0.0, 30.0)), min_size=1, max_size=6
        ).map(lambda points: tuple(sorted(points))),
    )
    sector = st.builds(
        Sector,
        st.just("the mast"),
        st.floats(0.0, 180.0),
        st.floats(185.0, 359.0),
        st.floats(0.0, 30.0),
        st.floats(31.0, 60.0),
    )
    clearances = st.builds(
        Clearance, st.floats(-5.0, 10.0), st.none() | masks, st.lists(sector, max_size=2).map(tuple)
    )
    return st.builds(SafetyLimits, mounts, clearances, st.just(10.7))


@given(angles, steps)
def test_1_no_order_is_outside_the_travel_or_above_rate_and_acceleration(
    place: Joints, asked: list[tuple[Motion | None, float]]
) -> None:
    bench = Bench(place=place).settle()
    before: Motion | None = None
    for demand, dt_s in asked:
        base = before or Motion(*bench.place)
        order = bench.turn(demand, dt_s=dt_s).order
        before = order.motion if isinstance(order, Move) else None
        if before is None:
            continue
        for number, joint in enumerate((LIMITS.mount.first, LIMITS.mount.second)):
            assert joint.lower_deg <= before[number] <= joint.upper_deg
            assert abs(before[number + 2]) <= joint.rate_deg_s + 1e-9
            change = abs(before[number + 2] - base[number + 2])
            assert change <= joint.acceleration_deg_s2 * dt_s + 1e-9


@settings(max_examples=150)
@given(stations(), st.data())
def test_2_no_order_leads_below_floor_or_mask_or_into_a_keep_out_nor_can_it_coast_there(
    limits: SafetyLimits, data: st.DataObject
) -> None:
    """Looked at more finely than the gate does, on the way, at its end, and braking from it."""
    first, second = limits.mount.first, limits.mount.second
    places = st.builds(
        Joints,
        st.floats(first.lower_deg, first.upper_deg),
        st.floats(second.lower_deg, second.upper_deg),
    )
    bench = Bench(place=data.draw(places), gate=Gate(limits)).settle()
    for goal in data.draw(st.lists(places, max_size=25)):
        place = bench.place
        order = bench.turn(Motion(*goal)).order
        if isinstance(order, Move):
            assert is_clear(order.motion.joints, limits)
            middle = Joints(
                0.5 * (place.first_deg + order.motion.first_deg),
                0.5 * (place.second_deg + order.motion.second_deg),
            )
            assert is_clear(middle, limits)
            assert is_clear(rest_of(order.motion, limits), limits)


def is_clear(place: Joints, limits: SafetyLimits) -> bool:
    """Whether mount and sky allow it, to a twentieth of a degree at the edges of a keep-out."""
    azimuth_deg, elevation_deg = limits.mount.hinges.boresight(place)
    if elevation_deg < limits.clearance.lowest_deg(azimuth_deg) - 0.05:
        return False
    corners = [
        limits.clearance.keep_out((azimuth_deg + aside) % 360.0, elevation_deg + above)
        for aside in (-0.05, 0.05)
        for above in (-0.05, 0.05)
    ]
    return None in corners


def rest_of(motion: Motion, limits: SafetyLimits) -> Joints:
    """Where the joints rest if they brake with four fifths of what they can."""
    mount = limits.mount
    first_deg, second_deg = (
        angle_deg + rate_deg_s * abs(rate_deg_s) / (1.6 * joint.acceleration_deg_s2)
        for angle_deg, rate_deg_s, joint in (
            (motion.first_deg, motion.first_rate_deg_s, mount.first),
            (motion.second_deg, motion.second_rate_deg_s, mount.second),
        )
    )
    return Joints(first_deg, second_deg)


@given(angles, steps, st.integers(0, 40))
def test_3_while_stopped_nothing_but_a_halt_leaves_and_a_reset_moves_nothing(
    place: Joints, asked: list[tuple[Motion | None, float]], stopped_from: int
) -> None:
    bench = Bench(place=place).settle()
    for turn, (demand, dt_s) in enumerate(asked):
        if turn >= stopped_from:
            world = CALM._replace(emergency=STOP)
            assert bench.turn(demand, world, dt_s).order == Halt()
        else:
            bench.turn(demand, CALM, dt_s)
    assert bench.turn(None).order == Halt()


BAD_WORLDS = st.sampled_from(
    [
        CALM._replace(is_link_up=False),
        CALM._replace(lateness_s=0.51),
        CALM._replace(lateness_s=nan),
        CALM._replace(clock_error_s=0.31),
        CALM._replace(clock_error_s=None),
        CALM._replace(mount_fault="drive too hot", clock_error_s=0.1),
    ]
)


@given(angles, demands, BAD_WORLDS)
def test_4_with_a_dead_link_an_untrusted_clock_or_a_late_turn_nothing_moves(
    place: Joints, demand: Motion | None, world: World
) -> None:
    bench = Bench(place=place, gate=Gate(replace(LIMITS, clock_max_error_s=0.3)))
    for _ in range(4):
        bench.turn(None, CALM._replace(clock_error_s=0.1))
    assert bench.turn(demand, world).order == Halt()


@given(angles, demands, st.floats(1.01, 1e6))
def test_4_with_a_reading_too_old_nothing_moves(
    place: Joints, demand: Motion | None, age_s: float
) -> None:
    assert Bench(place=place).settle().turn(demand, age_s=age_s).order == Halt()


@given(
    st.sampled_from([0, 1]),
    st.floats(0.05, 3.0) | st.floats(-3.0, -0.05),
    st.sampled_from([None, Motion(201.7, 41.3)]),
)
def test_5_motion_that_nobody_ordered_is_stopped_for_good(
    joint: int, rate_deg_s: float, demand: Motion | None
) -> None:
    """At any speed: after four degrees at the latest, whether told to rest or to stay."""
    bench = Bench().settle()
    bench.turn(demand)
    for turn in range(1, int(8.0 / abs(rate_deg_s) / 0.1)):
        moved = [201.7, 41.3]
        moved[joint] += 0.1 * turn * rate_deg_s
        bench.place = Joints(*moved)
        if bench.turn(demand).latch is not None:
            return
    raise AssertionError(f"{rate_deg_s} deg/s went unnoticed for eight degrees")


@given(st.floats(1.6, 5.1), demands, st.booleans())
def test_6_outside_it_moves_only_inwards_slowly_and_only_with_leave(
    elevation_deg: float, demand: Motion | None, may_recover: bool
) -> None:
    bench = Bench(place=Joints(201.7, elevation_deg)).settle()
    before = bench.place
    order = bench.turn(demand, CALM._replace(may_recover=may_recover)).order
    if isinstance(order, Move) and order.motion.joints != before:
        assert may_recover
        assert order.motion.second_deg > before.second_deg
        assert max(map(abs, order.motion[2:])) <= LIMITS.recovery_rate_deg_s


@given(st.none() | st.floats(17.01, 1e3) | st.just(nan), demands)
def test_7_too_much_wind_or_none_that_is_known_sends_the_mount_to_stow(
    wind_m_s: float | None, demand: Motion | None
) -> None:
    bench = Bench(gate=Gate(replace(LIMITS, wind_stow_gust_m_s=17.0)))
    assert bench.turn(demand, CALM._replace(wind_gust_m_s=wind_m_s)).wants_stow


@given(
    st.lists(
        st.tuples(
            st.none() | st.floats(0.0, 0.5),
            st.floats(5.0, 90.0),
            st.floats(0.0, 2.0),
            st.sampled_from([CALM, CALM._replace(emergency=STOP)]),
        ),
        max_size=40,
    )
)
def test_8_transmitting_takes_target_height_a_fresh_reading_and_no_hazard(
    turns: list[tuple[float | None, float, float, World]],
) -> None:
    judge, gate, mono_s = TransmitJudge(LIMITS, 0.23), Gate(LIMITS), 71.0
    for error_deg, elevation_deg, age_s, world in turns:
        mono_s += 0.5
        reading = Reading(mono_s - age_s, 201.7, elevation_deg)
        verdict = gate.judge(mono_s, None, reading, world)
        if judge.judge(mono_s, error_deg, reading, verdict).is_good_at(mono_s):
            assert error_deg is not None
            assert error_deg <= 0.23
            assert elevation_deg >= 10.7
            assert age_s <= 1.0
            assert world is CALM
