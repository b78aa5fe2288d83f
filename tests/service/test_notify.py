"""What the service manager is told."""

import os
import socket
from collections.abc import Iterator
from pathlib import Path

import pytest

from trunnion.mount.joints import Reading
from trunnion.service.notify import Notifier, Watchdog, watchdog_timeout_s


@pytest.fixture
def manager() -> Iterator[socket.socket]:
    with socket.socket(socket.AF_UNIX, socket.SOCK_DGRAM) as listening:
        listening.settimeout(10.0)
        yield listening


def told_over(manager: socket.socket, address: str) -> list[bytes]:
    notifier = Notifier.from_environment({"NOTIFY_SOCKET": address})
    notifier.ready()
    notifier.status("tracking\nA-17")
    notifier.alive()
    notifier.stopping()
    notifier.close()
    notifier.ready()
    return [manager.recv(4096) for _ in range(4)]


EVERYTHING = [b"READY=1", b"STATUS=tracking A-17", b"WATCHDOG=1", b"STOPPING=1"]


def test_a_socket_in_the_file_system_is_told(manager: socket.socket, tmp_path: Path) -> None:
    manager.bind(str(tmp_path / "notify"))
    assert told_over(manager, str(tmp_path / "notify")) == EVERYTHING


def test_an_abstract_socket_is_told(manager: socket.socket) -> None:
    name = f"trunnion-test-{os.getpid()}"
    manager.bind("\0" + name)
    assert told_over(manager, "@" + name) == EVERYTHING


@pytest.mark.parametrize("environment", [{}, {"NOTIFY_SOCKET": "/nowhere/at/all"}])
def test_without_a_manager_nothing_happens(environment: dict[str, str]) -> None:
    notifier = Notifier.from_environment(environment)
    notifier.ready()
    notifier.close()


class Feeds:
    """Counts how often the watchdog was fed."""

    def __init__(self) -> None:
        self.count = 0

    def alive(self) -> None:
        self.count += 1


@pytest.mark.parametrize(
    ("reading", "fed"),
    [
        (None, 0),
        (Reading(taken_s=97.0, first_deg=211.7, second_deg=33.1), 0),
        (Reading(taken_s=99.6, first_deg=211.7, second_deg=33.1), 1),
    ],
)
def test_only_a_fresh_reading_feeds(reading: Reading | None, fed: int) -> None:
    feeds = Feeds()
    Watchdog(feeds, longest_age_s=1.0, timeout_s=8.0).turn_completed(100.1, reading)
    assert feeds.count == fed


def test_it_is_fed_a_few_times_in_a_timeout_and_not_every_turn() -> None:
    feeds = Feeds()
    watchdog = Watchdog(feeds, longest_age_s=1.0, timeout_s=8.0)
    for turn in range(81):
        mono_s = 50.3 + 0.125 * turn
        watchdog.turn_completed(mono_s, Reading(mono_s - 0.05, 211.7, 33.1))
    assert feeds.count == 6


@pytest.mark.parametrize(
    ("environment", "timeout_s"),
    [
        ({}, None),
        ({"WATCHDOG_USEC": "15000000"}, 15.0),
        ({"WATCHDOG_USEC": "15000000", "WATCHDOG_PID": str(os.getpid())}, 15.0),
        ({"WATCHDOG_USEC": "15000000", "WATCHDOG_PID": "1"}, None),
        ({"WATCHDOG_USEC": "soon"}, None),
        ({"WATCHDOG_USEC": "0"}, None),
    ],
)
def test_the_timeout_is_the_manager_s(environment: dict[str, str], timeout_s: float | None) -> None:
    assert watchdog_timeout_s(environment) == timeout_s
