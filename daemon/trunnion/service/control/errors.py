"""What can go wrong between a command and the daemon, split by blame."""

from trunnion.service.control.protocol import ErrorKind
from trunnion.service.errors import ServiceError


class ControlError(ServiceError):
    """Anything that keeps a command from reaching the daemon, or the daemon from listening."""


class SocketInUse(ControlError):  # noqa: N818 - named for what happened
    """A daemon that lives listens at this path already."""


class SocketUnusable(ControlError):  # noqa: N818 - named for what happened
    """Nothing can listen at this path: no permission, not a socket, too long, unsafe folder."""


class NoDaemon(ControlError):  # noqa: N818 - named for what happened
    """Nobody listens at this path."""


class DaemonSilent(ControlError):  # noqa: N818 - named for what happened
    """The daemon took the request and did not answer in time, or hung up."""


class RequestFailed(ControlError):  # noqa: N818 - named for what happened
    """The daemon answered that it would not, or could not; `kind` says why."""

    def __init__(self, kind: ErrorKind, message: str) -> None:
        super().__init__(message)
        self.kind = kind
