"""Drivers by name, and what is wrong with their settings told by file and line."""

from pathlib import Path

import pytest

from tests.service.stations import station_with
from trunnion.files.problems import FileProblems
from trunnion.service.clock import VirtualClock
from trunnion.service.drivers import build_driver, build_simulator, mount_facts

CLOCK = VirtualClock(1_796_083_217.3)


def test_the_simulator_is_found_by_its_name(tmp_path: Path) -> None:
    driver = build_driver(station_with(tmp_path), CLOCK)
    driver.open()
    reading = driver.read()
    driver.close()
    assert (reading.first_deg, reading.second_deg) == pytest.approx((0.0, 88.0), abs=0.01)


def test_an_unknown_driver_is_told_with_line_and_suggestion(tmp_path: Path) -> None:
    station = station_with(tmp_path, {"kind: simulator": "kind: simulater"})
    with pytest.raises(FileProblems) as caught:
        build_driver(station, CLOCK)
    (problem,) = caught.value.problems
    assert problem.line is not None
    assert problem.key == "driver.kind"
    assert "did you mean 'simulator'?" in problem.message


def test_bad_settings_of_a_driver_are_told_all_at_once_with_lines(tmp_path: Path) -> None:
    station = station_with(
        tmp_path, {"kind: simulator": "kind: simulator\n  seed: 1.5\n  backslash_deg: 2"}
    )
    with pytest.raises(FileProblems) as caught:
        build_driver(station, CLOCK)
    assert [each.key for each in caught.value.problems] == [
        "driver.seed",
        "driver.backslash_deg",
    ]
    lines = [each.line for each in caught.value.problems]
    assert lines[0] is not None
    assert lines[1] == lines[0] + 1


def test_a_rehearsal_does_not_touch_the_memory_of_the_mount(tmp_path: Path) -> None:
    station = station_with(tmp_path, {"kind: simulator": "kind: simulator\n  memory: mount.txt"})
    driver = build_simulator(station, CLOCK)
    driver.open()
    driver.read()
    driver.close()
    assert not (tmp_path / "mount.txt").exists()


def test_the_facts_of_the_mount_are_those_of_the_station(tmp_path: Path) -> None:
    facts = mount_facts(station_with(tmp_path))
    assert (facts.first.lower_deg, facts.first.upper_deg) == (-270.0, 270.0)
    assert (facts.second.rate_deg_s, facts.second.acceleration_deg_s2) == (4.0, 3.0)
    assert (facts.stow_first_deg, facts.stow_second_deg) == (0.0, 88.0)
    assert facts.folder == tmp_path
