"""Every fault of a simulated mount does what it says, and ends when it ends."""

from typing import Any

import pytest

from tests.drivers.mounts import FACTS, HOME, HandClock
from trunnion_drivers.interface.errors import (
    BadSettings,
    DriverError,
    Garbled,
    LinkLost,
    NoReply,
    Refused,
)
from trunnion_drivers.simulator.driver import SimulatorDriver
from trunnion_drivers.simulator.faults import (
    HEALTHY,
    EncoderFault,
    Episode,
    Faults,
    JointFault,
    LinkFault,
    healthy,
    timetable,
)
from trunnion_drivers.simulator.mount import CREEP

SOUND = JointFault.NONE


def simulator(clock: HandClock, **settings: Any) -> SimulatorDriver:
    exact = {"encoder_resolution_deg": 0.0, "encoder_noise_deg": 0.0}
    driver = SimulatorDriver.from_settings({**exact, **settings}, FACTS, clock)
    driver.open()
    return driver


@pytest.fixture
def clock() -> HandClock:
    return HandClock()


@pytest.fixture
def driver(clock: HandClock) -> SimulatorDriver:
    return simulator(clock)


def now_wrong(driver: SimulatorDriver, **faults: Any) -> None:
    driver.inject(lambda _: Faults(**faults))


@pytest.mark.parametrize(
    ("fault", "error"),
    [(LinkFault.LOST, LinkLost), (LinkFault.SILENT, NoReply), (LinkFault.GARBLED, Garbled)],
)
def test_a_reading_fails_as_the_link_does(
    driver: SimulatorDriver, fault: LinkFault, error: type[DriverError]
) -> None:
    now_wrong(driver, link=fault)
    with pytest.raises(error):
        driver.read()
    driver.inject(healthy)
    driver.read()


def test_a_refusing_mount_still_halts(driver: SimulatorDriver, clock: HandClock) -> None:
    driver.move(HOME._replace(first_deg=40.0))
    clock.sleep(1.0)
    now_wrong(driver, link=LinkFault.REFUSING)
    with pytest.raises(Refused):
        driver.move(HOME)
    driver.halt()
    clock.sleep(1.7)
    assert driver.true_motion().first_rate_deg_s == 0.0


def test_a_deaf_mount_answers_and_does_nothing(driver: SimulatorDriver, clock: HandClock) -> None:
    now_wrong(driver, link=LinkFault.DEAF)
    driver.move(HOME._replace(first_deg=40.0))
    clock.sleep(1.0)
    assert driver.read().first_deg == HOME.first_deg


def test_a_jammed_joint_stands_still_at_once(driver: SimulatorDriver, clock: HandClock) -> None:
    driver.move(HOME._replace(first_deg=40.0, second_deg=40.0))
    clock.sleep(1.0)
    now_wrong(driver, joints=(JointFault.JAMMED, SOUND))
    jammed = driver.true_motion()
    driver.move(HOME._replace(first_deg=40.0, second_deg=40.0))
    clock.sleep(1.0)
    assert driver.true_motion().first_deg == jammed.first_deg
    assert driver.true_motion().second_deg < jammed.second_deg - 1.0


def test_a_reversed_joint_moves_the_wrong_way(driver: SimulatorDriver, clock: HandClock) -> None:
    now_wrong(driver, joints=(SOUND, JointFault.REVERSED))
    driver.move(HOME._replace(second_deg=70.0))
    clock.sleep(2.0)
    assert driver.true_motion().second_deg < HOME.second_deg - 1.0


@pytest.mark.parametrize(
    ("fault", "stops"), [(JointFault.RUNNING_AWAY, True), (JointFault.UNSTOPPABLE, False)]
)
def test_a_joint_that_runs_away(
    driver: SimulatorDriver, clock: HandClock, fault: JointFault, stops: bool
) -> None:
    now_wrong(driver, joints=(fault, SOUND))
    driver.move(HOME)
    clock.sleep(2.0)
    assert driver.true_motion().first_rate_deg_s == pytest.approx(FACTS.first.rate_deg_s / 2)
    driver.halt()
    clock.sleep(2.0)
    assert (driver.true_motion().first_rate_deg_s == 0.0) is stops
    driver.cut_power()
    clock.sleep(2.0)
    assert driver.true_motion().first_rate_deg_s == 0.0


