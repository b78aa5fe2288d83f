"""The simulated mount as a driver: what it promises, and what its settings change."""

from collections.abc import Iterator
from math import sin
from pathlib import Path
from typing import Any

import pytest
from hypothesis import given
from hypothesis import strategies as st

from tests.drivers.mounts import FACTS, HOME, HandClock
from trunnion_drivers.conformance.kit import DriverConformance
from trunnion_drivers.conformance.rig import Rig
from trunnion_drivers.interface.errors import BadSettings, LinkLost
from trunnion_drivers.interface.values import DriverMotion, MountFacts
from trunnion_drivers.simulator.driver import SimulatorDriver
from trunnion_drivers.simulator.faults import Faults, LinkFault, healthy

EXACT: dict[str, Any] = {"encoder_resolution_deg": 0.0, "encoder_noise_deg": 0.0}


def open_simulator(
    clock: HandClock, facts: MountFacts = FACTS, **settings: object
) -> SimulatorDriver:
    driver = SimulatorDriver.from_settings(settings, facts, clock)
    driver.open()
    return driver


MODES: list[dict[str, Any]] = [
    {},
    {"latency_s": 0.23, "control": {"latency_s": 0.23}},
    {"follows_rate": False},
    {"backlash_deg": 0.004, "breakaway_deg": 0.003, "encoder_on_motor": True},
    {"command": "rate"},
    {
        "command": "on-off",
        "run_on_deg": 0.4,
        "control": {"run_on_deg": 0.4, "threshold_deg": 0.2},
    },
]
ACCURACY_DEG = {"on-off": 0.9, "rate": 0.02}


class TestConformance(DriverConformance):
    @pytest.fixture(params=MODES)
    def rig(self, request: pytest.FixtureRequest) -> Rig:
        clock = HandClock()
        driver = SimulatorDriver.from_settings(request.param, FACTS, clock)
        pulled, pressed = Faults(link=LinkFault.LOST), Faults(stop_pressed=True)
        return Rig(
            driver=driver,
            facts=FACTS,
            clock=clock,
            home=HOME,
            accuracy_deg=ACCURACY_DEG.get(request.param.get("command"), 0.01),
            lag_s=request.param.get("latency_s", 0.4 if len(request.param) else 0.0),
            longest_call_s=0.0,
            pull=lambda: driver.inject(lambda _: pulled),
            plug=lambda: driver.inject(healthy),
            stop_input=lambda is_on: (
                driver.inject(lambda _: pressed) if is_on else driver.inject(healthy)
            ),
            is_powered=lambda: driver.is_powered,
        )


def test_a_moving_goal_is_followed_without_lag() -> None:
    clock = HandClock()
    driver = open_simulator(clock, **EXACT)
    begin_s = clock.monotonic_s()
    errors = []
    for _ in range(400):
        t = clock.monotonic_s() - begin_s
        goal = DriverMotion(17.3 + 2.1 * t, 61.9 - 1.3 * t * (t < 15) - 19.5 * (t >= 15), 2.1, -1.3)
        goal = goal if t < 15 else goal._replace(second_rate_deg_s=0.0)
        driver.move(goal)
        errors.append(abs(driver.read().first_deg - goal.first_deg))
        clock.sleep(0.1)
    assert max(errors[100:]) < 1e-9


@given(
    st.lists(st.tuples(st.floats(-263, 271), st.floats(1.7, 91.9), st.floats(0.01, 2)), max_size=9)
)
def test_the_limits_of_the_mount_are_never_exceeded(
    orders: list[tuple[float, float, float]],
) -> None:
    clock = HandClock()
    driver = open_simulator(clock)
    before = driver.true_motion()
    for first_deg, second_deg, pause_s in orders:
        driver.move(DriverMotion(first_deg, second_deg, 6.7, -4.1))
        for _ in range(10):
            clock.sleep(pause_s / 10)
            after = driver.true_motion()
            for joint, facts in ((0, FACTS.first), (1, FACTS.second)):
                assert facts.lower_deg - 1.0 <= after[joint] <= facts.upper_deg + 1.0
                assert abs(after[joint + 2]) <= facts.rate_deg_s * (1 + 1e-9)
                way_deg = abs(after[joint] - before[joint])
                assert way_deg <= facts.rate_deg_s * pause_s / 10 + 1e-9
            before = after


def test_how_often_it_is_looked_at_changes_nothing() -> None:
    finals = []
    for looks in (1, 7, 1000):
        clock = HandClock()
        driver = open_simulator(clock)
        driver.move(DriverMotion(-31.7, 33.1, 0.13, 0.29))
        for _ in range(looks):
            clock.sleep(1.9 / looks)
            driver.read()
        finals.append(driver.true_motion())
    assert finals[1] == pytest.approx(finals[0], abs=1e-9)
    assert finals[2] == pytest.approx(finals[0], abs=1e-9)


