"""One listening socket with a thread of its own: many conversations, all of them bounded."""

import logging
import selectors
import socket
from collections.abc import Callable
from contextlib import suppress
from dataclasses import dataclass, field
from threading import Thread

from trunnion.service.clock import Clock
from trunnion.service.control.conversation import Conversation
from trunnion.service.control.peer import Peer, peer_of
from trunnion.service.control.spare import SpareDescriptor

_log = logging.getLogger(__name__)

MOST_CONNECTIONS = 32
"""With one more, the connection that has been silent longest is closed."""
LONGEST_SILENCE_S = 60.0
_CHUNK_BYTES = 4096
_SWEEP_S = 5.0
_PAUSE_S = 0.02


@dataclass(slots=True, eq=False)
class _Connection:
    socket: socket.socket
    talk: Conversation
    heard_s: float
    unsent: bytearray = field(default_factory=bytearray)


class Lane:
    """Serves a listening socket until closed; a bad connection is closed and harms no other.

    Nothing more is read from a connection before its last answer was taken.
    """

    def __init__(
        self,
        name: str,
        listener: socket.socket,
        converse: Callable[[Peer], Conversation],
        clock: Clock,
    ) -> None:
        self._listener = listener
        self._converse = converse
        self._clock = clock
        self._connections: set[_Connection] = set()
        self._selector = selectors.DefaultSelector()
        self._selector.register(listener, selectors.EVENT_READ)
        self._awake, self._alarm = socket.socketpair()
        self._selector.register(self._awake, selectors.EVENT_READ)
        self._spare = SpareDescriptor()
        self._is_closing = False
        self._thread = Thread(target=self._run, name=name, daemon=True)
        self._thread.start()

    def close(self) -> None:
        """Hang up on everybody and end the thread; the listening socket stays the caller's."""
        self._is_closing = True
        with suppress(OSError):
            self._alarm.send(b"x")
        self._thread.join()

    def _run(self) -> None:
        while not self._is_closing:
            try:
                self._serve_once()
            except Exception:  # noqa: BLE001 - a lane that ends would take no stop any more
                _log.exception("a lane failed by a mistake of ours, and goes on")
                self._clock.sleep(_PAUSE_S)
        for connection in tuple(self._connections):
            self._drop(connection)
        self._spare.give()
        self._selector.close()
        self._awake.close()
        self._alarm.close()

    def _serve_once(self) -> None:
        for key, events in self._selector.select(_SWEEP_S):
            if key.fileobj is self._listener:
                self._accept()
            elif key.data in self._connections:
                self._serve(key.data, events)
        self._sweep()

    def _accept(self) -> None:
        try:
            accepted, _ = self._listener.accept()
        except BlockingIOError:
            return
        except OSError as error:  # out of file descriptors, most likely
            _log.warning("cannot take a connection: %s", error)
            self._make_room()
            return
        try:
            self._begin(accepted)
        except Exception:
            accepted.close()
            raise

    def _begin(self, accepted: socket.socket) -> None:
        accepted.settimeout(0.0)
        talk = self._converse(peer_of(accepted))
        connection = _Connection(accepted, talk, self._clock.monotonic_s())
        self._connections.add(connection)
        self._selector.register(accepted, selectors.EVENT_READ, connection)
        if len(self._connections) > MOST_CONNECTIONS:
            self._drop_the_most_silent()

    def _make_room(self) -> None:
        """Free a file descriptor, so that whoever waits gets in at the next round."""
        if self._spare.give():
            return
        if self._connections:
            self._drop_the_most_silent()
        else:
            self._clock.sleep(_PAUSE_S)

    def _drop_the_most_silent(self) -> None:
        self._drop(min(self._connections, key=lambda each: each.heard_s))

    def _serve(self, connection: _Connection, events: int) -> None:
        try:
            if events & selectors.EVENT_READ:
                self._hear(connection)
            self._send(connection)
        except BlockingIOError:
            return
        except OSError:
            self._drop(connection)
        except Exception:  # noqa: BLE001 - one conversation's mistake must not end the lane
            _log.exception("a conversation failed by a mistake of ours")
            self._drop(connection)

    def _hear(self, connection: _Connection) -> None:
        data = connection.socket.recv(_CHUNK_BYTES)
        if not data:
            raise ConnectionResetError
        connection.heard_s = self._clock.monotonic_s()
        connection.unsent += connection.talk.hear(data)

    def _send(self, connection: _Connection) -> None:
        if connection.unsent:
            with suppress(BlockingIOError):
                del connection.unsent[: connection.socket.send(connection.unsent)]
        if connection.talk.is_over and not connection.unsent:
            self._drop(connection)
            return
        wanted = selectors.EVENT_WRITE if connection.unsent else selectors.EVENT_READ
        self._selector.modify(connection.socket, wanted, connection)

    def _sweep(self) -> None:
        oldest_s = self._clock.monotonic_s() - LONGEST_SILENCE_S
        for connection in tuple(self._connections):
            if connection.heard_s < oldest_s:
                self._drop(connection)

    def _drop(self, connection: _Connection) -> None:
        if connection in self._connections:
            self._connections.discard(connection)
            self._selector.unregister(connection.socket)
            connection.socket.close()
            if not self._connections:
                self._spare.take()
