"""The running daemon, treated badly: full disk, frozen process, floods, storms of signals."""

import random
import resource
import signal
import socket
import subprocess
import threading
import time
from collections.abc import Iterator
from contextlib import suppress
from pathlib import Path

import pytest

from tests.end_to_end.station import Station
from trunnion.service.control.client import ControlClient
from trunnion.service.control.errors import RequestFailed
from trunnion.service.records.queries import Records
from trunnion.service.records.values import EventKind

FULL_AT_BYTES = 1000
"""Room for the latch and the simulator's memory, none for the records, which are larger already."""
SEED = 20261201


@pytest.fixture
def station(tmp_path: Path) -> Station:
    return Station(tmp_path)


@pytest.fixture
def daemon(station: Station) -> Iterator[subprocess.Popen[str]]:
    """The daemon, tracking."""
    running = station.run()
    try:
        station.wait_for_phase("tracking")
        yield running
    finally:
        running.kill()
        running.wait()


def ask(station: Station, command: str) -> None:
    with ControlClient(station.folder / "control.sock", timeout_s=20.0) as client:
        client.request(command)


def stop(station: Station) -> str:
    return ControlClient(station.folder / "control.sock", timeout_s=20.0).emergency_stop("abuse")


def events(station: Station, kind: EventKind) -> list[str]:
    with Records(station.folder / "records.sqlite3") as records:
        return [event.sentence for event in records.events(limit=1000) if event.kind is kind]


def test_on_a_full_disk_it_goes_on_pointing_and_says_so(
    station: Station, daemon: subprocess.Popen[str]
) -> None:
    unlimited = resource.prlimit(daemon.pid, resource.RLIMIT_FSIZE)
    resource.prlimit(daemon.pid, resource.RLIMIT_FSIZE, (FULL_AT_BYTES, unlimited[1]))
    troubled = station.wait_for(lambda status: bool(status["trouble"]))
    assert troubled["phase"] == "tracking"
    assert "records cannot be written" in troubled["trouble"][0]
    assert stop(station) == "stopped"
    station.wait_for_phase("halted")
    assert (station.folder / "emergency-stop.latch").exists()
    resource.prlimit(daemon.pid, resource.RLIMIT_FSIZE, unlimited)
    station.wait_for(lambda status: not status["trouble"])
    assert any("abuse" in sentence for sentence in events(station, EventKind.STOP))


def test_a_stop_that_no_disk_keeps_holds_and_is_said(
    station: Station, daemon: subprocess.Popen[str]
) -> None:
    (station.folder / "emergency-stop.latch.new").mkdir()
    assert stop(station) == "stopped"
    station.wait_for_phase("halted")
    assert "a restart would forget its cause" in station.log()
    with pytest.raises(RequestFailed, match="the emergency stop stays"):
        ask(station, "reset")
    assert station.status()["phase"] == "halted"


def test_a_process_that_was_frozen_halts_first_and_then_goes_on(
    station: Station, daemon: subprocess.Popen[str]
) -> None:
    daemon.send_signal(signal.SIGSTOP)
    time.sleep(1.2)
    daemon.send_signal(signal.SIGCONT)
    station.wait_for(lambda status: status["turns"]["missed"] >= 5)
    station.wait_for_phase("tracking")
    assert station.status()["emergency_stop"] is None
    assert any("late" in sentence for sentence in kept(station, EventKind.INTERVENTION))


def kept(station: Station, kind: EventKind) -> list[str]:
    """Events as soon as there are any of a kind: they are written a second later."""
    until_s = time.monotonic() + 20.0
    while not (found := events(station, kind)):
        assert time.monotonic() < until_s
        time.sleep(0.1)
    return found


def test_a_flood_on_both_sockets_neither_stops_the_turns_nor_delays_a_stop(
    station: Station, daemon: subprocess.Popen[str]
) -> None:
    is_over = threading.Event()
    floods = [
        threading.Thread(target=flood, args=(station.folder / name, is_over, SEED + number))
        for number, name in enumerate(("control.sock", "control.sock.stop"))
    ]
    for each in floods:
        each.start()
    try:
        time.sleep(3.0)
        assert station.wait_for_phase("tracking")["emergency_stop"] is None
        begin_s = time.monotonic()
        assert stop(station) == "stopped"
        assert time.monotonic() - begin_s < 5.0
        station.wait_for_phase("halted")
    finally:
        is_over.set()
        for each in floods:
            each.join()
    assert daemon.poll() is None
    assert "mistake of ours" not in station.log()
    assert len(list(Path(f"/proc/{daemon.pid}/fd").iterdir())) < 100


