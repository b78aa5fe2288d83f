"""Every row of the policy does something: weakened, its hazard goes unheeded.

Each scene brings one hazard about and says what has to follow. It is played twice: with the policy
as it stands, and with that one row made so weak that it never acts.
"""

from collections.abc import Callable, Mapping
from dataclasses import replace
from math import inf, nan

import pytest

from tests.safety.bench_mount import CALM, LIMITS, Bench
from trunnion.mount.joints import Joints, Motion, Reading
from trunnion.mount.motion import approach
from trunnion.safety.emergency import EmergencyStop
from trunnion.safety.gate import Gate
from trunnion.safety.policy import POLICY, Policy
from trunnion.safety.verdict import Action, Halt, Intervention, Rule, Verdict
from trunnion.safety.world import World

WATCHFUL = replace(
    LIMITS,
    clock_max_error_s=0.3,
    wind_stow_gust_m_s=17.0,
    heartbeat_max_age_s=5.0,
    sun_keep_out_deg=4.3,
)
FINE = CALM._replace(
    clock_error_s=0.1, wind_gust_m_s=3.7, heartbeat_age_s=0.4, utc_s=2000.0, sun=(83.1, 37.7)
)
HERE = Motion(201.7, 41.3)

Table = Mapping[Rule, Policy]


class Scene:
    """A gate with this policy, settled on a mount at rest."""

    def __init__(self, policy: Table, place: Joints = HERE.joints) -> None:
        self.bench = Bench(place=place, gate=Gate(WATCHFUL, policy))
        for _ in range(4):
            self.turn(None)

    def turn(self, demand: Motion | None, world: World = FINE, dt_s: float = 0.1) -> Verdict:
        return self.bench.turn(demand, world._replace(utc_s=self.bench.mono_s), dt_s=dt_s)

    def read(self, demand: Motion, *readings: Reading | None) -> Verdict:
        """Turns with these readings, each taken so long before its turn as its time says."""
        for reading in readings:
            self.bench.mono_s += 0.1
            mono_s = self.bench.mono_s
            seen = reading and reading._replace(taken_s=mono_s - reading.taken_s)
            world = FINE._replace(utc_s=mono_s)
            verdict = self.bench.gate.judge(mono_s, demand, seen, world)
        return verdict


def around(change: dict[str, object]) -> Callable[[Table], Verdict]:
    def play(policy: Table) -> Verdict:
        return Scene(policy).turn(HERE, World(**{**FINE._asdict(), **change}))

    return play


def demanded(demand: Motion) -> Callable[[Table], Verdict]:
    return lambda policy: Scene(policy).turn(demand)


def read(*readings: Reading | None) -> Callable[[Table], Verdict]:
    def play(policy: Table) -> Verdict:
        scene = Scene(policy)
        scene.turn(HERE)
        return scene.read(HERE, *readings)

    return play


def stays_behind(policy: Table, wobble_deg: float = 0.001) -> Verdict:
    scene, demand = Scene(policy), HERE
    for turn in range(70):
        demand = approach(demand, Motion(231.7, 41.3), LIMITS.mount, 0.1)
        verdict = scene.turn(demand)
        scene.bench.place = Joints(201.7 + wobble_deg * (turn % 3), 41.3)
        if verdict.latch is not None:
            break
    return verdict


def freezes(policy: Table) -> Verdict:
    """The reading stays; the orders move on by less than would count as a stall."""
    scene, demand = Scene(policy), HERE
    for _ in range(40):
        demand = approach(demand, Motion(203.7, 41.3), LIMITS.mount, 0.1)
        verdict = scene.turn(demand)
        scene.bench.place = HERE.joints
        if verdict.latch is not None:
            break
    return verdict


def slips(policy: Table) -> Verdict:
    scene = Scene(policy)
    for _ in range(30):
        scene.turn(None)
        scene.bench.place = Joints(201.7, scene.bench.place.second_deg - 0.2)
    return scene.turn(None)


def goes_the_wrong_way(policy: Table) -> Verdict:
    scene, demand = Scene(policy), HERE
    for _ in range(20):
        demand = approach(demand, Motion(231.7, 41.3), LIMITS.mount, 0.1)
        verdict = scene.turn(demand)
        if verdict.latch is not None:
            break
        scene.bench.place = Joints(2 * HERE.first_deg - demand.first_deg, 41.3)
    return verdict


def loses_its_position(policy: Table) -> Verdict:
    scene = Scene(policy)
    scene.turn(HERE)
    return scene.read(HERE, *[Reading(0.03, 231.7, 41.3)] * 15)


def does_not_settle(policy: Table) -> Verdict:
    scene = Scene(policy)
    for _ in range(14):
        scene.bench.place = Joints(scene.bench.place.first_deg + 0.15, 41.3)
        verdict = scene.turn(Motion(*scene.bench.place))
    return verdict


