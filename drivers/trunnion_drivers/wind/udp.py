"""Datagrams that come to a port of this machine."""

import select
import socket

from trunnion_drivers.interface.errors import LinkLost
from trunnion_drivers.interface.values import Clock

_CHUNK = 4096


class UdpPort:
    """Listens on one address; port 10110 is the one registered for NMEA 0183."""

    def __init__(self, address: str, port: int, clock: Clock) -> None:
        self._address = (address, port)
        self._clock = clock
        self._socket: socket.socket | None = None

    def open(self) -> None:
        """Listen. Raises LinkLost."""
        listening = socket.socket(socket.AF_INET, socket.SOCK_DGRAM)
        try:
            listening.bind(self._address)
        except OSError as error:
            listening.close()
            raise LinkLost(f"udp port {self._address}: {error.strerror}") from error
        self._socket = listening

    def close(self) -> None:
        """Listen no more."""
        listening, self._socket = self._socket, None
        if listening is not None:
            listening.close()

    def receive(self, until_s: float) -> bytes:
        """The next datagram, waiting until this second at most. Raises LinkLost."""
        if self._socket is None:
            raise LinkLost(f"udp port {self._address}: not open")
        wait_s = max(0.0, until_s - self._clock.monotonic_s())
        if not select.select([self._socket], [], [], wait_s)[0]:
            return b""
        return self._socket.recv(_CHUNK)
