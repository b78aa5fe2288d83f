"""The stop that overtakes: from another thread, while the driver waits for an answer."""

import time
from pathlib import Path
from threading import Thread
from typing import Any

import pytest

from tests.drivers.benches import DIALECTS, SystemClock, dialect_bench, machine, on_pty
from tests.drivers.mounts import FACTS, HOME, HandClock
from trunnion_drivers.bench.bench import Bench, Passed, Way
from trunnion_drivers.bench.modbus_frames import Rtu
from trunnion_drivers.bench.modbus_peer import ModbusPeer
from trunnion_drivers.dialect.driver import DialectDriver
from trunnion_drivers.interface.driver import Driver
from trunnion_drivers.interface.errors import DriverError
from trunnion_drivers.modbus.driver import ModbusDriver
from trunnion_drivers.modbus.settings import ModbusSettings
from trunnion_drivers.settings import checked
from trunnion_drivers.simulator.driver import SimulatorDriver

SLOW_BAUD = 300


@pytest.mark.parametrize(
    ("name", "stop"), [("reedmace", b"\r\nH*62\r\n"), ("plover", b"\xa5Z\x03")]
)
def test_the_stop_does_not_wait_for_an_answer(name: str, stop: bytes, tmp_path: Path) -> None:
    """At 300 baud a question and its answer take more than half a second."""
    wire: list[Passed] = []
    steel = machine()
    dialect = DIALECTS / f"{name}.yaml"
    with dialect_bench(dialect, steel, on_pty(tmp_path), wire.append, SLOW_BAUD) as bench:
        settings = {"url": bench.url, "dialect": str(dialect), "parity": "none"}
        driver = DialectDriver.from_settings(settings, FACTS, SystemClock())
        assert not driver.halt_at_once()
        driver._port.open()  # `open` itself would take its time
        driver._is_open = True
        asking = Thread(target=read_and_forget, args=(driver,))
        asking.start()
        time.sleep(0.05)
        asked_s = time.monotonic()
        assert driver.halt_at_once()
        asking.join()
        stops = [passed for passed in wire if passed.way is Way.IN and stop in passed.data]
        assert stops[0].mono_s - asked_s < 0.03
        driver.close()


def test_over_modbus_it_waits_for_one_exchange_alone(tmp_path: Path) -> None:
    """Twelve inputs with gaps are twelve questions: at 1200 baud more than a second and a half."""
    wire: list[Passed] = []
    settings: dict[str, Any] = {
        "url": str(tmp_path / "adapter"),
        "baud_rate": 1200,
        "reply_within_s": 1.0,
        "first": {"read": 0, "write": 10},
        "second": {"read": 2, "write": 12},
        "halt": {"coil": 3},
        "limits": tuple(range(20, 44, 2)),
    }
    peer = ModbusPeer(checked(ModbusSettings, settings), machine(), Rtu())
    with Bench(peer, on_pty(tmp_path), SystemClock(), wire.append, 1200):
        driver = ModbusDriver.from_settings(settings, FACTS, SystemClock())
        driver.open()
        asking = Thread(target=read_and_forget, args=(driver,))
        asking.start()
        time.sleep(0.1)
        asked_s = time.monotonic()
        assert driver.halt_at_once()
        assert time.monotonic() - asked_s < 0.02
        asking.join()
        assert time.monotonic() - asked_s > 1.5
        stop = b"\x01\x05\x00\x03\xff\x00"
        stops = [passed for passed in wire if passed.way is Way.IN and stop in passed.data]
        assert stops[0].mono_s - asked_s < 0.6
        driver.close()


def read_and_forget(driver: Driver) -> None:
    try:
        driver.read()
    except DriverError:
        return


def test_a_driver_that_cannot_says_so() -> None:
    driver = SimulatorDriver.from_settings({}, FACTS, HandClock())
    driver.open()
    driver.move(HOME)
    assert not driver.halt_at_once()
