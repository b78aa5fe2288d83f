"""The real daemon on a real port through a whole contact: followed, pulled, plugged, stopped."""

import subprocess
import time
from collections.abc import Iterator
from pathlib import Path
from typing import Any

import pytest

from tests.drivers.benches import DIALECTS, SystemClock
from tests.end_to_end.station import Station
from trunnion.service.link.status import LinkState
from trunnion_drivers.bench.bench import Bench, no_tap
from trunnion_drivers.bench.setup import bench_for
from trunnion_drivers.bench.station import read_station
from trunnion_drivers.simulator.faults import HEALTHY, Faults
from trunnion_drivers.simulator.machine import SimulatedMachine
from trunnion_drivers.simulator.settings import MachineSettings

REEDMACE = f"kind: dialect\n  dialect: {DIALECTS / 'reedmace.yaml'}\n  url: FOLDER/port"
PLOVER = f"kind: dialect\n  dialect: {DIALECTS / 'plover.yaml'}\n  url: FOLDER/port\n  parity: none"
MODBUS = """kind: modbus
  url: FOLDER/port
  baud_rate: 115200
  follows_rate: true
  first: {read: 0, write: 10, write_rate: 14, units_per_deg: 1000, rate_units_per_deg_s: 100}
  second: {read: 2, write: 12, write_rate: 15, units_per_deg: 1000, rate_units_per_deg_s: 100}
  halt: {coil: 1}
  stop_input: {input: 4}"""
GOAL = [3.7, 83.1]
LONGEST_STOP_S = 2.0


class OnBench:
    """A station whose driver finds a simulated machine on the bench."""

    def __init__(self, folder: Path, driver: str) -> None:
        self.station = Station(folder)
        text = self.station.file.read_text()
        begin, end = text.index("driver:\n"), text.index("cadence:\n")
        section = f"driver:\n  {driver.replace('FOLDER', str(folder))}\n\n"
        self.station.file.write_text(text[:begin] + section + text[end:])
        described = read_station(self.station.file)
        self.clock = SystemClock()
        self.machine = SimulatedMachine(
            MachineSettings(), described.facts, self.clock.monotonic_s()
        )
        self.bench: Bench = bench_for(described, self.machine, self.clock, no_tap)

    def true_deg(self) -> list[float]:
        """Where the antenna truly is."""
        return list(self.machine.true_motion(self.clock.monotonic_s())[:2])

    def press(self, *, is_pressed: bool) -> None:
        """Press the hardware stop, or let it go."""
        faults = Faults(stop_pressed=True) if is_pressed else HEALTHY
        self.machine.suffer(self.clock.monotonic_s(), faults)


@pytest.fixture(params=[REEDMACE, PLOVER, MODBUS], ids=["lines", "frames", "modbus"])
def case(request: pytest.FixtureRequest, tmp_path: Path) -> Iterator[OnBench]:
    case = OnBench(tmp_path, request.param)
    with case.bench:
        yield case


@pytest.fixture
def daemon(case: OnBench) -> Iterator[subprocess.Popen[str]]:
    process = case.station.run()
    yield process
    process.kill()
    process.wait()


def test_a_contact_a_pulled_line_and_a_pressed_stop(
    case: OnBench, daemon: subprocess.Popen[str]
) -> None:
    station = case.station
    station.wait_for_phase("tracking")
    assert case.true_deg() == pytest.approx(GOAL, abs=0.4)

    case.bench.pull()
    lost = station.wait_for(lambda status: not is_up(status))
    assert daemon.poll() is None
    assert lost["link"]["last_error"]
    case.bench.plug()
    plugged_s = time.monotonic()
    station.wait_for(is_up)
    assert time.monotonic() - plugged_s < 3.0
    station.wait_for_phase("tracking")
    station.wait_for(lambda _: case.true_deg() == pytest.approx(GOAL, abs=0.01))

    case.press(is_pressed=True)
    halted = station.wait_for_phase("halted")
    assert "stop" in halted["emergency_stop"]["cause"]
    time.sleep(LONGEST_STOP_S)
    place = case.true_deg()
    case.press(is_pressed=False)
    time.sleep(1.0)
    assert case.true_deg() == pytest.approx(place, abs=0.01)
    assert station.status()["phase"] == "halted"


def is_up(status: dict[str, Any]) -> bool:
    return bool(status["link"]["state"] == LinkState.UP.value)
