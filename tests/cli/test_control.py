"""The commands that talk to a running daemon, against the daemon's own end of the socket."""

import json
from collections.abc import Iterator, Mapping
from dataclasses import dataclass, field
from pathlib import Path

import pytest

from tests.cli.command import trunnion
from trunnion.service.clock import SystemClock
from trunnion.service.control.server import ControlServer
from trunnion.service.errors import ServiceError

STATUS: dict[str, object] = {
    "state": "tracking",
    "emergency_stop": None,
    "may_transmit": True,
    "interventions": ["floor", "mask"],
    "joints": {"first_deg": -47.25, "second_deg": 31.5},
}


@dataclass
class Daemon:
    """What was asked of it, and where it listens."""

    station: Path
    asked: list[str] = field(default_factory=list)

    def answer(self, command: str, result: Mapping[str, object]) -> Mapping[str, object]:
        self.asked.append(command)
        return result

    def refuse(self, _: Mapping[str, object]) -> Mapping[str, object]:
        raise ServiceError("the emergency stop stays: the button is still pressed")


@pytest.fixture
def daemon(tmp_path: Path) -> Iterator[Daemon]:
    station = tmp_path / "station.yaml"
    station.write_text("files: {control_socket: c.sock}\n")
    daemon = Daemon(station)
    handlers = {
        "status": lambda _: daemon.answer("status", STATUS),
        "stow": lambda _: daemon.answer("stow", {}),
        "resume": lambda _: daemon.answer("resume", {}),
        "reset": daemon.refuse,
    }
    server = ControlServer(tmp_path / "c.sock", handlers, daemon.asked.append, SystemClock())
    yield daemon
    server.close()


def test_status_prints_what_the_daemon_tells(daemon: Daemon) -> None:
    told = trunnion("status", daemon.station)
    assert told.exit_code == 0
    assert "-47.25" in told.stdout
    assert ["state", "tracking"] in [line.split() for line in told.stdout.splitlines()]
    assert "joints: first [°]" in told.stdout
    assert "floor; mask" in told.stdout


def test_status_as_json_is_the_daemons_own_answer(daemon: Daemon) -> None:
    assert json.loads(trunnion("status", daemon.station, "--json").stdout) == STATUS


def test_stop_takes_its_own_lane_and_brings_the_cause(daemon: Daemon) -> None:
    told = trunnion("stop", daemon.station, "--cause", "smoke from the drive")
    assert (told.exit_code, told.stdout) == (0, "stopped\n")
    assert daemon.asked[0].endswith("smoke from the drive")


def test_the_socket_itself_serves_as_well_as_the_station_file(daemon: Daemon) -> None:
    assert trunnion("stow", daemon.station.with_name("c.sock")).exit_code == 0
    assert trunnion("resume", daemon.station).exit_code == 0
    assert daemon.asked == ["stow", "resume"]


def test_a_refusal_is_told_and_fails(daemon: Daemon) -> None:
    told = trunnion("reset", daemon.station)
    assert (told.exit_code, told.stdout) == (1, "")
    assert told.stderr == "the emergency stop stays: the button is still pressed\n"


def test_a_stop_that_reaches_nobody_points_to_the_hardware(tmp_path: Path) -> None:
    station = tmp_path / "station.yaml"
    station.write_text("")
    told = trunnion("stop", station)
    assert told.exit_code == 1
    reason, caution = told.stderr.splitlines()
    assert reason.startswith(f"NOT stopped: no daemon is listening at {tmp_path}/control.sock")
    assert "hardware emergency stop" in caution


def test_a_stop_without_a_station_file_points_to_the_hardware_as_well(tmp_path: Path) -> None:
    told = trunnion("stop", tmp_path / "gone.yaml")
    assert told.exit_code == 1
    assert told.stderr.startswith(f"NOT stopped: {tmp_path}/gone.yaml: no such file")
    assert "hardware emergency stop" in told.stderr
