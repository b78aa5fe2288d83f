"""The brake: engaged at rest, released before motion, and what happens where an order is lost."""

from collections.abc import Iterator
from math import inf
from typing import Any

import pytest

from tests.drivers.mounts import FACTS, HOME, HandClock
from trunnion_drivers.conformance.kit import DriverConformance
from trunnion_drivers.conformance.rig import Rig
from trunnion_drivers.interface.brake import Brake, BrakeTiming
from trunnion_drivers.interface.errors import BadSettings, NoReply, Refused
from trunnion_drivers.interface.values import DriverMotion, DriverReading
from trunnion_drivers.simulator.driver import SimulatorDriver
from trunnion_drivers.simulator.faults import Faults, LinkFault

TICK_S = 0.1
TIMES = {"settle_s": 0.37, "still_s": 1.3}
AWAY = HOME._replace(first_deg=29.1)


@pytest.fixture
def clock() -> HandClock:
    return HandClock()


def simulated(clock: HandClock, **settings: Any) -> SimulatorDriver:
    driver = SimulatorDriver.from_settings({"brake": TIMES, **settings}, FACTS, clock)
    driver.open()
    return driver


def go(driver: SimulatorDriver, clock: HandClock, goal: DriverMotion, lasts_s: float) -> None:
    until_s = clock.monotonic_s() + lasts_s
    while clock.monotonic_s() < until_s:
        driver.move(goal)
        clock.sleep(TICK_S)
        driver.read()


def rest(driver: SimulatorDriver, clock: HandClock, lasts_s: float) -> None:
    until_s = clock.monotonic_s() + lasts_s
    while clock.monotonic_s() < until_s:
        driver.halt()
        clock.sleep(TICK_S)
        driver.read()


class TestConformance(DriverConformance):
    @pytest.fixture
    def rig(self, clock: HandClock) -> Iterator[Rig]:
        driver = SimulatorDriver.from_settings({"brake": TIMES}, FACTS, clock)
        yield Rig(
            driver=driver,
            facts=FACTS,
            clock=clock,
            home=HOME,
            accuracy_deg=0.01,
            pull=lambda: driver.inject(lambda _s: Faults(link=LinkFault.LOST)),
            plug=lambda: driver.inject(lambda _s: Faults()),
            stop_input=lambda on: driver.inject(lambda _s: Faults(stop_pressed=on)),
            is_powered=lambda: driver.is_powered,
            is_braked=lambda: driver.is_braked,
        )
        assert not driver.was_forced


def test_it_is_engaged_at_rest_alone(clock: HandClock) -> None:
    driver = simulated(clock)
    go(driver, clock, AWAY, 1.5)
    driver.halt()
    while not driver.is_braked:
        clock.sleep(TICK_S)
        driver.read()
        assert driver.is_braked <= (driver.true_motion()[2:] == (0.0, 0.0))
    assert not driver.was_forced


def test_a_mount_that_follows_a_path_is_not_braked_where_it_turns(clock: HandClock) -> None:
    driver = simulated(clock)
    go(driver, clock, HOME, 10.0)
    assert not driver.is_braked


def test_without_a_halt_it_is_not_engaged(clock: HandClock) -> None:
    driver = simulated(clock)
    go(driver, clock, HOME, 1.0)
    for _ in range(50):
        clock.sleep(TICK_S)
        driver.read()
    assert not driver.is_braked


def test_nothing_moves_before_it_has_let_go(clock: HandClock) -> None:
    driver = simulated(clock)
    rest(driver, clock, 3.0)
    assert driver.is_braked
    go(driver, clock, AWAY, 0.35)
    assert not driver.is_braked
    assert driver.read().first_deg == pytest.approx(HOME.first_deg, abs=0.003)
    go(driver, clock, AWAY, 1.0)
    assert driver.read().first_deg > HOME.first_deg + 0.5
    assert not driver.was_forced


def test_a_halt_while_it_lets_go_keeps_the_mount_where_it_is(clock: HandClock) -> None:
    driver = simulated(clock)
    rest(driver, clock, 3.0)
    driver.move(AWAY)
    rest(driver, clock, 3.0)
    assert driver.is_braked
    assert driver.true_motion().first_deg == HOME.first_deg


def test_a_cut_takes_the_power_before_the_brake_catches_what_moves(clock: HandClock) -> None:
    driver = simulated(clock)
    go(driver, clock, AWAY, 1.5)
    driver.cut_power()
    assert (driver.is_powered, driver.is_braked, driver.was_forced) == (False, True, False)
    assert driver.true_motion()[2:] == (0.0, 0.0)


def test_a_new_link_knows_nothing_and_releases_first(clock: HandClock) -> None:
    driver = simulated(clock)
    rest(driver, clock, 3.0)
    driver.close()
    driver.open()
    go(driver, clock, AWAY, 1.5)
    assert not driver.was_forced
    assert driver.read().first_deg > HOME.first_deg


class Balky(SimulatorDriver):
    """Its brake, or its power output, answers as the test says."""

    brake_error: Exception | None = None
    power_error: Exception | None = None

    def _engage_brake(self) -> None:
        if self.brake_error is not None:
            raise self.brake_error
        super()._engage_brake()

    def _cut_power(self) -> None:
        if self.power_error is not None:
            raise self.power_error
        super()._cut_power()


@pytest.fixture
def balky(clock: HandClock) -> Balky:
    driver = Balky.from_settings({"brake": TIMES}, FACTS, clock)
    driver.open()
    return driver


def test_a_refused_brake_is_a_fault_that_is_told_and_tried_again(
    balky: Balky, clock: HandClock
) -> None:
    balky.brake_error = Refused("no air")
    rest(balky, clock, 3.0)
    assert balky.read().fault == "the brake is not engaged: no air"
    balky.brake_error = None
    assert balky.read().fault is None
    assert balky.is_braked


def test_the_brake_holds_even_if_the_power_could_not_be_cut(balky: Balky, clock: HandClock) -> None:
    balky.power_error = NoReply("silence")
    rest(balky, clock, 1.0)
    with pytest.raises(NoReply, match="silence"):
        balky.cut_power()
    assert balky.is_braked


def test_a_brake_that_may_not_have_heard_is_released_before_motion(
    balky: Balky, clock: HandClock
) -> None:
    go(balky, clock, HOME, 1.0)
    balky.brake_error = NoReply("silence")
    with pytest.raises(NoReply):
        rest(balky, clock, 5.0)
    balky.move(AWAY)
    clock.sleep(0.36)
    balky.move(AWAY)
    assert balky.true_motion().first_rate_deg_s == 0.0


def reading(taken_s: float, first_deg: float) -> DriverReading:
    return DriverReading(taken_s, first_deg, 61.9)


def test_rest_is_little_motion_for_long_enough() -> None:
    brake = Brake(BrakeTiming(0.3, 0.02, 2.0))
    brake.note_halt()
    assert not brake.is_due(reading(7.0, 17.30))
    assert not brake.is_due(reading(8.9, 17.31))
    assert not brake.is_due(reading(9.1, 17.33))
    assert not brake.is_due(reading(11.0, 17.33))
    assert brake.is_due(reading(11.2, 17.33))
    brake.note_motion()
    assert not brake.is_due(reading(inf, 17.33))


def test_times_that_cannot_be_are_told(clock: HandClock) -> None:
    with pytest.raises(BadSettings, match="expected 0 or more"):
        simulated(clock, brake={"settle_s": -0.1})
