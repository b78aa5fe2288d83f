"""The control socket: how `trunnion status`, `stop` and the others reach the running daemon."""

from trunnion.service.control.client import ControlClient
from trunnion.service.control.conversation import Handler
from trunnion.service.control.errors import (
    ControlError,
    DaemonSilent,
    NoDaemon,
    RequestFailed,
    SocketInUse,
)
from trunnion.service.control.peer import Peer
from trunnion.service.control.protocol import BadArguments, ErrorKind
from trunnion.service.control.server import ControlServer

__all__ = [
    "BadArguments",
    "ControlClient",
    "ControlError",
    "ControlServer",
    "DaemonSilent",
    "ErrorKind",
    "Handler",
    "NoDaemon",
    "Peer",
    "RequestFailed",
    "SocketInUse",
]
