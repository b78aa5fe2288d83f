"""Who is at the other end of the socket, as the kernel knows it."""

import socket
import struct
from typing import NamedTuple

_CREDENTIALS = struct.Struct("3i")


class Peer(NamedTuple):
    """Process, user and group at the other end when it connected: `ucred` of unix(7)."""

    pid: int
    uid: int
    gid: int

    def __str__(self) -> str:
        return f"user {self.uid}, process {self.pid}"


def peer_of(connection: socket.socket) -> Peer:
    """Ask the kernel."""
    credentials = connection.getsockopt(socket.SOL_SOCKET, socket.SO_PEERCRED, _CREDENTIALS.size)
    return Peer(*_CREDENTIALS.unpack(credentials))
