"""The daemon's parts, put together: in which order, and what is left when one is refused."""

from contextlib import ExitStack
from pathlib import Path

import pytest

from tests.service.stations import write_station
from trunnion.files.problems import FileProblems
from trunnion.pilot.phase import Wish
from trunnion.service.assembly import Paths, assemble
from trunnion.service.clock import SystemClock
from trunnion.service.control.client import ControlClient
from trunnion.service.control.errors import SocketInUse
from trunnion.service.link.status import LinkState
from trunnion.service.notify import Notifier
from trunnion.service.parts import Parts
from trunnion.service.records.queries import Records
from trunnion.service.records.values import EventKind
from trunnion.service.sole_daemon import MountInUse


def assembled(station: Path, held: ExitStack) -> Parts:
    return assemble(Paths(station, None), SystemClock(), Notifier(None), held)


def test_before_the_first_turn_it_answers_and_takes_a_stop(tmp_path: Path) -> None:
    with ExitStack() as held:
        parts = assembled(write_station(tmp_path), held)
        with ControlClient(tmp_path / "control.sock") as client:
            assert client.request("status")["phase"] == "starting"
            assert client.request("hold")["wish"] == "hold"
            assert client.emergency_stop("a goat") == "stopped"
        assert parts.keeping.wish.wish is Wish.HOLD
        stop = parts.keeping.desk.latched
        assert stop is not None
        assert "a goat" in stop.cause
        assert (tmp_path / "emergency-stop.latch").exists()
    assert not list(tmp_path.glob("control.sock*[!k]"))  # but for the lock
    assert parts.turning.link.status.state is LinkState.CLOSED
    with Records(tmp_path / "records.sqlite3") as records:
        (event,) = (each for each in records.events() if each.kind is EventKind.STOP)
    assert "a goat" in event.sentence


def test_a_station_that_is_refused_leaves_nothing_behind(tmp_path: Path) -> None:
    station = write_station(tmp_path)
    (tmp_path / "horizon.txt").write_text("370 12\n")
    before = set(tmp_path.iterdir())
    with pytest.raises(FileProblems), ExitStack() as held:
        assembled(station, held)
    assert set(tmp_path.iterdir()) == before


def test_a_mount_that_another_daemon_has_is_not_touched(tmp_path: Path) -> None:
    station = write_station(tmp_path)
    other = tmp_path / "other.yaml"
    other.write_text(station.read_text().replace("socket: control.sock", "socket: other.sock"))
    with ExitStack() as held:
        assembled(station, held)
        with pytest.raises(SocketInUse), ExitStack() as second:
            assembled(station, second)
        with pytest.raises(MountInUse), ExitStack() as second:
            assembled(other, second)
        assert not (tmp_path / "other.sock").exists()


def test_a_stop_file_that_is_there_stops_before_the_first_turn(tmp_path: Path) -> None:
    station = write_station(tmp_path, {"stop_request: null": "stop_request: stop-here"})
    (tmp_path / "stop-here").touch()
    with ExitStack() as held:
        desk = assembled(station, held).keeping.desk
        assert desk.latched is not None
        assert "stop-here" in desk.latched.cause
