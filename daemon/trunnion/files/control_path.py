"""Where a station's daemon listens: told even by a station file that is otherwise broken.

The daemon runs with the file as it was at its start. An edit since then, a mistake among it, must
not stand between an operator and an emergency stop.
"""

from pathlib import Path

from trunnion.files.problems import FileProblems
from trunnion.files.yaml_text import read_yaml

DEFAULT_CONTROL_SOCKET = "control.sock"


def control_socket_of(path: Path) -> Path:
    """Return the control socket for a station file, or the path itself where it is a socket.

    Raises FileProblems where there is no such file.
    """
    if path.is_socket():
        return path
    return path.absolute().parent / (_named_in(path) or DEFAULT_CONTROL_SOCKET)


def _named_in(station: Path) -> str | None:
    try:
        value = read_yaml(station).value
    except FileProblems:
        if station.is_file():
            return None
        raise
    files = value.get("files") if isinstance(value, dict) else None
    named = files.get("control_socket") if isinstance(files, dict) else None
    return named if isinstance(named, str) else None
