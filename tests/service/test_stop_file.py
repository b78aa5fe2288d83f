"""The emergency stop by a file."""

import time
from collections.abc import Iterator
from pathlib import Path
from threading import Event

import pytest

from trunnion.service.stop_file import StopFile


class Stops:
    """Notes what it is stopped for."""

    def __init__(self) -> None:
        self.causes: list[str] = []
        self.has_stopped = Event()

    def __call__(self, cause: str) -> None:
        self.causes.append(cause)
        self.has_stopped.set()


@pytest.fixture
def stops() -> Stops:
    return Stops()


@pytest.fixture
def watched(tmp_path: Path, stops: Stops) -> Iterator[StopFile]:
    (tmp_path / "share").mkdir()
    file = StopFile(tmp_path / "share" / "stop-here", stops)
    yield file
    file.close()


def test_nothing_is_asked_for_without_the_file(watched: StopFile, stops: Stops) -> None:
    watched.look()
    assert watched.asked() is None
    assert stops.causes == []


def test_its_appearance_is_a_stop_within_moments(
    tmp_path: Path, watched: StopFile, stops: Stops
) -> None:
    begin_s = time.monotonic()
    (tmp_path / "share" / "stop-here").touch()
    assert stops.has_stopped.wait(5.0)
    assert time.monotonic() - begin_s < 2.0
    assert "stop-here asks for it" in stops.causes[0]


def test_one_that_is_there_at_the_start_stops_before_anything_else(
    tmp_path: Path, stops: Stops
) -> None:
    (tmp_path / "stop-here").touch()
    StopFile(tmp_path / "stop-here", stops).close()
    assert len(stops.causes) >= 1


def test_it_asks_until_it_is_gone(tmp_path: Path, watched: StopFile) -> None:
    path = tmp_path / "share" / "stop-here"
    path.touch()
    assert watched.asked() is not None
    path.unlink()
    assert watched.asked() is None


def test_a_folder_or_a_link_to_nowhere_of_this_name_counts(
    tmp_path: Path, watched: StopFile
) -> None:
    path = tmp_path / "share" / "stop-here"
    path.symlink_to(tmp_path / "nowhere")
    assert watched.asked() is not None
    path.unlink()
    path.mkdir()
    assert watched.asked() is not None


def test_where_it_cannot_be_looked_for_it_counts_as_there(
    tmp_path: Path, watched: StopFile, stops: Stops
) -> None:
    (tmp_path / "share").rmdir()
    assert "is gone" in str(watched.asked())
    (tmp_path / "share").write_text("a file in the place of the folder")
    assert "cannot look for" in str(watched.asked())
    watched.look()
    assert stops.causes


def test_nobody_looks_after_the_end(tmp_path: Path, watched: StopFile, stops: Stops) -> None:
    watched.close()
    watched._thread.join(5.0)
    (tmp_path / "share" / "stop-here").touch()
    assert not watched._thread.is_alive()
    assert stops.causes == []
