"""The daemon's end of the control socket: a lane for requests and a lane for stops."""

from collections.abc import Callable, Iterator, Mapping
from contextlib import ExitStack, closing, contextmanager
from pathlib import Path
from socket import socket

from trunnion.service.clock import Clock
from trunnion.service.control.conversation import Handler, RequestConversation
from trunnion.service.control.endpoint import listening
from trunnion.service.control.lane import Lane
from trunnion.service.control.stop_conversation import StopConversation


@contextmanager
def serving(
    listeners: tuple[socket, socket],
    handlers: Mapping[str, Handler],
    stop: Callable[[str], None],
    clock: Clock,
) -> Iterator[None]:
    """Serve both listening sockets, that of the requests and that of the stops, until left.

    `handlers` fulfil the commands, one at a time, in the thread of the request lane. `stop` takes
    in an emergency stop with its cause, in the thread of the stop lane, which waits for nothing
    else.
    """
    requests, stops = listeners
    with (
        closing(Lane("stop", stops, lambda peer: StopConversation(stop, peer), clock)),
        closing(Lane("control", requests, lambda peer: RequestConversation(handlers, peer), clock)),
    ):
        yield


class ControlServer:
    """Listens and serves from construction until closed. Raises SocketInUse and SocketUnusable."""

    def __init__(
        self,
        path: Path,
        handlers: Mapping[str, Handler],
        stop: Callable[[str], None],
        clock: Clock,
    ) -> None:
        with ExitStack() as held:
            listeners = held.enter_context(listening(path))
            held.enter_context(serving(listeners, handlers, stop, clock))
            self._held = held.pop_all()

    def close(self) -> None:
        """Hang up on everybody, end both threads, remove both sockets; idempotent."""
        self._held.close()