def test_a_slipping_brake_lets_a_resting_joint_creep(
    driver: SimulatorDriver, clock: HandClock
) -> None:
    driver.move(HOME._replace(first_deg=40.0))
    clock.sleep(1.0)
    now_wrong(driver, joints=(JointFault.SLIPPING, SOUND))
    driver.halt()
    clock.sleep(2.0)
    creep_deg_s = FACTS.first.rate_deg_s * CREEP
    assert driver.true_motion().first_rate_deg_s == pytest.approx(creep_deg_s)
    driver.cut_power()
    clock.sleep(2.0)
    assert driver.true_motion().first_rate_deg_s == pytest.approx(creep_deg_s)
    driver.inject(healthy)
    driver.read()
    clock.sleep(2.0)
    assert driver.true_motion()[2:] == (0.0, 0.0)


def test_a_slipping_brake_does_not_hinder_motion(driver: SimulatorDriver, clock: HandClock) -> None:
    now_wrong(driver, joints=(SOUND, JointFault.SLIPPING))
    driver.move(HOME._replace(second_deg=HOME.second_deg - 1.3))
    clock.sleep(1.9)
    assert driver.true_motion().second_deg == pytest.approx(HOME.second_deg - 1.3)


def test_two_episodes_at_once_both_hold() -> None:
    faults_at = timetable(
        (
            Episode(1.3, 9.7, Faults(LinkFault.SILENT, (JointFault.JAMMED, SOUND))),
            Episode(4.1, 6.2, Faults(LinkFault.DEAF, (SOUND, JointFault.REVERSED), words="hot")),
        )
    )
    both = Faults(LinkFault.DEAF, (JointFault.JAMMED, JointFault.REVERSED), words="hot")
    assert faults_at(5.0) == both
    assert faults_at(5.1) is faults_at(5.0)
    assert faults_at(1.2) == HEALTHY
    assert faults_at(7.0).link is LinkFault.SILENT


def test_a_joint_without_power_does_not_begin_to_run_away(
    driver: SimulatorDriver, clock: HandClock
) -> None:
    driver.cut_power()
    now_wrong(driver, joints=(JointFault.UNSTOPPABLE, SOUND))
    clock.sleep(2.0)
    assert driver.true_motion().first_rate_deg_s == 0.0
    driver.close()
    driver.open()
    clock.sleep(2.0)
    assert driver.true_motion().first_rate_deg_s > 0.0


def test_a_mount_without_power_coasts_to_rest_and_stays(
    driver: SimulatorDriver, clock: HandClock
) -> None:
    driver.move(HOME._replace(first_deg=60.0))
    clock.sleep(2.0)
    now_wrong(driver, has_no_power=True)
    rests_at = driver.true_motion().first_deg + 5.3**2 / (2 * 2.9)
    for _ in range(5):
        driver.move(HOME._replace(first_deg=60.0))
        clock.sleep(1.0)
    assert driver.true_motion().first_deg == pytest.approx(rests_at)


def test_a_pressed_stop_is_told_and_stops(driver: SimulatorDriver, clock: HandClock) -> None:
    driver.move(HOME._replace(first_deg=60.0))
    clock.sleep(1.0)
    now_wrong(driver, stop_pressed=True)
    for _ in range(4):
        driver.move(HOME._replace(first_deg=60.0))
        clock.sleep(0.5)
    assert driver.read().stop_pressed
    assert driver.true_motion().first_rate_deg_s == 0.0


def test_an_encoder_that_freezes_dies_or_loses_its_zero(
    driver: SimulatorDriver, clock: HandClock
) -> None:
    driver.move(HOME._replace(first_deg=60.0))
    driver.read()
    now_wrong(driver, encoders=(EncoderFault.FROZEN, EncoderFault.NONE))
    clock.sleep(1.0)
    assert driver.read().first_deg == HOME.first_deg
    now_wrong(driver, encoders=(EncoderFault.DEAD, EncoderFault.NONE))
    with pytest.raises(Garbled, match="finite"):
        driver.read()
    now_wrong(driver, offsets_deg=(0.0, -61.9))
    assert driver.read().second_deg == 0.0


