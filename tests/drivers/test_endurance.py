"""A simulated week: what a driver keeps does not grow."""

import tracemalloc
from typing import Any

import pytest

from tests.drivers.mounts import FACTS, HandClock
from trunnion_drivers.interface.values import DriverMotion
from trunnion_drivers.simulator.driver import SimulatorDriver

HOUR_S = 3600.0
WEEK_S = 7 * 24 * HOUR_S
LARGEST_GROWTH_BYTES = 20_000


@pytest.mark.parametrize("command", ["position", "rate", "on-off"])
def test_memory_stays_flat_over_a_week(command: str) -> None:
    clock = HandClock()
    settings: dict[str, Any] = {"command": command, "backlash_deg": 0.01, "latency_s": 0.1}
    driver = SimulatorDriver.from_settings(settings, FACTS, clock)
    driver.open()
    begin_s = clock.monotonic_s()
    tracemalloc.start()
    try:
        follow(driver, clock, begin_s + 24 * HOUR_S)
        before = tracemalloc.get_traced_memory()[0]
        follow(driver, clock, begin_s + WEEK_S)
        grown = tracemalloc.get_traced_memory()[0] - before
    finally:
        tracemalloc.stop()
    assert grown < LARGEST_GROWTH_BYTES


def follow(driver: SimulatorDriver, clock: HandClock, until_s: float) -> None:
    """To and fro, a turn of the loop every minute, and a new link now and then."""
    turn = 0
    while clock.monotonic_s() < until_s:
        driver.move(DriverMotion(20.0 + turn % 40, 61.9, 0.01, 0.0))
        driver.read()
        if turn % 500 == 0:
            driver.close()
            driver.open()
        turn += 1
        clock.sleep(60.0)
