"""An emergency stop of the real daemon at work: from the request on the socket to the halt.

`trunnion run` tracks at 10 Hz and records, programs ask for its status, and its plan is replaced
again and again, so that its planning child is at work. A stop is lifted before the next; every so
often the daemon is sent back to tracking before. Between the stops a bare process, which does
nothing but answer on a socket, is asked for the time: that is what this machine can do under this
load, with whatever else is running on it.
"""

import os
import re
import socket
import subprocess
import sys
import time
from collections.abc import Iterator
from contextlib import ExitStack, contextmanager, suppress
from pathlib import Path
from random import Random
from tempfile import TemporaryDirectory
from threading import Event, Thread
from typing import Any, NamedTuple

from tests.bench.bench_service import LONGEST_STOP_S, ms, p99
from tests.bench.row import Row
from tests.bench.telling_mount import KIND, WIRE, Ear, announce
from tests.end_to_end.station import Station
from trunnion.service.control.client import ControlClient
from trunnion.sky.instants import format_utc

STOPS = 1000
TRACKING_EVERY = 8
ASKING_EVERY_S = 0.05
CLIENTS = 3
REPLACED_EVERY_S = 2.5
ROOT = Path(__file__).parents[2]
UNIT = ROOT / "systemd" / "trunnion@.service"
ASKING = (
    "import sys, time\n"
    "from pathlib import Path\n"
    "from trunnion.service.control.client import ControlClient\n"
    "client = ControlClient(Path(sys.argv[1]))\n"
    "while True:\n"
    "    client.request('status')\n"
    "    time.sleep(float(sys.argv[2]))\n"
)


BARE = (
    "import socket, struct, sys, time\n"
    "listener = socket.socket(socket.AF_UNIX)\n"
    "listener.bind(sys.argv[1])\n"
    "listener.listen()\n"
    "while True:\n"
    "    talk, _ = listener.accept()\n"
    "    talk.recv(64)\n"
    "    talk.send(struct.pack('<?d', True, time.monotonic()))\n"
    "    talk.close()\n"
)


class Taken(NamedTuple):
    """Seconds that the stops took: all, those that found the mount tracking, the bare answers."""

    all_s: list[float]
    tracking_s: list[float]
    bare_s: list[float]


def rows() -> list[Row]:
    """Stop it a thousand times."""
    with TemporaryDirectory() as name, ExitStack() as held:
        folder = Path(name)
        ear = Ear(folder / "ear")
        held.callback(ear.close)
        station = loaded_station(folder)
        with at_the_units_niceness():
            daemon = station.run(PYTHONPATH=os.pathsep.join((name, str(ROOT))))
            bare = python(BARE, folder / "bare")
        held.callback(end, daemon)
        held.callback(end, bare)
        station.wait_for_phase("tracking")
        for _ in range(CLIENTS):
            held.callback(end, python(ASKING, folder / "control.sock", ASKING_EVERY_S))
        is_over = Event()
        replacing = Thread(target=replace_the_plan, args=(station, is_over))
        replacing.start()
        held.callback(replacing.join)
        held.callback(is_over.set)
        taken = stops(station, ear, folder / "bare")
    load = f"recording, {CLIENTS} askers, planning"
    return [
        at_most(
            f"{STOPS} stops of run at work ({load}), socket to driver, 99 %; "
            f"bare answer {ms(p99(taken.bare_s))}",
            taken.all_s,
        ),
        at_most(f"the {len(taken.tracking_s)} of them in mid-track", taken.tracking_s),
    ]


@contextmanager
def at_the_units_niceness() -> Iterator[None]:
    """Have what is started meanwhile go first, as the service's unit has it; where we may."""
    found = re.search(r"^Nice=(-\d+)$", UNIT.read_text(), re.MULTILINE)
    assert found is not None
    before = os.getpriority(os.PRIO_PROCESS, 0)
    with suppress(PermissionError):
        os.setpriority(os.PRIO_PROCESS, 0, int(found[1]))
    try:
        yield
    finally:
        os.setpriority(os.PRIO_PROCESS, 0, before)


def stops(station: Station, ear: Ear, bare: Path) -> Taken:
    """Stop, ask the bare process, reset; again and again, at odd moments."""
    chance, taken = Random(5), Taken([], [], [])
    with ControlClient(station.folder / "control.sock", timeout_s=30.0) as client:
        for number in range(STOPS):
            is_tracking = number % TRACKING_EVERY == 0
            if is_tracking:
                client.request("resume")
                ear.next_s(is_halt=False, after_s=time.monotonic())
            time.sleep(chance.uniform(0.0, 0.05))
            begin_s = time.monotonic()
            client.emergency_stop()
            taken.all_s.append(ear.next_s(is_halt=True, after_s=begin_s) - begin_s)
            if is_tracking:
                taken.tracking_s.append(taken.all_s[-1])
            time.sleep(chance.uniform(0.0, 0.05))
            taken.bare_s.append(bare_answer_s(bare))
            client.request("reset")
    return taken


def bare_answer_s(path: Path) -> float:
    """How long a request takes to a process that has nothing else to do."""
    begin_s = time.monotonic()
    with socket.socket(socket.AF_UNIX) as talk:
        talk.connect(str(path))
        talk.sendall(b"stop\n")
        _, answered_s = WIRE.unpack(talk.recv(WIRE.size))
    return float(answered_s) - begin_s


def loaded_station(folder: Path) -> Station:
    """The example station on the telling mount, with a long plan."""
    announce(folder)
    station = Station(folder)
    text = station.file.read_text()
    kind = "kind: simulator\n"
    assert kind in text
    station.file.write_text(text.replace(kind, f"kind: {KIND}\n  ear: {folder / 'ear'}\n"))
    write_plan(station, 0)
    return station


def write_plan(station: Station, number: int) -> None:
    """A contact that is on, and a day of passes; another one each time, put in its place whole."""
    now_s = time.time()
    station.plan(begin_in_s=-5.0, length_s=1800.0)
    plan = station.folder / "plan.yaml"
    lines = [plan.read_text()]
    for hour in range(1, 24):
        begin_s = now_s + 3600.0 * hour
        lines.append(
            f"  - id: later-{number}-{hour}\n    target: LANTERN-G\n"
            f"    from: {format_utc(begin_s)}\n    until: {format_utc(begin_s + 3000.0)}\n"
        )
    draft = plan.with_suffix(".draft")
    draft.write_text("".join(lines))
    draft.replace(plan)


def replace_the_plan(station: Station, is_over: Event) -> None:
    """Put another plan in the place of the one before, until it is over."""
    number = 1
    while not is_over.wait(REPLACED_EVERY_S):
        write_plan(station, number)
        number += 1


def python(code: str, *arguments: object) -> "subprocess.Popen[bytes]":
    """A program beside the daemon."""
    return subprocess.Popen([sys.executable, "-c", code, *map(str, arguments)])


def end(process: "subprocess.Popen[Any]") -> None:
    """Have a program end, and wait for it."""
    process.terminate()
    process.wait(timeout=30)


def at_most(figure: str, taken_s: list[float]) -> Row:
    """A row of a time against the longest one that is allowed."""
    ratio = p99(taken_s) / LONGEST_STOP_S
    return Row(figure, ms(p99(taken_s)), ms(LONGEST_STOP_S), ratio, 1.0, is_at_least=False)