def flood(path: Path, is_over: threading.Event, seed: int) -> None:
    """Connect again and again, say garbage or nothing, hang up late."""
    chance = random.Random(seed)
    held: list[socket.socket] = []
    while not is_over.is_set():
        connection = socket.socket(socket.AF_UNIX)
        connection.settimeout(1.0)
        held.append(connection)
        with suppress(OSError):
            connection.connect(str(path))
            garbage = chance.randbytes(chance.choice((0, 1, 10, 5000)))
            connection.sendall(garbage.replace(b"s", b"?"))
        if len(held) > 60:
            held.pop(0).close()
    for connection in held:
        connection.close()


def test_a_storm_of_signals_ends_in_a_stop_that_can_be_reset(
    station: Station, daemon: subprocess.Popen[str]
) -> None:
    chance = random.Random(SEED)
    for number in range(600):
        daemon.send_signal(chance.choice((signal.SIGUSR1, signal.SIGHUP)))
        if number % 50 == 0:
            ask(station, "reset")
        time.sleep(0.001)
    daemon.send_signal(signal.SIGUSR1)
    station.wait_for_phase("halted")
    ask(station, "reset")
    ask(station, "resume")
    station.wait_for_phase("tracking")


def test_a_flood_of_stops_and_resets_ends_in_the_stop_that_came_last(
    station: Station, daemon: subprocess.Popen[str]
) -> None:
    is_over = threading.Event()
    crowd = [
        threading.Thread(target=press, args=(station, is_over, SEED + number))
        for number in range(6)
    ]
    for each in crowd:
        each.start()
    time.sleep(2.0)
    is_over.set()
    for each in crowd:
        each.join()
    assert stop(station) == "stopped"
    place = station.wait_for_phase("halted")["mount"]["reading_deg"]
    assert (station.folder / "emergency-stop.latch").exists()
    with pytest.raises(RequestFailed, match="emergency stop is in force"):
        ask(station, "resume")
    assert station.wait_for_phase("halted")["mount"]["reading_deg"] == pytest.approx(place, abs=0.1)
    ask(station, "reset")
    station.wait_for_phase("holding")
    assert not (station.folder / "emergency-stop.latch").exists()
    assert daemon.poll() is None
    assert "mistake of ours" not in station.log()


def press(station: Station, is_over: threading.Event, seed: int) -> None:
    """Stop and reset in any order, as fast as answers come."""
    chance = random.Random(seed)
    while not is_over.is_set():
        if chance.random() < 0.5:
            stop(station)
        else:
            ask(station, "reset")


def test_a_station_file_that_is_weakened_while_stopped_lifts_nothing(
    station: Station, daemon: subprocess.Popen[str]
) -> None:
    assert stop(station) == "stopped"
    station.wait_for_phase("halted")
    text = station.file.read_text()
    for strict, weak in (
        ("elevation_floor_deg: 5", "elevation_floor_deg: 0"),
        ("deg: 1 ", "deg: 25 "),
    ):
        assert strict in text
        text = text.replace(strict, weak, 1)
    station.file.write_text(text)
    ask(station, "reload")
    station.wait_for(lambda status: not status["is_planning"])
    stopped = station.wait_for_phase("halted")
    assert "abuse" in stopped["emergency_stop"]["cause"]
    daemon.kill()
    daemon.wait()
    again = station.run()
    try:
        stopped = station.wait_for_phase("halted")
        assert "abuse" in stopped["emergency_stop"]["cause"]
        assert stopped["mount"]["order_deg"] is None
    finally:
        again.kill()
        again.wait()


def test_killed_again_and_again_it_leaves_readable_records_and_takes_the_contact_up(
    station: Station, daemon: subprocess.Popen[str]
) -> None:
    chance = random.Random(SEED)
    running = daemon
    for _ in range(4):
        time.sleep(chance.random())
        running.kill()
        running.wait()
        with Records(station.folder / "records.sqlite3") as records:
            assert records.contacts()
        running = station.run()
        station.wait_for(lambda status: status["mount"]["reading_deg"] is not None)
    try:
        station.wait_for_phase("tracking")
    finally:
        running.kill()
        running.wait()
