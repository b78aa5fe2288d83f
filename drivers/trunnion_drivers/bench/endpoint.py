"""The near ends of the bench's wires: a pseudo-terminal, or a TCP port on this machine."""

import os
import pty
import socket
import tty
from contextlib import suppress
from pathlib import Path
from typing import Protocol

_CHUNK = 4096


class Endpoint(Protocol):
    """An open wire; what waits on it can be polled by its descriptor."""

    url: str

    def fileno(self) -> int:
        """The descriptor that becomes readable."""
        ...

    def receive(self) -> bytes:
        """What has come; empty when nothing has, or nobody is connected."""
        ...

    def send(self, data: bytes) -> None:
        """Send to whoever is connected; lost where nobody is."""
        ...

    def close(self) -> None:
        """Pull the plug."""
        ...


class PtyEndpoint:
    """A pseudo-terminal, under a name of its own where one is given."""

    def __init__(self, link: Path | None = None) -> None:
        self._near, self._far = pty.openpty()
        tty.setraw(self._far)
        os.set_blocking(self._near, False)
        self._link = link
        self.url = os.ttyname(self._far)
        if link is not None:
            link.unlink(missing_ok=True)
            link.symlink_to(self.url)
            self.url = str(link)

    def fileno(self) -> int:
        """The descriptor of the bench's side."""
        return self._near

    def receive(self) -> bytes:
        """What has come."""
        with suppress(BlockingIOError):
            return os.read(self._near, _CHUNK)
        return b""

    def send(self, data: bytes) -> None:
        """Send; lost where nobody reads and the buffer is full."""
        with suppress(BlockingIOError):
            os.write(self._near, data)

    def close(self) -> None:
        """Take the terminal away, as a pulled adapter goes."""
        if self._link is not None:
            self._link.unlink(missing_ok=True)
        os.close(self._near)
        os.close(self._far)


class TcpEndpoint:
    """A TCP port on the loopback interface, for one client at a time; the newest one counts."""

    def __init__(self, port: int = 0) -> None:
        self._server = socket.create_server(("127.0.0.1", port))
        self._server.settimeout(0)
        self._client: socket.socket | None = None
        self.port = int(self._server.getsockname()[1])
        self.url = f"socket://127.0.0.1:{self.port}"

    def fileno(self) -> int:
        """The descriptor that is waited for next: the client's, or the one that brings a client."""
        return (self._client or self._server).fileno()

    def receive(self) -> bytes:
        """What has come."""
        if self._client is None:
            self._accept()
            return b""
        try:
            data = self._client.recv(_CHUNK)
        except BlockingIOError:
            return b""
        except OSError:
            data = b""
        if not data:
            self._hang_up()
        return data

    def send(self, data: bytes) -> None:
        """Send to the client, if there is one."""
        if self._client is not None:
            with suppress(OSError):
                self._client.sendall(data)

    def close(self) -> None:
        """Hang up and listen no more."""
        self._hang_up()
        self._server.close()

    def _accept(self) -> None:
        with suppress(BlockingIOError):
            self._client, _ = self._server.accept()
            self._client.setsockopt(socket.IPPROTO_TCP, socket.TCP_NODELAY, 1)
            self._client.settimeout(0)

    def _hang_up(self) -> None:
        if self._client is not None:
            self._client.close()
            self._client = None
