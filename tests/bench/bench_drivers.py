"""The drivers' figures on the wire: the stop, fresh readings, reconnection.

All over a pseudo-terminal at 9600 baud, with the daemon's own link and the bench at the far end.
"""

import sys
import time
from collections.abc import Callable
from contextlib import suppress
from pathlib import Path
from queue import Empty, SimpleQueue
from statistics import quantiles
from tempfile import TemporaryDirectory
from typing import NamedTuple, TypeVar

from tests.bench.row import Row
from tests.drivers.benches import DIALECTS, SystemClock, dialect_bench, machine, on_pty
from tests.drivers.mounts import FACTS
from trunnion.cli.run import SWITCH_INTERVAL_S
from trunnion.mount.joints import Motion
from trunnion.safety.verdict import Move
from trunnion.service.clock import SystemClock as DaemonClock
from trunnion.service.link.threaded import ThreadedLink
from trunnion_drivers.bench.bench import Bench, Passed, Way
from trunnion_drivers.dialect.driver import DialectDriver
from trunnion_drivers.interface.driver import Driver
from trunnion_drivers.interface.values import DriverMotion
from trunnion_drivers.simulator.driver import SimulatorDriver

TICK_S = 0.1
STOPS = 500
TRACKING_S = 60.0
ABSENCES_S = (0.3, 1.6, 2.9, 11.0, 12.1)
LONGEST_STOP_S = 0.010
LONGEST_RECONNECT_S = 2.0
BAUD_RATE = 9600
BITS_A_BYTE = 10
ORDER_BYTES = 41
LATENCY_S = 0.1
LARGEST_ADDED_DEG = 0.01
SETTLING_S, FOLLOWING_S = 5.0, 20.0
LONGEST_LOOK_S = 0.001  # a look that was interrupted says nothing about the antenna
STOP = b"H*62\r\n"

Answer = TypeVar("Answer")


class Rig(NamedTuple):
    """A link that drives a bench, and what came in on its wire."""

    bench: Bench
    link: ThreadedLink
    stops: SimpleQueue[float]


def rows() -> list[Row]:
    """Measure, threads giving way to each other as those of `run` do."""
    sys.setswitchinterval(SWITCH_INTERVAL_S)
    return [stop(), stale_ticks(), reconnect(), added_error()]


def stop() -> Row:
    """From the request to the stop bytes at the far end, while tracking."""
    taken_s = on_rig(lambda rig: [stopped_after_s(rig, number) for number in range(STOPS)])
    p99_s = quantiles(taken_s, n=100)[98]
    return Row(
        f"emergency stop to its bytes on the wire, {BAUD_RATE} baud, 99 % of {STOPS}",
        f"{p99_s * 1e3:.2f} ms",
        f"{LONGEST_STOP_S * 1e3:g} ms",
        p99_s / LONGEST_STOP_S,
        1.0,
        is_at_least=False,
    )


def stopped_after_s(rig: Rig, number: int) -> float:
    """One stop, at another moment of the tick each time."""
    rig.link.release()
    for _ in range(2):
        track(rig, TICK_S)
    time.sleep(0.01 + 0.0617 * number % 0.09)
    drain(rig.stops)
    begin_s = time.monotonic()
    rig.link.emergency_halt()
    return rig.stops.get(timeout=2.0) - begin_s


def stale_ticks(lasts_s: float = TRACKING_S) -> Row:
    """Ticks at 10 Hz that found no reading newer than that of the tick before."""
    ticks, stale = on_rig(lambda rig: count_stale(rig, lasts_s))
    return Row(
        f"ticks without a fresh reading, 10 Hz, {BAUD_RATE} baud, {lasts_s:g} s",
        f"{stale} of {ticks}",
        "none",
        float(stale),
        0.0,
        is_at_least=False,
    )


def count_stale(rig: Rig, lasts_s: float) -> tuple[int, int]:
    """How many ticks there were, and how many of them stale."""
    deadline_s, last_s, ticks, stale = time.monotonic(), 0.0, 0, 0
    end_s = deadline_s + lasts_s
    while deadline_s < end_s:
        reading = rig.link.newest()
        taken_s = reading.taken_s if reading else 0.0
        stale += taken_s <= last_s and ticks > 0
        last_s, ticks = taken_s, ticks + 1
        rig.link.submit(order(deadline_s))
        deadline_s += TICK_S
        time.sleep(max(0.0, deadline_s - time.monotonic()))
    return ticks, stale