def test_the_encoder_shows_whole_steps_and_seeded_noise() -> None:
    settings: dict[str, Any] = {"encoder_resolution_deg": 0.25, "encoder_noise_deg": 0.3, "seed": 7}
    readings = []
    for _ in range(2):
        clock = HandClock()
        driver = open_simulator(clock, start_deg=(11.1, 22.2), **settings)
        readings.append([driver.read().first_deg for _ in range(50)])
    assert readings[0] == readings[1]
    assert all(angle / 0.25 == round(angle / 0.25) for angle in readings[0])
    assert len(set(readings[0])) > 3


def test_latency_delays_an_order() -> None:
    clock = HandClock()
    driver = open_simulator(clock, latency_s=0.31, **EXACT)
    driver.move(DriverMotion(20.0, 61.9, 0.0, 0.0))
    clock.sleep(0.3)
    assert driver.true_motion() == HOME
    clock.sleep(0.3)
    assert driver.true_motion().first_deg > HOME.first_deg


def test_a_motion_that_nobody_renews_ends() -> None:
    clock = HandClock()
    driver = open_simulator(clock, watchdog_s=1.5, **EXACT)
    driver.move(HOME._replace(first_rate_deg_s=1.0))
    clock.sleep(60.0)
    motion = driver.true_motion()
    assert motion.first_rate_deg_s == 0.0
    assert 1.0 < motion.first_deg - HOME.first_deg < 1.5 + 1.0


def test_a_hard_stop_holds_the_joint_and_is_told() -> None:
    clock = HandClock()
    driver = open_simulator(clock, start_deg=(17.3, 90.9), overtravel_deg=0.7, **EXACT)
    assert not driver.read().at_limit
    for _ in range(40):
        driver.move(DriverMotion(17.3, 91.5, 0.0, 3.0))
        clock.sleep(0.9)
    reading = driver.read()
    assert reading.at_limit
    assert 91.9 + 0.5 < reading.second_deg <= 91.9 + 0.7


def test_bad_settings_are_told_all_at_once() -> None:
    with pytest.raises(BadSettings) as caught:
        SimulatorDriver.from_settings(
            {"latencys": 1, "encoder_noise_deg": -1.0, "seed": "x", "watchdog_s": float("nan")},
            FACTS,
            HandClock(),
        )
    reasons = {problem.key: problem.reason for problem in caught.value.problems}
    assert set(reasons) == {"latencys", "encoder_noise_deg", "seed", "watchdog_s"}
    assert "'latency_s'" in reasons["latencys"]
    assert "0 or more" in reasons["encoder_noise_deg"]


def test_a_start_beyond_the_hard_stops_is_refused() -> None:
    with pytest.raises(BadSettings, match="start_deg: expected joint 2"):
        SimulatorDriver.from_settings({"start_deg": (17.3, 95.1)}, FACTS, HandClock())


class TestMemory:
    @pytest.fixture
    def path(self, tmp_path: Path) -> Path:
        return tmp_path / "angles"

    @pytest.fixture
    def moved(self, path: Path) -> Iterator[SimulatorDriver]:
        clock = HandClock()
        driver = open_simulator(clock, memory=str(path), **EXACT)
        for step in range(50):
            driver.move(DriverMotion(20.1 + sin(step), 61.9, 0.0, 0.0))
            clock.sleep(0.1)
        driver.read()
        yield driver
        driver.close()

    def test_a_new_process_finds_the_mount_where_it_was(
        self, path: Path, moved: SimulatorDriver
    ) -> None:
        """The file is copied while the first process still lives: no goodbye was needed."""
        copy = path.with_name("copy")
        copy.write_bytes(path.read_bytes())
        heir = open_simulator(HandClock(3.0), memory=str(copy), **EXACT)
        assert heir.true_motion()[:2] == pytest.approx(moved.true_motion()[:2], abs=1e-11)
        assert heir.true_motion()[2:] == (0.0, 0.0)
        heir.close()

    def test_two_processes_cannot_have_the_same_mount(
        self, path: Path, moved: SimulatorDriver
    ) -> None:
        with pytest.raises(LinkLost, match="another process"):
            open_simulator(HandClock(), memory=str(path))

    def test_reopening_finds_the_mount_that_has_moved_on(
        self, path: Path, moved: SimulatorDriver
    ) -> None:
        moved.close()
        before = moved.true_motion()
        moved.open()
        assert moved.true_motion() == before

    @pytest.mark.parametrize("damage", [b"+00", b"nan nan\n", b"\xff" * 52, b"x" * 300])
    def test_a_damaged_memory_is_no_position(self, path: Path, damage: bytes) -> None:
        path.write_bytes(damage)
        with pytest.raises(LinkLost, match="expected two angles"):
            open_simulator(HandClock(), memory=str(path))

    def test_a_folder_that_is_missing_is_told(self, path: Path) -> None:
        with pytest.raises(LinkLost, match="No such file"):
            open_simulator(HandClock(), memory=str(path / "deeper"))

    def test_a_relative_path_begins_at_the_folder_of_the_station_file(self, tmp_path: Path) -> None:
        facts = MountFacts(FACTS.first, FACTS.second, 17.3, 61.9, tmp_path)
        open_simulator(HandClock(), facts, memory="angles").close()
        assert (tmp_path / "angles").exists()
