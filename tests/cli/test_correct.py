"""`trunnion correct` against the daemon's own end of the socket."""

from collections.abc import Iterator, Mapping
from dataclasses import dataclass, field
from pathlib import Path

import pytest

from tests.cli.command import trunnion
from trunnion.service.clock import SystemClock
from trunnion.service.control.server import ControlServer


@dataclass
class Daemon:
    station: Path
    asked: list[Mapping[str, object]] = field(default_factory=list)

    def correct(self, arguments: Mapping[str, object]) -> Mapping[str, object]:
        self.asked.append(arguments)
        return {}


@pytest.fixture
def daemon(tmp_path: Path) -> Iterator[Daemon]:
    station = tmp_path / "station.yaml"
    station.write_text("files: {control_socket: c.sock}\n")
    daemon = Daemon(station)
    handlers = {"correct": daemon.correct}
    server = ControlServer(tmp_path / "c.sock", handlers, lambda _: None, SystemClock())
    yield daemon
    server.close()


def test_what_is_asked_for_reaches_the_daemon(daemon: Daemon) -> None:
    told = trunnion("correct", daemon.station, "--time-bias", "-1.25", "--azimuth", "0.3", "--keep")
    assert told.exit_code == 0
    assert daemon.asked == [{"time_bias_s": -1.25, "azimuth_deg": 0.3, "keep": True}]


def test_clearing_is_passed_on(daemon: Daemon) -> None:
    assert trunnion("correct", daemon.station, "--clear").exit_code == 0
    assert daemon.asked == [{"clear": True}]


@pytest.mark.parametrize(
    "options",
    [
        (),
        ("--keep",),
        ("--clear", "--keep"),
        ("--clear", "--along", "0.2"),
        ("--time-bias", "301"),
        ("--elevation", "-10.5"),
        ("--across", "nan"),
    ],
)
def test_what_makes_no_sense_is_refused_at_once(daemon: Daemon, options: tuple[str, ...]) -> None:
    assert trunnion("correct", daemon.station, *options).exit_code == 2
    assert daemon.asked == []