def test_an_old_reading_says_its_age(driver: SimulatorDriver, clock: HandClock) -> None:
    driver.move(HOME._replace(first_deg=60.0))
    for _ in range(20):
        driver.read()
        clock.sleep(0.1)
    now_wrong(driver, reading_age_s=0.7)
    reading = driver.read()
    assert clock.monotonic_s() - reading.taken_s == pytest.approx(0.7, abs=0.11)
    assert reading.first_deg < driver.true_motion().first_deg - 0.5


def test_a_slow_call_takes_its_time(driver: SimulatorDriver, clock: HandClock) -> None:
    now_wrong(driver, call_lasts_s=1.3)
    before_s = clock.monotonic_s()
    reading = driver.read()
    assert clock.monotonic_s() - before_s == pytest.approx(1.3)
    assert reading.taken_s == clock.monotonic_s()


def test_wind_bends_the_antenna(clock: HandClock) -> None:
    driver = simulator(clock, bend_deg_s2_m2=0.0005, encoder_on_motor=True)
    now_wrong(driver, wind_m_s=20.0)
    assert driver.true_motion().first_deg == pytest.approx(HOME.first_deg + 0.2)
    assert driver.read().first_deg == HOME.first_deg


def test_losses_are_of_the_share_that_was_set(clock: HandClock) -> None:
    driver = simulator(clock, reply_loss=0.3)
    lost = 0
    for _ in range(1000):
        try:
            driver.read()
        except NoReply:
            lost += 1
    assert 240 < lost < 360


def test_a_timetable_begins_ends_and_lets_the_later_entry_hold() -> None:
    early, late = Faults(wind_m_s=3.0), Faults(wind_m_s=7.0)
    at = timetable([Episode(2.0, 5.0, early), Episode(4.0, 6.0, late)])
    assert [at(s) for s in (1.9, 2.0, 4.0, 5.9, 6.0)] == [HEALTHY, early, late, late, HEALTHY]


def test_episodes_can_stand_in_the_station_file(clock: HandClock) -> None:
    driver = simulator(clock, faults=({"after_s": 5.0, "for_s": 2.0, "link": "silent"},))
    driver.read()
    clock.sleep(6.0)
    with pytest.raises(NoReply):
        driver.read()
    clock.sleep(2.0)
    driver.read()


def test_a_misspelt_episode_is_told_with_its_place() -> None:
    bad = ({"after_s": 5.0, "for_s": 2.0, "lnik": "silent"}, {"after_s": -1.0, "for_s": 2.0})
    with pytest.raises(BadSettings) as caught:
        SimulatorDriver.from_settings({"faults": bad}, FACTS, HandClock())
    reasons = {problem.key: problem.reason for problem in caught.value.problems}
    assert "'link'" in reasons["faults.0.lnik"]
    assert "faults.1.after_s" in reasons


def test_limit_switches_end_the_motion_outward_but_not_inward(clock: HandClock) -> None:
    driver = simulator(clock, start_deg=(17.3, 91.5), switches_deg=0.3, overtravel_deg=5.0)
    driver.move(HOME._replace(second_deg=91.8, second_rate_deg_s=2.0))
    clock.sleep(1.5)
    driver.move(HOME._replace(second_deg=91.8, second_rate_deg_s=2.0))
    clock.sleep(1.5)
    reading = driver.read()
    assert reading.at_limit
    assert 92.2 < reading.second_deg < 96.0
    driver.move(HOME._replace(second_deg=80.0))
    clock.sleep(1.9)
    assert driver.read().second_deg < 91.0
    assert not driver.read().at_limit


def test_backlash_loses_motion_on_every_reversal(clock: HandClock) -> None:
    driver = simulator(clock, backlash_deg=0.4)
    resting = []
    for first_deg in (30.0, 20.0, 30.0):
        for _ in range(5):
            driver.move(HOME._replace(first_deg=first_deg))
            clock.sleep(1.0)
        resting.append(driver.true_motion().first_deg)
    assert resting == pytest.approx([29.8, 20.2, 29.8])


def test_static_friction_holds_against_small_goals(clock: HandClock) -> None:
    driver = simulator(clock, breakaway_deg=0.05)
    driver.move(HOME._replace(first_deg=HOME.first_deg + 0.04))
    clock.sleep(1.0)
    assert driver.true_motion() == HOME
    driver.move(HOME._replace(first_deg=HOME.first_deg + 0.06))
    clock.sleep(1.0)
    assert driver.true_motion().first_deg == pytest.approx(HOME.first_deg + 0.06)
