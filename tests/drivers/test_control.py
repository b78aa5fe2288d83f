"""The control laws, judged by how far the true antenna is from a moving goal."""

from itertools import pairwise
from math import cos, sin, sqrt
from typing import Any, NamedTuple

import pytest

from tests.drivers.mounts import FACTS, HandClock
from trunnion_drivers.control.command import Turn
from trunnion_drivers.control.on_off import OnOffLaw, OnOffSettings
from trunnion_drivers.control.position import PositionLaw, PositionSettings
from trunnion_drivers.control.rate import RateLaw, RateSettings
from trunnion_drivers.control.steering import PositionSteering
from trunnion_drivers.interface.errors import NoReply
from trunnion_drivers.interface.values import DriverMotion, DriverReading, JointFacts, MountFacts
from trunnion_drivers.simulator.driver import SimulatorDriver
from trunnion_drivers.simulator.faults import Faults, LinkFault, healthy

SWITCHED = MountFacts(
    JointFacts(-263.7, 271.3, 2.5, 8.0), JointFacts(1.7, 91.9, 2.3, 8.0), 17.3, 61.9
)
TICK_S = 0.1


class Score(NamedTuple):
    rms_deg: float
    worst_deg: float
    mean_deg: float


def follow(
    settings: dict[str, Any], rate_deg_s: float, facts: MountFacts = FACTS, lasts_s: float = 150.0
) -> Score:
    """Follow a goal that moves evenly, beginning 5° off; the first 30 s do not count."""
    clock = HandClock()
    driver = SimulatorDriver.from_settings({"encoder_noise_deg": 0.0, **settings}, facts, clock)
    driver.open()
    begin_s, errors = clock.monotonic_s(), []
    while (since_s := clock.monotonic_s() - begin_s) < lasts_s:
        goal_deg = 12.1 + rate_deg_s * since_s
        driver.move(DriverMotion(goal_deg, 61.9, rate_deg_s, 0.0))
        driver.read()
        for part in range(5):
            true_deg = driver.true_motion().first_deg
            if since_s > 30.0:
                errors.append(true_deg - goal_deg - rate_deg_s * part * TICK_S / 5)
            clock.sleep(TICK_S / 5)
    mean = sum(errors) / len(errors)
    return Score(sqrt(sum(e * e for e in errors) / len(errors)), max(map(abs, errors)), mean)


@pytest.mark.parametrize("rate_deg_s", [1.0, -0.37])
def test_latency_is_compensated(rate_deg_s: float) -> None:
    late = follow({"latency_s": 0.1}, rate_deg_s)
    made_good = follow({"latency_s": 0.1, "control": {"latency_s": 0.1}}, rate_deg_s)
    assert late.worst_deg == pytest.approx(0.1 * abs(rate_deg_s), abs=1e-6)
    assert made_good.worst_deg < 1e-6


@pytest.mark.parametrize("rate_deg_s", [1.0, -0.37])
def test_a_mount_that_brakes_for_every_goal_is_led(rate_deg_s: float) -> None:
    score = follow({"follows_rate": False}, rate_deg_s)
    assert score.rms_deg < 0.03


def test_a_coarse_controller_is_sent_whole_steps_only_when_they_change() -> None:
    coarse = {"follows_rate": False, "control": {"step_deg": 0.5}}
    score = follow(coarse, 0.23)
    assert abs(score.mean_deg) < 0.05
    assert score.rms_deg < 0.5 / sqrt(12) + 0.05


def test_a_coarse_order_that_may_be_lost_is_repeated() -> None:
    steering = PositionSteering(PositionSettings(step_deg=0.5, follows_rate=False), FACTS)
    goal, reading = DriverMotion(20.1, 61.9, 0.0, 0.0), DriverReading(10.0, 17.3, 61.9)
    told = [steering.steer(10.0 + 0.1 * tick, goal, reading) is not None for tick in range(25)]
    assert [tick for tick, was_told in enumerate(told) if was_told] == [0, 10, 20]
    steering.forget(12.5)
    assert steering.steer(12.5, goal, reading) == DriverMotion(20.0, 62.0, 0.0, 0.0)


