"""A plain TCP connection in place of a serial port: `socket://host:port`."""

import select
import socket
from urllib.parse import urlsplit

from trunnion_drivers.interface.errors import LinkLost
from trunnion_drivers.interface.values import Clock

_CONNECT_WITHIN_S = 2.0
_CHUNK = 4096


class TcpPort:
    """A connection that is opened and closed again and again; every error of it is a LinkLost."""

    def __init__(self, url: str, clock: Clock) -> None:
        parts = urlsplit(url)
        self._url = url
        self._address = (parts.hostname or "", parts.port or 0)
        self._clock = clock
        self._socket: socket.socket | None = None

    def open(self) -> None:
        """Connect. Raises LinkLost."""
        try:
            connection = socket.create_connection(self._address, _CONNECT_WITHIN_S)
        except OSError as error:
            raise LinkLost(f"{self._url}: expected a connection: {error}") from error
        connection.setsockopt(socket.IPPROTO_TCP, socket.TCP_NODELAY, 1)
        self._socket = connection

    def close(self) -> None:
        """Hang up."""
        connection, self._socket = self._socket, None
        if connection is not None:
            connection.close()

    def send(self, message: bytes) -> None:
        """Write the whole message. Raises LinkLost."""
        try:
            self._connected.sendall(message)
        except OSError as error:
            raise LinkLost(f"{self._url}: the connection broke: {error}") from error

    def drop_unsent(self) -> None:
        """What was sent cannot be taken back here."""

    def receive(self, until_s: float) -> bytes:
        """Whatever has come, waiting until this second at most. Raises LinkLost."""
        connection = self._connected
        wait_s = max(0.0, until_s - self._clock.monotonic_s())
        try:
            if not select.select([connection], [], [], wait_s)[0]:
                return b""
            come = connection.recv(_CHUNK)
        except OSError as error:
            raise LinkLost(f"{self._url}: the connection broke: {error}") from error
        if not come:
            raise LinkLost(f"{self._url}: the other side hung up")
        return come

    @property
    def stop_pressed(self) -> bool:
        """There is no stop input here."""
        return False

    def set_power(self, *, is_on: bool) -> None:
        """There is no power output here."""

    @property
    def _connected(self) -> socket.socket:
        if self._socket is None:
            raise LinkLost(f"{self._url}: not connected")
        return self._socket
