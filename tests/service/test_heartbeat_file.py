"""The heartbeat from outside."""

import os
from pathlib import Path

import pytest

from trunnion.service.clock import VirtualClock
from trunnion.service.heartbeat_file import HeartbeatFile

NOW_S = 1_893_456_123.75


@pytest.fixture
def clock() -> VirtualClock:
    return VirtualClock(NOW_S, 41.5)


def beat(path: Path, utc_s: float) -> None:
    """Touch the file at this time."""
    path.touch()
    os.utime(path, (utc_s, utc_s))


def test_no_file_is_no_beat(tmp_path: Path, clock: VirtualClock) -> None:
    assert HeartbeatFile(tmp_path / "beat", clock).age_s() is None


def test_it_ages_from_the_last_change_on_the_monotonic_clock(
    tmp_path: Path, clock: VirtualClock
) -> None:
    path = tmp_path / "beat"
    heart = HeartbeatFile(path, clock)
    beat(path, NOW_S - 3.25)
    assert heart.age_s() == pytest.approx(3.25, abs=1e-3)
    clock.step_utc(-9000.0)
    clock.sleep(1.5)
    assert heart.age_s() == pytest.approx(4.75, abs=1e-3)
    beat(path, NOW_S + 77.0)
    assert heart.age_s() == 0.0
    clock.sleep(2.5)
    assert heart.age_s() == 2.5


def test_a_file_that_vanished_ages_on(tmp_path: Path, clock: VirtualClock) -> None:
    path = tmp_path / "beat"
    heart = HeartbeatFile(path, clock)
    beat(path, NOW_S)
    heart.age_s()
    path.unlink()
    clock.sleep(7.5)
    assert heart.age_s() == pytest.approx(7.5, abs=1e-3)


def test_a_file_from_the_future_is_no_younger_than_now(tmp_path: Path, clock: VirtualClock) -> None:
    path = tmp_path / "beat"
    beat(path, NOW_S + 500.0)
    assert HeartbeatFile(path, clock).age_s() == 0.0
