"""A peer at the end of a wire, in a thread of its own; a tap is told all that passes."""

import select
import threading
from collections.abc import Callable
from enum import Enum
from typing import NamedTuple, Self, TypeAlias

from trunnion_drivers.bench.endpoint import Endpoint
from trunnion_drivers.bench.peer import Peer
from trunnion_drivers.interface.values import Clock

_WAKE_S = 0.02
_BITS_A_BYTE = 10


class Way(Enum):
    """Which way bytes went, seen from the bench."""

    IN = "in"
    OUT = "out"


class Passed(NamedTuple):
    """Bytes on the wire, and the monotonic second at which they passed."""

    mono_s: float
    way: Way
    data: bytes


Tap: TypeAlias = Callable[[Passed], None]


def no_tap(_passed: Passed) -> None:
    """Nobody listens in."""


class Bench:
    """Lets a peer speak over endpoints that can be pulled and plugged; a context manager.

    With a `baud_rate`, bytes take as long as they would on a serial line.
    """

    def __init__(
        self,
        peer: Peer,
        plug_in: Callable[[], Endpoint],
        clock: Clock,
        tap: Tap = no_tap,
        baud_rate: int | None = None,
    ) -> None:
        self._peer = peer
        self._plug_in = plug_in
        self._clock = clock
        self._tap = tap
        self._byte_s = _BITS_A_BYTE / baud_rate if baud_rate else 0.0
        self._endpoint: Endpoint | None = plug_in()
        self._lock = threading.Lock()
        self._is_over = threading.Event()
        self._thread = threading.Thread(target=self._run, name="bench", daemon=True)

    @property
    def url(self) -> str:
        """Where a driver finds it."""
        if self._endpoint is None:
            raise ValueError("expected a plugged bench")
        return self._endpoint.url

    def __enter__(self) -> Self:
        self._thread.start()
        return self

    def __exit__(self, *_: object) -> None:
        self._is_over.set()
        self._thread.join()
        self.pull()

    def pull(self) -> None:
        """Take the wire away, as a pulled adapter."""
        with self._lock:
            if self._endpoint is not None:
                self._endpoint.close()
                self._endpoint = None

    def plug(self) -> None:
        """Bring the wire back."""
        with self._lock:
            if self._endpoint is None:
                self._endpoint = self._plug_in()

    def serve(self) -> None:
        """Serve in this thread until told to stop."""
        self._run()

    def _run(self) -> None:
        while not self._is_over.is_set():
            endpoint = self._endpoint
            if endpoint is None:
                self._is_over.wait(_WAKE_S)
            elif self._is_readable(endpoint):
                with self._lock:
                    if endpoint is self._endpoint:
                        self._pass_on(endpoint)

    def _is_readable(self, endpoint: Endpoint) -> bool:
        """Wait a moment; also true when it is time to speak unasked."""
        try:
            select.select([endpoint], [], [], _WAKE_S)
        except (OSError, ValueError):
            return False
        return True

    def _pass_on(self, endpoint: Endpoint) -> None:
        come = endpoint.receive()
        if come:
            self._tap(Passed(self._clock.monotonic_s(), Way.IN, come))
            self._clock.sleep(len(come) * self._byte_s)
        now_s = self._clock.monotonic_s()
        said = self._peer.hear(now_s, come) if come else b""
        said += self._peer.says_unasked(now_s)
        if said:
            self._clock.sleep(len(said) * self._byte_s)
            endpoint.send(said)
            self._tap(Passed(self._clock.monotonic_s(), Way.OUT, said))
