"""The bench as a program of its own: a station file in, a real port out."""

import signal
import subprocess
import sys
from collections.abc import Iterator
from pathlib import Path
from typing import Any

import pytest

from tests.drivers.benches import DIALECTS, SystemClock
from trunnion_drivers.bench.__main__ import main
from trunnion_drivers.bench.station import read_station
from trunnion_drivers.dialect.driver import DialectDriver
from trunnion_drivers.interface.errors import BadSettings
from trunnion_drivers.interface.values import DriverMotion
from trunnion_drivers.modbus.driver import ModbusDriver

STATION = """\
site: {anything: else}
mount:
  first: {travel_deg: [-263, 271], rate_deg_s: 19.5, acceleration_deg_s2: 47}
  second: {travel_deg: [1.5, 91.5], rate_deg_s: 17.5, acceleration_deg_s2: 41}
  stow_deg: [17.5, 61.5]
"""
ON_PTY = f"driver: {{kind: dialect, dialect: '{DIALECTS / 'reedmace.yaml'}', url: FOLDER/port}}\n"
ON_MODBUS = """\
driver:
  kind: modbus
  url: FOLDER/port
  baud_rate: 115200
  follows_rate: true
  first: {read: 0, write: 10, units_per_deg: 1000}
  second: {read: 2, write: 12, units_per_deg: 1000}
  halt: {coil: 1}
"""


CASES = [(ON_PTY, DialectDriver, signal.SIGINT), (ON_MODBUS, ModbusDriver, signal.SIGTERM)]


@pytest.fixture(params=CASES, ids=["lines", "modbus"])
def case(request: pytest.FixtureRequest, tmp_path: Path) -> tuple[Path, Any, signal.Signals]:
    driver, kind, end = request.param
    path = tmp_path / "station.yaml"
    path.write_text(STATION + driver.replace("FOLDER", str(tmp_path)))
    return path, kind, end


@pytest.fixture
def bench(case: tuple[Path, Any, signal.Signals]) -> Iterator[subprocess.Popen[str]]:
    command = [sys.executable, "-m", "trunnion_drivers.bench", str(case[0])]
    with subprocess.Popen(command, stdout=subprocess.PIPE, text=True) as process:
        assert process.stdout is not None
        assert "the bench is at" in process.stdout.readline()
        yield process
        process.kill()


def test_the_station_finds_its_mount_on_the_bench(
    case: tuple[Path, Any, signal.Signals], bench: subprocess.Popen[str]
) -> None:
    path, kind, end = case
    station = read_station(path)
    clock = SystemClock()
    driver = kind.from_settings(station.settings, station.facts, clock)
    driver.open()
    assert driver.read().first_deg == pytest.approx(17.5, abs=0.01)
    for _ in range(10):
        driver.move(DriverMotion(19.5, 61.5, 0.0, 0.0))
        clock.sleep(0.1)
    assert driver.read().first_deg == pytest.approx(19.5, abs=0.01)
    driver.close()
    bench.send_signal(end)
    wire, _ = bench.communicate(timeout=10)
    assert bench.returncode == 0
    assert " > " in wire
    assert " < " in wire
    assert not Path(str(station.settings["url"])).is_symlink()


@pytest.mark.parametrize(
    ("driver", "reason"),
    [
        ("driver: {kind: simulator}\n", "expected dialect or modbus on the bench"),
        ("driver: {kind: modbus}\n", "halt: this key is required"),
        (ON_PTY.replace("FOLDER/port", "/dev/ttyUSB0"), "expected a free path"),
        (ON_PTY.replace("FOLDER/port", "'socket://mount.example:1'"), "expected 127.0.0.1"),
        ("", "driver: "),
    ],
)
def test_what_cannot_be_put_on_the_bench_is_told(
    driver: str, reason: str, tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    path = tmp_path / "station.yaml"
    path.write_text(STATION + driver.replace("FOLDER", str(tmp_path)))
    assert main([str(path)]) == 1
    assert reason in capsys.readouterr().err


@pytest.mark.parametrize(
    ("machine", "reason"),
    [
        ("{", "not valid JSON"),
        ("[]", "a JSON object"),
        ('{"latency": 1}', "unknown key"),
        ('{"start_deg": [900, 5]}', "between its hard stops"),
    ],
)
def test_a_machine_that_cannot_be_is_told(
    machine: str, reason: str, tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    path = tmp_path / "station.yaml"
    path.write_text(STATION + ON_PTY.replace("FOLDER", str(tmp_path)))
    assert main([str(path), "--machine", machine]) == 1
    assert reason in capsys.readouterr().err


def test_a_station_that_is_none_is_told(tmp_path: Path) -> None:
    with pytest.raises(BadSettings, match="No such file"):
        read_station(tmp_path / "none.yaml")
