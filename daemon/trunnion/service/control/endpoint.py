"""Sockets in the file system: taken over from the dead, never from the living."""

import fcntl
import os
import socket
import stat
from collections.abc import Iterator
from contextlib import ExitStack, contextmanager, suppress
from pathlib import Path

from trunnion.service.control.errors import SocketInUse, SocketUnusable

_OURS_AND_OUR_GROUPS = 0o660
_PRIVATE_FOLDER = 0o750
_LONGEST_PATH_BYTES = 107  # sun_path of unix(7), less the byte that ends it
_BACKLOG = 64


def stop_path(control_path: Path) -> Path:
    """Where the stop lane of this control socket listens."""
    return control_path.with_name(control_path.name + ".stop")


@contextmanager
def listening(control_path: Path) -> Iterator[tuple[socket.socket, socket.socket]]:
    """Listen for requests and for stops, until the context ends; then both paths are gone.

    A lock on a file beside the socket, which the kernel lifts when its holder dies, tells a living
    daemon from a dead one. Raises SocketInUse and SocketUnusable.
    """
    with ExitStack() as held:
        try:
            _prepare_folder(control_path.parent)
            held.enter_context(_lock(control_path))
            requests = held.enter_context(_bound(control_path))
            stops = held.enter_context(_bound(stop_path(control_path)))
        except OSError as error:
            reason = error.strerror or str(error)
            raise SocketUnusable(f"cannot listen at {control_path}: {reason}") from error
        yield requests, stops


def _prepare_folder(folder: Path) -> None:
    folder.mkdir(_PRIVATE_FOLDER, parents=True, exist_ok=True)
    mode = folder.stat().st_mode
    if mode & stat.S_IWOTH and not mode & stat.S_ISVTX:
        raise SocketUnusable(
            f"cannot listen in {folder}: expected a folder that not everybody may write to"
        )


@contextmanager
def _lock(control_path: Path) -> Iterator[None]:
    lock_path = control_path.with_name(control_path.name + ".lock")
    with os.fdopen(os.open(lock_path, os.O_RDWR | os.O_CREAT | os.O_CLOEXEC, 0o600), "wb") as lock:
        try:
            fcntl.flock(lock, fcntl.LOCK_EX | fcntl.LOCK_NB)
        except BlockingIOError:
            raise SocketInUse(f"another daemon is listening at {control_path}") from None
        yield


@contextmanager
def _bound(path: Path) -> Iterator[socket.socket]:
    length = len(os.fsencode(path))
    if length > _LONGEST_PATH_BYTES:
        message = f"expected a socket path of at most {_LONGEST_PATH_BYTES} bytes, got {length}"
        raise SocketUnusable(f"{message}: {path}")
    _remove_dead(path)
    with socket.socket(socket.AF_UNIX, socket.SOCK_STREAM) as listener:
        os.fchmod(listener.fileno(), 0o600)  # for the moment between bind and chmod
        listener.bind(os.fspath(path))
        try:
            path.chmod(_OURS_AND_OUR_GROUPS)
            listener.listen(_BACKLOG)
            listener.settimeout(0.0)
            yield listener
        finally:
            with suppress(OSError):
                path.unlink(missing_ok=True)


def _remove_dead(path: Path) -> None:
    try:
        mode = path.lstat().st_mode
    except FileNotFoundError:
        return
    if not stat.S_ISSOCK(mode):
        raise SocketUnusable(f"cannot listen at {path}: expected a socket or nothing, got a file")
    with (
        socket.socket(socket.AF_UNIX, socket.SOCK_STREAM) as probe,
        suppress(ConnectionRefusedError),
    ):
        probe.settimeout(1.0)
        probe.connect(os.fspath(path))
        raise SocketInUse(f"another program is listening at {path}")
    path.unlink()
