import socket
from pathlib import Path

import pytest

from tests.files.station_text import RIGHT, written
from trunnion.files.control_path import control_socket_of
from trunnion.files.problems import FileProblems
from trunnion.files.station import load_station


@pytest.mark.parametrize("section", ["", "files: {control_socket: run/c.sock}\n"])
def test_it_is_the_socket_that_the_station_file_names(tmp_path: Path, section: str) -> None:
    file = written(tmp_path, RIGHT + section)
    assert control_socket_of(file) == load_station(file).files.control_socket


@pytest.mark.parametrize(
    ("text", "name"),
    [
        ("files: {control_socket: c.sock}\nmount: nonsense\n", "c.sock"),
        ("files: {control_socket: 17}\n", "control.sock"),
        ("files: [\n", "control.sock"),
        ("", "control.sock"),
    ],
)
def test_a_broken_station_file_still_tells_it(tmp_path: Path, text: str, name: str) -> None:
    assert control_socket_of(written(tmp_path, text)) == tmp_path / name


def test_a_socket_is_taken_as_it_is(tmp_path: Path) -> None:
    path = tmp_path / "c.sock"
    with socket.socket(socket.AF_UNIX) as listener:
        listener.bind(str(path))
        assert control_socket_of(path) == path


def test_a_file_that_is_not_there_is_told(tmp_path: Path) -> None:
    with pytest.raises(FileProblems, match="no such file"):
        control_socket_of(tmp_path / "gone.yaml")
