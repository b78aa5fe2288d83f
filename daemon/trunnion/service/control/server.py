"""The daemon's end of the control socket: a lane for requests and a lane for stops."""

from collections.abc import Callable, Mapping
from contextlib import ExitStack
from pathlib import Path

from trunnion.service.clock import Clock
from trunnion.service.control.conversation import Handler, RequestConversation
from trunnion.service.control.endpoint import listening
from trunnion.service.control.lane import Lane
from trunnion.service.control.stop_conversation import StopConversation


class ControlServer:
    """Listens from construction until closed.

    `handlers` fulfil the commands, one at a time, in the thread of the request lane. `stop` takes
    in an emergency stop with its cause, in the thread of the stop lane, which waits for nothing
    else. Raises SocketInUse and SocketUnusable.
    """

    def __init__(
        self,
        path: Path,
        handlers: Mapping[str, Handler],
        stop: Callable[[str], None],
        clock: Clock,
    ) -> None:
        with ExitStack() as held:
            requests, stops = held.enter_context(listening(path))
            stop_lane = Lane("stop", stops, lambda peer: StopConversation(stop, peer), clock)
            held.callback(stop_lane.close)
            request_lane = Lane(
                "control", requests, lambda peer: RequestConversation(handlers, peer), clock
            )
            held.callback(request_lane.close)
            self._held = held.pop_all()

    def close(self) -> None:
        """Hang up on everybody, end both threads, remove both sockets; idempotent."""
        self._held.close()
