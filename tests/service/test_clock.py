"""Clocks: the machine's and the virtual one."""

import time

from trunnion.service.clock import Clock, SystemClock, VirtualClock
from trunnion_drivers.interface.values import Clock as DriverClock

UTC_S = 1_893_456_123.75


def test_virtual_time_passes_only_in_sleep() -> None:
    clock = VirtualClock(UTC_S, monotonic_s=41.5)
    assert (clock.utc_s(), clock.monotonic_s()) == (UTC_S, 41.5)
    clock.sleep(2.25)
    assert (clock.utc_s(), clock.monotonic_s()) == (UTC_S + 2.25, 43.75)
    clock.sleep_until(50.125)
    assert (clock.utc_s(), clock.monotonic_s()) == (UTC_S + 8.625, 50.125)


def test_virtual_time_never_runs_back() -> None:
    clock = VirtualClock(UTC_S, monotonic_s=41.5)
    clock.sleep_until(40.0)
    clock.sleep(-3.0)
    assert clock.monotonic_s() == 41.5


def test_a_step_of_utc_leaves_durations_alone() -> None:
    clock = VirtualClock(UTC_S, monotonic_s=41.5)
    clock.step_utc(-7.5)
    assert (clock.utc_s(), clock.monotonic_s()) == (UTC_S - 7.5, 41.5)


def test_the_machine_s_clock_waits_for_a_deadline_and_not_for_a_past_one() -> None:
    clock = SystemClock()
    begin_s = clock.monotonic_s()
    clock.sleep_until(begin_s + 0.02)
    assert clock.monotonic_s() >= begin_s + 0.02
    clock.sleep_until(begin_s - 1000.0)
    assert clock.monotonic_s() < begin_s + 10.0
    assert abs(clock.utc_s() - time.time()) < 10.0


def test_both_serve_the_daemon_and_its_drivers() -> None:
    for_the_daemon: list[Clock] = [SystemClock(), VirtualClock(UTC_S)]
    for_a_driver: list[DriverClock] = [SystemClock(), VirtualClock(UTC_S)]
    assert len(for_the_daemon) == len(for_a_driver)
