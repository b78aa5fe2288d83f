"""The tools that drivers bring along, called as commands of the program."""

import shutil
from pathlib import Path

import pytest

from tests.cli.command import EXAMPLE, trunnion
from trunnion.files.station import load_station
from trunnion.safety.emergency import EmergencyStop
from trunnion.service.latch import EmergencyLatch
from trunnion.service.sole_daemon import sole_daemon

DIALECT = EXAMPLE / "dialects" / "reedmace.yaml"


def test_a_dialect_is_shown() -> None:
    told = trunnion("dialect", DIALECT, "--first", "-12.5")
    assert told.exit_code == 0
    assert "G-0012.500" in told.stdout


def test_a_tool_has_its_own_help() -> None:
    for tool in ("bench", "dialect", "commission"):
        told = trunnion(tool, "--help")
        assert told.exit_code == 0
        assert f"usage: trunnion {tool}" in told.stdout


@pytest.fixture
def station(tmp_path: Path) -> Path:
    shutil.copytree(EXAMPLE, tmp_path, dirs_exist_ok=True)
    return tmp_path / "station.yaml"


def test_a_mount_under_an_emergency_stop_is_not_commissioned(station: Path) -> None:
    latch = EmergencyLatch(load_station(station).files.latch)
    assert latch.write(EmergencyStop("somebody saw smoke", 1_796_083_217.3)) is None
    told = trunnion("commission", station)
    assert told.exit_code == 1
    assert "an emergency stop is in force (somebody saw smoke)" in told.stderr
    assert "CAUTION" not in told.stdout


def test_a_mount_that_a_daemon_has_is_not_commissioned(station: Path) -> None:
    with sole_daemon(load_station(station).files.latch):
        told = trunnion("commission", station)
    assert told.exit_code == 1
    assert "another daemon has this mount" in told.stderr
    assert "CAUTION" not in told.stdout


def test_what_a_tool_cannot_do_is_told(tmp_path: Path) -> None:
    told = trunnion("bench", tmp_path / "gone.yaml")
    assert told.exit_code == 1
    assert "No such file" in told.stderr
