"""A command's end of the control socket."""

import os
import socket
import struct
from collections.abc import Iterator
from contextlib import contextmanager
from itertools import count
from pathlib import Path
from typing import Any, Self

from trunnion.service.control.endpoint import stop_path
from trunnion.service.control.errors import ControlError, DaemonSilent, NoDaemon, RequestFailed
from trunnion.service.control.lines import LineBuffer, LineTooLong
from trunnion.service.control.protocol import (
    LONGEST_REPLY_BYTES,
    ProtocolError,
    Reply,
    Request,
    encode_request,
    parse_reply,
)
from trunnion.service.control.stop_conversation import WORD

_CHUNK_BYTES = 65536


class ControlClient:
    """Talks to the daemon that listens at this path; connects when there is something to say.

    Every call may raise NoDaemon (nobody listens), DaemonSilent (no answer in time), RequestFailed
    (the daemon's own answer) or another ControlError.
    """

    def __init__(self, path: Path, timeout_s: float = 5.0) -> None:
        self._path = path
        self._timeout_s = timeout_s
        self._numbers = count(1)
        self._connection: socket.socket | None = None
        self._lines = LineBuffer(LONGEST_REPLY_BYTES)

    def request(self, command: str, **arguments: object) -> dict[str, Any]:
        """Have the daemon fulfil one command; its result."""
        request = Request(next(self._numbers), command, arguments)
        try:
            reply = self._exchange(encode_request(request) + b"\n")
        except ControlError:
            self.close()
            raise
        if reply.error is not None:
            raise RequestFailed(*reply.error)
        if reply.result is None or reply.request_id != request.request_id:
            raise ControlError("expected the answer to this request, got another one")
        return reply.result

    def emergency_stop(self, cause: str = "") -> str:
        """Halt the mount by the lane that waits for nothing; the daemon's answer."""
        path = stop_path(self._path)
        with _connected(path, self._timeout_s) as connection, _told(path, self._timeout_s):
            connection.sendall(WORD + b" " + cause.replace("\n", " ").encode() + b"\n")
            return connection.recv(_CHUNK_BYTES).decode("utf-8", errors="replace").strip()

    def close(self) -> None:
        """Hang up; the next request connects anew."""
        if self._connection is not None:
            self._connection.close()
            self._connection = None
            self._lines = LineBuffer(LONGEST_REPLY_BYTES)

    def __enter__(self) -> Self:
        return self

    def __exit__(self, *_: object) -> None:
        self.close()

    def _exchange(self, line: bytes) -> Reply:
        if self._connection is None:
            self._connection = _connected(self._path, self._timeout_s)
        with _told(self._path, self._timeout_s):
            self._connection.sendall(line)
            return parse_reply(self._next_line(self._connection))

    def _next_line(self, connection: socket.socket) -> bytes:
        while (line := self._lines.next_line()) is None:
            data = connection.recv(_CHUNK_BYTES)
            if not data:
                raise DaemonSilent(f"the daemon at {self._path} hung up without an answer")
            self._lines.add(data)
        return line


@contextmanager
def _told(path: Path, timeout_s: float) -> Iterator[None]:
    """Turn what the socket raises into what a user can act on."""
    try:
        yield
    except TimeoutError as error:
        message = f"the daemon at {path} did not answer within {timeout_s:g} s"
        raise DaemonSilent(message) from error
    except OSError as error:
        message = f"the daemon at {path} hung up: {error.strerror or error}"
        raise DaemonSilent(message) from error
    except (ProtocolError, LineTooLong) as error:
        message = f"expected an answer of this program's daemon at {path}, got {error}"
        raise ControlError(message) from error


def _connected(path: Path, timeout_s: float) -> socket.socket:
    connection = socket.socket(socket.AF_UNIX, socket.SOCK_STREAM)
    try:
        # Only a blocking socket queues for a place at a busy daemon: connect(2), EAGAIN.
        connection.setsockopt(socket.SOL_SOCKET, socket.SO_SNDTIMEO, _timeval(timeout_s))
        connection.connect(os.fspath(path))
        connection.settimeout(timeout_s)
    except OSError as error:
        connection.close()
        raise _unreachable(path, error) from error
    return connection


def _unreachable(path: Path, error: OSError) -> ControlError:
    match error:
        case FileNotFoundError() | ConnectionRefusedError():
            return NoDaemon(f"no daemon is listening at {path}")
        case PermissionError():
            return ControlError(
                f"not permitted to talk to the daemon at {path}; is this user in its group?"
            )
        case BlockingIOError():
            return DaemonSilent(f"the daemon at {path} is too busy to take a request")
    return NoDaemon(f"cannot reach a daemon at {path}: {error.strerror or error}")


def _timeval(seconds: float) -> bytes:
    return struct.pack("@ll", int(seconds), int(seconds % 1.0 * 1e6))