def test_an_order_that_failed_is_said_again() -> None:
    clock = HandClock()
    settings: dict[str, Any] = {"follows_rate": False, "control": {"step_deg": 0.5}}
    driver = SimulatorDriver.from_settings(settings, FACTS, clock)
    driver.open()
    driver.read()
    driver.inject(lambda _: Faults(link=LinkFault.SILENT))
    goal = DriverMotion(19.0, 61.9, 0.0, 0.0)
    with pytest.raises(NoReply):
        driver.move(goal)
    driver.inject(healthy)
    clock.sleep(0.1)
    driver.move(goal)
    clock.sleep(1.9)
    assert driver.true_motion().first_deg == pytest.approx(19.0)


def test_an_order_stays_within_the_travel() -> None:
    law = PositionLaw(PositionSettings(latency_s=2.0, step_deg=0.5), FACTS.second)
    assert law.order_deg(10.0, 91.5, 3.0) == pytest.approx(91.9)


@pytest.mark.parametrize("rate_deg_s", [0.0, 0.7, -1.7])
@pytest.mark.parametrize("latency_s", [0.0, 0.15])
def test_rates_follow_within_twice_the_resolution(rate_deg_s: float, latency_s: float) -> None:
    settings = {"command": "rate", "latency_s": latency_s, "control": {"latency_s": latency_s}}
    assert follow(settings, rate_deg_s).rms_deg <= 2 * 0.001


def test_a_gear_that_turns_too_slowly_is_made_good_by_the_integral() -> None:
    law = RateLaw(RateSettings(), 5.3, 2.9)
    true_deg, rate, now_s = 10.0, 0.0, 50.0
    for step in range(600):
        goal_deg = 10.0 + 0.6 * step * TICK_S
        rate = law.order_deg_s(now_s, goal_deg, 0.6, true_deg, now_s)
        true_deg += 0.95 * rate * TICK_S
        now_s += TICK_S
    assert abs(goal_deg + 0.06 - true_deg) < 0.01


def test_the_integral_does_not_wind_up_on_a_long_slew() -> None:
    law = RateLaw(RateSettings(integral_per_s2=5.0, integral_limit_deg_s=3.0), 2.0, 4.0)
    true_deg, now_s, highest = 0.0, 50.0, 0.0
    for _ in range(400):
        true_deg += law.order_deg_s(now_s, 40.0, 0.0, true_deg, now_s) * TICK_S
        now_s += TICK_S
        highest = max(highest, true_deg)
    assert highest < 41.0


@pytest.mark.parametrize("rate_deg_s", [0.05, 0.3, 1.0, -0.7])
def test_a_switched_mount_with_coarse_steps_stays_within_its_resolution(rate_deg_s: float) -> None:
    settings = {
        "command": "on-off",
        "run_on_deg": 0.4,
        "encoder_resolution_deg": 1.0,
        "control": {"threshold_deg": 0.3, "resolution_deg": 1.0},
    }
    score = follow(settings, rate_deg_s, SWITCHED, lasts_s=230.0)
    assert score.rms_deg <= 0.6


def test_run_on_is_learned() -> None:
    settings = {
        "command": "on-off",
        "run_on_deg": 0.7,
        "control": {"threshold_deg": 0.3, "coasting_s": 1.5},
    }
    assert abs(follow(settings, 0.2, SWITCHED, lasts_s=300.0).mean_deg) < 0.15


def test_no_pulse_and_no_rest_is_shorter_than_allowed() -> None:
    law = OnOffLaw(OnOffSettings(threshold_deg=0.01, least_pulse_s=0.5, least_rest_s=0.9), 2.5, 8.0)
    now_s, true_deg, changes, turn = 50.0, 10.0, [], Turn.OFF
    for step in range(3000):
        goal_deg = 10.0 + 0.5 * sin(0.05 * step)
        wanted = law.order(now_s, goal_deg, 0.5 * cos(0.05 * step), true_deg, now_s)
        if wanted is not turn:
            changes.append((now_s, wanted))
            turn = wanted
        true_deg += turn.value * 2.5 * 0.05
        now_s += 0.05
    for (before_s, was), (after_s, _) in pairwise(changes):
        least_s = 0.9 if was is Turn.OFF else 0.5
        assert after_s - before_s >= least_s - 1e-6
    assert all(Turn.OFF in (was, becomes) for (_, was), (_, becomes) in pairwise(changes))
