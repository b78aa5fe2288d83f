"""A lane outlives every mistake of those who talk on it."""

import socket
from collections.abc import Iterator
from pathlib import Path

import pytest

from trunnion.service.clock import SystemClock
from trunnion.service.control.lane import Lane
from trunnion.service.control.peer import Peer


class Talk:
    """Says back what it hears; fails on `fail`."""

    is_over = False

    def hear(self, data: bytes) -> bytes:
        if data == b"fail":
            raise ZeroDivisionError
        return data


class Reception:
    """Begins a talk with everybody but the first `refusals`."""

    def __init__(self) -> None:
        self.refusals = 0

    def __call__(self, peer: Peer) -> Talk:
        if self.refusals:
            self.refusals -= 1
            raise LookupError
        return Talk()


@pytest.fixture
def reception() -> Reception:
    return Reception()


@pytest.fixture
def path(tmp_path: Path, reception: Reception) -> Iterator[Path]:
    with socket.socket(socket.AF_UNIX) as listener:
        listener.bind(str(tmp_path / "lane"))
        listener.listen()
        listener.settimeout(0.0)
        lane = Lane("test", listener, reception, SystemClock())
        yield tmp_path / "lane"
        lane.close()


def said_back(path: Path, data: bytes) -> bytes:
    with socket.socket(socket.AF_UNIX) as connection:
        connection.settimeout(10.0)
        connection.connect(str(path))
        connection.sendall(data)
        return connection.recv(100)


def test_a_talk_that_fails_ends_alone(path: Path, caplog: pytest.LogCaptureFixture) -> None:
    with socket.socket(socket.AF_UNIX) as other:
        other.settimeout(10.0)
        other.connect(str(path))
        other.sendall(b"one")
        assert other.recv(100) == b"one"
        assert said_back(path, b"fail") == b""
        other.sendall(b"two")
        assert other.recv(100) == b"two"
    assert "a mistake of ours" in caplog.text


def test_a_lane_goes_on_after_a_mistake_of_its_own(
    path: Path, reception: Reception, caplog: pytest.LogCaptureFixture
) -> None:
    reception.refusals = 1
    with socket.socket(socket.AF_UNIX) as unlucky:
        unlucky.connect(str(path))
        assert said_back(path, b"still here") == b"still here"
    assert "and goes on" in caplog.text
