"""A peer at the end of a wire, in a thread of its own; a tap is told all that passes."""

import select
import threading
from collections.abc import Callable
from enum import Enum
from heapq import heappop, heappush
from math import inf
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


class _UnderWay(NamedTuple):
    due_s: float
    number: int
    way: Way
    data: bytes


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
        self._under_way: list[_UnderWay] = []
        self._free_s = {Way.IN: -inf, Way.OUT: -inf}
        self._count = 0
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
            with self._lock:
                endpoint = self._endpoint
            if endpoint is None:
                self._under_way.clear()
                self._is_over.wait(_WAKE_S)
            else:
                self._wait(endpoint)
                with self._lock:
                    if endpoint is self._endpoint:
                        self._take_in(endpoint)
                        self._bring(endpoint)

    def _wait(self, endpoint: Endpoint) -> None:
        """Until something comes, or is due, or it is time to see what the peer says unasked."""
        due_s = self._under_way[0].due_s if self._under_way else inf
        wait_s = min(_WAKE_S, max(0.0, due_s - self._clock.monotonic_s()))
        try:
            select.select([endpoint], [], [], wait_s)
        except (OSError, ValueError):
            self._is_over.wait(_WAKE_S)

    def _take_in(self, endpoint: Endpoint) -> None:
        now_s = self._clock.monotonic_s()
        come = endpoint.receive()
        if come:
            self._tap(Passed(now_s, Way.IN, come))
            self._send_off(now_s, Way.IN, come)
        self._send_off(now_s, Way.OUT, self._peer.says_unasked(now_s))

    def _bring(self, endpoint: Endpoint) -> None:
        """Let the peer hear, and the driver receive, what has been on the wire long enough."""
        while self._under_way and self._under_way[0].due_s <= self._clock.monotonic_s():
            passed = heappop(self._under_way)
            now_s = self._clock.monotonic_s()
            if passed.way is Way.IN:
                self._send_off(now_s, Way.OUT, self._peer.hear(now_s, passed.data))
            else:
                endpoint.send(passed.data)
                self._tap(Passed(now_s, Way.OUT, passed.data))

    def _send_off(self, now_s: float, way: Way, data: bytes) -> None:
        """Put bytes on the wire, behind those that go the same way."""
        if data:
            begin_s = max(now_s, self._free_s[way])
            self._free_s[way] = begin_s + len(data) * self._byte_s
            self._count += 1
            heappush(self._under_way, _UnderWay(self._free_s[way], self._count, way, data))