def reconnect() -> Row:
    """From the adapter's return to the first fresh reading, of five absences of up to 12 s."""
    worst_s = on_rig(lambda rig: max(back_after_s(rig, away) for away in ABSENCES_S))
    return Row(
        "fresh reading after a pulled adapter is back, worst of five",
        f"{worst_s:.2f} s",
        f"{LONGEST_RECONNECT_S:g} s",
        worst_s / LONGEST_RECONNECT_S,
        1.0,
        is_at_least=False,
    )


def back_after_s(rig: Rig, away_s: float) -> float:
    """Pull, wait, plug, and see how long it takes."""
    track(rig, 0.5)
    rig.bench.pull()
    track(rig, away_s)
    rig.bench.plug()
    begin_s = time.monotonic()
    while (reading := rig.link.newest()) is None or reading.taken_s < begin_s:
        track(rig, 0.02)
    return time.monotonic() - begin_s


def added_error() -> Row:
    """What the wire adds to the true antenna's error, 100 ms late and compensated, at 1°/s."""
    dialect = DIALECTS / "reedmace.yaml"
    late = {"control": {"latency_s": LATENCY_S + ORDER_BYTES * BITS_A_BYTE / BAUD_RATE}}
    with TemporaryDirectory() as folder:
        steel = machine(latency_s=LATENCY_S)
        with dialect_bench(dialect, steel, on_pty(Path(folder)), baud_rate=BAUD_RATE) as bench:
            settings = {"url": bench.url, "dialect": str(dialect), **late}
            wired = DialectDriver.from_settings(settings, FACTS, SystemClock())
            wired_deg = worst_error_deg(wired, lambda: steel.true_motion(time.monotonic()))
    alike = {"latency_s": LATENCY_S, "control": {"latency_s": LATENCY_S}}
    here = SimulatorDriver.from_settings(alike, FACTS, SystemClock())
    added_deg = wired_deg - worst_error_deg(here, here.true_motion)
    return Row(
        f"pointing error added by the wire, {BAUD_RATE} baud, 100 ms of latency, 1°/s",
        f"{added_deg:.4f}°",
        f"{LARGEST_ADDED_DEG:g}°",
        added_deg / LARGEST_ADDED_DEG,
        1.0,
        is_at_least=False,
    )


def worst_error_deg(driver: Driver, true_motion: Callable[[], DriverMotion]) -> float:
    """Follow a goal that moves evenly; the worst error of the antenna once it has caught up."""
    driver.open()
    begin_s, worst_deg = time.monotonic(), 0.0
    while (since_s := time.monotonic() - begin_s) < FOLLOWING_S:
        driver.move(DriverMotion(20.0 + since_s, 61.9, 1.0, 0.0))
        driver.read()
        time.sleep(0.4 * TICK_S)
        before_s = time.monotonic()
        error_deg = true_motion().first_deg - 20.0 - (before_s - begin_s)
        if since_s > SETTLING_S and time.monotonic() - before_s < LONGEST_LOOK_S:
            worst_deg = max(worst_deg, abs(error_deg))
    driver.halt()
    driver.close()
    return worst_deg


def track(rig: Rig, lasts_s: float) -> None:
    """One order, and the time until the next."""
    rig.link.submit(order(time.monotonic()))
    time.sleep(lasts_s)


def order(mono_s: float) -> Move:
    """A goal that moves evenly, to and fro."""
    phase = mono_s % 60.0
    rate = 1.0 if phase < 30.0 else -1.0
    return Move(Motion(20.0 + min(phase, 60.0 - phase), 61.9, rate, 0.0))


def drain(queue: SimpleQueue[float]) -> None:
    """Forget what is in there."""
    with suppress(Empty):
        while True:
            queue.get_nowait()


def on_rig(measure: Callable[[Rig], Answer]) -> Answer:
    """Measure with a bench and a link that has its first reading."""
    stops: SimpleQueue[float] = SimpleQueue()

    def tap(passed: Passed) -> None:
        if passed.way is Way.IN and STOP in passed.data:
            stops.put(passed.mono_s)

    dialect = DIALECTS / "reedmace.yaml"
    with TemporaryDirectory() as folder:
        steel = machine()
        with dialect_bench(dialect, steel, on_pty(Path(folder)), tap, BAUD_RATE) as bench:
            settings = {"url": bench.url, "dialect": str(dialect)}
            driver = DialectDriver.from_settings(settings, FACTS, SystemClock())
            link = ThreadedLink(driver, DaemonClock(), TICK_S)
            try:
                while link.newest() is None:
                    time.sleep(TICK_S)
                return measure(Rig(bench, link, stops))
            finally:
                link.close()
