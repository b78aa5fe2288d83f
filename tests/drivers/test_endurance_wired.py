"""A week of a driver's clock over real wires: threads, descriptors and memory do not grow.

One order and one reading every twenty minutes of that week, and a new link every twelfth time: what
one exchange would leave behind shows as well as at ten a second, which would take the week itself.
"""

import gc
import threading
import tracemalloc
from collections.abc import Callable, Iterator
from contextlib import contextmanager
from pathlib import Path
from typing import Any, NamedTuple

import pytest

from tests.drivers.benches import DIALECTS, on_pty, on_tcp
from tests.drivers.mounts import FACTS, HandClock
from tests.drivers.test_modbus_driver import POSITION, RATE
from trunnion_drivers.bench.bench import Bench
from trunnion_drivers.bench.dialect_peer import DialectPeer
from trunnion_drivers.bench.modbus_frames import Rtu, Tcp
from trunnion_drivers.bench.modbus_peer import ModbusPeer
from trunnion_drivers.bench.peer import Peer
from trunnion_drivers.dialect.driver import DialectDriver
from trunnion_drivers.dialect.load import load_dialect
from trunnion_drivers.interface.driver import Driver
from trunnion_drivers.interface.values import DriverMotion
from trunnion_drivers.modbus.driver import ModbusDriver
from trunnion_drivers.modbus.settings import ModbusSettings
from trunnion_drivers.settings import checked
from trunnion_drivers.simulator.machine import SimulatedMachine
from trunnion_drivers.simulator.settings import MachineSettings

DAY_S = 24 * 3600.0
EVERY_S = 1200.0
LARGEST_GROWTH_BYTES = 20_000


class Held(NamedTuple):
    """What a process holds."""

    threads: int
    descriptors: int
    memory_bytes: int


def held() -> Held:
    gc.collect()
    descriptors = len(list(Path("/proc/self/fd").iterdir()))
    return Held(threading.active_count(), descriptors, tracemalloc.get_traced_memory()[0])


@contextmanager
def described(name: str, folder: Path, clock: HandClock) -> Iterator[Driver]:
    dialect, steel = DIALECTS / f"{name}.yaml", steel_of(clock)
    plug_in = on_pty(folder) if name == "reedmace" else on_tcp()
    with Bench(DialectPeer(load_dialect(dialect), steel), plug_in, clock) as bench:
        settings = {"url": bench.url, "dialect": str(dialect), "parity": "none"}
        yield DialectDriver.from_settings(settings, FACTS, clock)


@contextmanager
def registers(name: str, folder: Path, clock: HandClock) -> Iterator[Driver]:
    is_tcp = name == "tcp"
    settings: dict[str, Any] = RATE if is_tcp else POSITION
    known = checked(ModbusSettings, {"url": "somewhere", **settings})
    peer: Peer = ModbusPeer(known, steel_of(clock), Tcp() if is_tcp else Rtu())
    with Bench(peer, on_tcp() if is_tcp else on_pty(folder), clock) as bench:
        url = bench.url.replace("socket://", "tcp://")
        yield ModbusDriver.from_settings({"url": url, **settings}, FACTS, clock)


def steel_of(clock: HandClock) -> SimulatedMachine:
    return SimulatedMachine(MachineSettings(), FACTS, clock.monotonic_s())


@pytest.mark.parametrize(
    ("build", "name"),
    [(described, "reedmace"), (described, "plover"), (registers, "rtu"), (registers, "tcp")],
)
def test_nothing_grows_over_a_week(build: Callable[..., Any], name: str, tmp_path: Path) -> None:
    clock = HandClock()
    with build(name, tmp_path, clock) as driver:
        driver.open()
        tracemalloc.start()
        try:
            drive(driver, clock, DAY_S)
            before = held()
            drive(driver, clock, 6 * DAY_S)
            after = held()
        finally:
            tracemalloc.stop()
            driver.close()
    assert after[:2] == before[:2]
    assert after.memory_bytes - before.memory_bytes < LARGEST_GROWTH_BYTES


def drive(driver: Driver, clock: HandClock, lasts_s: float) -> None:
    """To and fro, halted now and then, with a new link every twelfth time."""
    for turn in range(round(lasts_s / EVERY_S)):
        driver.move(DriverMotion(20.0 + turn % 40, 61.9, 0.01, 0.0))
        driver.read()
        clock.sleep(EVERY_S)
        if turn % 12 == 5:
            driver.halt()
            driver.close()
            driver.open()
