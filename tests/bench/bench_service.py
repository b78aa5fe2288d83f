"""The service's figures: lateness of the turn, and what hand-overs cost it."""

import subprocess
import sys
import time
from collections.abc import Callable
from pathlib import Path
from queue import Queue
from statistics import median, quantiles
from tempfile import TemporaryDirectory
from threading import Thread

from tests.bench import bare_sleep
from tests.bench.row import Row
from tests.service.link.scripted import ScriptedDriver
from tests.service.records.story import UTC_S, sample, start
from trunnion.cli.run import SWITCH_INTERVAL_S
from trunnion.mount.joints import Motion
from trunnion.safety.verdict import Move
from trunnion.service.cadence import Cadence
from trunnion.service.clock import SystemClock
from trunnion.service.control.client import ControlClient
from trunnion.service.control.server import ControlServer
from trunnion.service.link.threaded import ThreadedLink
from trunnion.service.records.writer import RecordWriter

PERIOD_S = 0.1
BEATS = 250
STRETCHES = 4
HANDOVERS = 3000
STOPS = 1000
LONGEST_STOP_S = 0.005


def rows() -> list[Row]:
    """Measure the service, its threads giving way to each other as those of `run` do."""
    sys.setswitchinterval(SWITCH_INTERVAL_S)
    return [lateness(), order_handover(), sample_handover(), stop()]


def lateness() -> Row:
    """The figure is about an idle machine: of several stretches of time the quietest counts."""
    ours_s, bare_s = min((late_together_s() for _ in range(STRETCHES)), key=sum)
    return compared(f"lateness of the turn at {1 / PERIOD_S:g} Hz, 99 %", ours_s, bare_s, 1.5)


def late_together_s() -> tuple[float, float]:
    """Ours and a bare loop in another process at the same time, half a period apart: 99 % each."""
    bare = [sys.executable, str(Path(bare_sleep.__file__))]
    start_s = time.monotonic() + 1.0
    bare += [repr(start_s + PERIOD_S / 2), repr(PERIOD_S), str(BEATS)]
    with subprocess.Popen(bare, stdout=subprocess.PIPE, text=True) as child:
        ours_s = beats_late_s(start_s)
        output, _ = child.communicate(timeout=60.0)
    return p99(ours_s), p99([float(each) for each in output.split()])


def beats_late_s(start_s: float) -> list[float]:
    """How late each beat comes, with the link, the records and the socket at work beside it."""
    clock = SystemClock()
    late_s = []
    with TemporaryDirectory() as folder:
        link = ThreadedLink(ScriptedDriver(clock), clock, poll_s=PERIOD_S / 2)
        records = RecordWriter(Path(folder) / "records.sqlite3", clock)
        server = ControlServer(Path(folder) / "control.sock", {}, print, clock)
        records.begin_contact(start())
        clock.sleep_until(start_s)
        cadence = Cadence(clock, PERIOD_S)
        for turn in range(BEATS):
            late_s.append(cadence.wait().lateness_s)
            link.newest()
            link.submit(Move(Motion(-148.25, 33.5, 0.31, 0.17)))
            records.sample(sample(turn))
        for each in (server, records, link):
            each.close()
    return late_s


def order_handover() -> Row:
    """An order to the link's thread, against the standard library's queue to a waiting thread."""
    clock = SystemClock()
    link = ThreadedLink(ScriptedDriver(clock), clock, poll_s=1.0)
    order = Move(Motion(-148.25, 33.5, 0.31, 0.17))
    queue = Queue[object]()
    reader = Thread(target=drain, args=(queue,), daemon=True)
    reader.start()
    ours_s, bare_s = alternately(lambda: link.submit(order), lambda: queue.put(order))
    queue.put(None)
    reader.join()
    link.close()
    return compared("an order handed to the link", median(ours_s), median(bare_s), 2.0)


def sample_handover() -> Row:
    """A sample to the records' thread, against the same queue with nobody waiting."""
    queue = Queue[object]()
    turn = sample()
    with TemporaryDirectory() as folder:
        records = RecordWriter(Path(folder) / "records.sqlite3", SystemClock())
        records.begin_contact(start(utc_s=UTC_S))
        ours_s, bare_s = alternately(lambda: records.sample(turn), lambda: queue.put(turn))
        records.close()
    return compared("a sample handed to the records", median(ours_s), median(bare_s), 2.0)


def stop() -> Row:
    """From the request on the socket to the halt handed to the driver; the limit is a time."""
    clock = SystemClock()
    driver = HaltTimes()
    link = ThreadedLink(driver, clock, poll_s=PERIOD_S / 2)
    taken_s = []
    with TemporaryDirectory() as folder:
        path = Path(folder) / "control.sock"
        server = ControlServer(path, {}, lambda _: link.emergency_halt(), clock)
        for _ in range(STOPS):
            link.release()
            link.newest()
            link.submit(Move(Motion(-148.25, 33.5, 0.31, 0.17)))
            driver.halted_s = None
            begin_s = time.perf_counter()
            ControlClient(path).emergency_stop()
            taken_s.append(driver.await_halt_s() - begin_s)
        server.close()
        link.close()
    figure = "stop asked for on the socket to halt in the driver, 99 %"
    ratio = p99(taken_s) / LONGEST_STOP_S
    return Row(figure, ms(p99(taken_s)), ms(LONGEST_STOP_S), ratio, 1.0, is_at_least=False)


class HaltTimes(ScriptedDriver):
    """Remembers when it was first told to halt."""

    def __init__(self) -> None:
        super().__init__(SystemClock())
        self.halted_s: float | None = None

    def await_halt_s(self) -> float:
        """When the halt came; waits for it."""
        while self.halted_s is None:
            time.sleep(0.0001)
        return self.halted_s

    def _halt(self) -> None:
        if self.halted_s is None:
            self.halted_s = time.perf_counter()


def alternately(
    ours: Callable[[], None], bare: Callable[[], None]
) -> tuple[list[float], list[float]]:
    """Time both in turn, at rest in between, as the control turn is."""
    ours_s, bare_s = list[float](), list[float]()
    for _ in range(HANDOVERS):
        for call, taken_s in ((ours, ours_s), (bare, bare_s)):
            time.sleep(0.0005)
            begin_s = time.perf_counter()
            call()
            taken_s.append(time.perf_counter() - begin_s)
    return ours_s, bare_s


def drain(queue: "Queue[object]") -> None:
    """Take until None comes."""
    while queue.get() is not None:
        pass


def p99(values: list[float]) -> float:
    """The 99th percentile."""
    return quantiles(values, n=100)[98]


def compared(figure: str, ours_s: float, bare_s: float, limit: float) -> Row:
    """A row of two times."""
    return Row(figure, ms(ours_s), ms(bare_s), ours_s / bare_s, limit, is_at_least=False)


def ms(seconds: float) -> str:
    """A time for the table."""
    return f"{1e3 * seconds:.3g} ms" if seconds >= 1e-4 else f"{1e6 * seconds:.3g} µs"