def never_reaches_stow(policy: Table) -> Verdict:
    scene = Scene(policy)
    for _ in range(310):
        verdict = scene.turn(HERE, FINE._replace(heartbeat_age_s=9.9), dt_s=1.0)
    return verdict


def steps_the_clock(policy: Table) -> Verdict:
    scene = Scene(policy)
    mono_s = scene.bench.mono_s = scene.bench.mono_s + 0.1
    reading = Reading(mono_s - 0.03, *HERE.joints)
    return scene.bench.gate.judge(mono_s, HERE, reading, FINE._replace(utc_s=mono_s + 20.0))


def runs_to_the_floor(policy: Table) -> Verdict:
    scene = Scene(policy, Joints(201.7, 13.3))
    demand = Motion(201.7, 13.3)
    for _ in range(40):
        demand = approach(demand, Motion(201.7, 5.4, 0.0, -4.0), LIMITS.mount, 0.1)
        verdict = scene.turn(demand)
        if verdict.interventions:
            break
    return verdict


SCENES: dict[Rule, Callable[[Table], Verdict]] = {
    Rule.EMERGENCY_STOP: around({"emergency": EmergencyStop("pressed", 17.3)}),
    Rule.NO_READING: lambda policy: Bench(gate=Gate(WATCHFUL, policy)).gate.judge(
        9.3, HERE, None, FINE
    ),
    Rule.READING_OLD: read(Reading(1.01, 201.7, 41.3)),
    Rule.READING_IMPOSSIBLE: read(*[Reading(0.03, nan, 41.3)] * 5),
    Rule.READING_JUMPED: read(*[Reading(0.03, 231.7, 41.3)] * 5),
    Rule.POSITION_LOST: loses_its_position,
    Rule.FROZEN: freezes,
    Rule.STALLED: stays_behind,
    Rule.SLIPPED: slips,
    Rule.WRONG_WAY: goes_the_wrong_way,
    Rule.UNSETTLED: does_not_settle,
    Rule.OUTSIDE: lambda policy: Scene(policy, Joints(201.7, 4.9)).turn(HERE),
    Rule.LINK_DOWN: around({"is_link_up": False}),
    Rule.TURN_LATE: around({"lateness_s": 0.51}),
    Rule.MOUNT_FAULT: around({"mount_fault": "drive too hot"}),
    Rule.CLOCK_UNTRUSTED: around({"clock_error_s": 0.31}),
    Rule.CLOCK_STEPPED: steps_the_clock,
    Rule.WIND: around({"wind_gust_m_s": 17.1}),
    Rule.WIND_UNKNOWN: around({"wind_gust_m_s": None}),
    Rule.HEARTBEAT_LOST: around({"heartbeat_age_s": 5.1}),
    Rule.STOW_OVERDUE: never_reaches_stow,
    Rule.NOT_FINITE: demanded(Motion(nan, 41.3)),
    Rule.TRAVEL: demanded(Motion(268.1, 41.3)),
    Rule.RATE: demanded(Motion(250.3, 60.1)),
    Rule.FLOOR: demanded(Motion(201.7, 5.2)),
    Rule.MASK: demanded(Motion(90.1, 8.7)),
    Rule.KEEP_OUT: demanded(Motion(143.9, 20.3)),
    Rule.SUN: demanded(Motion(83.9, 37.3)),
    Rule.SUN_IN_BEAM: around({"sun": (202.3, 40.1)}),
    Rule.SUN_UNKNOWN: around({"sun": None}),
    Rule.STOPPING: runs_to_the_floor,
}


def acted(verdict: Verdict, rule: Rule) -> Intervention | None:
    return next((each for each in verdict.interventions if each.rule is rule), None)


def weakened(rule: Rule) -> Table:
    return {**POLICY, rule: POLICY[rule]._replace(action=Action.SLOW, after_s=inf)}


def test_every_rule_has_a_row_and_a_scene() -> None:
    assert set(Rule) == set(POLICY) == set(SCENES)


@pytest.mark.parametrize("rule", Rule)
def test_the_row_acts_as_it_says(rule: Rule) -> None:
    verdict, action = SCENES[rule](POLICY), POLICY[rule].action
    intervention = acted(verdict, rule)
    assert intervention is not None
    assert intervention.action is action
    assert intervention.sentence.endswith(POLICY[rule].until)
    assert verdict.must_cut_power == (rule is Rule.SLIPPED)
    if action is Action.LATCH:
        assert verdict.latch is not None
    if action >= Action.HALT:
        assert verdict.order == Halt()
    assert verdict.wants_stow == (action is Action.STOW or rule is Rule.STOW_OVERDUE)


@pytest.mark.parametrize("rule", Rule)
def test_without_the_row_the_hazard_goes_unheeded(rule: Rule) -> None:
    verdict = SCENES[rule](weakened(rule))
    assert acted(verdict, rule) is None
    if POLICY[rule].action is Action.LATCH:
        assert verdict.latch is None
    if POLICY[rule].action is Action.STOW:
        assert not verdict.wants_stow
