"""Question and answer over a port: paced, with what came unasked thrown away before each question.

After a missed or damaged answer the port is first listened to until it is quiet, so that a late
answer is never taken for the answer to the next question.
"""

from collections.abc import Callable
from typing import Protocol, TypeVar

from trunnion_drivers.interface.errors import Garbled, NoReply
from trunnion_drivers.interface.values import Clock

Answer = TypeVar("Answer")

_LONGEST_BUFFER = 4096
_QUIET_S = 0.05


class Port(Protocol):
    """What an exchange needs of a port."""

    def send(self, message: bytes) -> None:
        """Write the whole message."""
        ...

    def receive(self, until_s: float) -> bytes:
        """Whatever has come, waiting until this second at most."""
        ...


class Exchanges:
    """Takes turns with one peer over one port."""

    def __init__(self, port: Port, clock: Clock, reply_within_s: float, pause_s: float) -> None:
        self._port = port
        self._clock = clock
        self._reply_within_s = reply_within_s
        self._pause_s = pause_s
        self._sent_s = float("-inf")
        self._is_out_of_step = False

    def tell(self, message: bytes) -> None:
        """Send what has no answer."""
        self._keep_pace()
        self._port.send(message)

    def ask(self, message: bytes, understand: Callable[[bytes], Answer | None]) -> Answer:
        """Send, and wait until what has come is understood.

        `understand` sees all that has come since the question, and returns None for more. Raises
        NoReply where nothing has come in time, Garbled where it was not understood, and what
        `understand` raises.
        """
        self._keep_pace()
        self.flush()
        self._port.send(message)
        try:
            return self._await(understand)
        except (NoReply, Garbled):
            self._is_out_of_step = True
            raise

    def listen(self, understand: Callable[[bytes], Answer | None]) -> Answer:
        """Wait for what comes unasked, and begins after now, until it is understood."""
        self.flush()
        return self._await(understand)

    def flush(self) -> None:
        """Throw away what came unasked; after trouble, all that still comes until it is quiet."""
        self._port.receive(self._clock.monotonic_s())
        if self._is_out_of_step:
            end_s = self._clock.monotonic_s() + self._reply_within_s
            while self._port.receive(min(end_s, self._clock.monotonic_s() + _QUIET_S)):
                if self._clock.monotonic_s() >= end_s:
                    return
            self._is_out_of_step = False

    def _await(self, understand: Callable[[bytes], Answer | None]) -> Answer:
        end_s = self._clock.monotonic_s() + self._reply_within_s
        come = b""
        while True:
            come = (come + self._port.receive(end_s))[-_LONGEST_BUFFER:]
            answer = understand(come) if come else None
            if answer is not None:
                return answer
            if self._clock.monotonic_s() >= end_s:
                raise self._nothing_understood(come)

    def _nothing_understood(self, come: bytes) -> NoReply | Garbled:
        if come:
            return Garbled(f"expected an answer that can be understood, got {come[-80:]!r}")
        return NoReply(f"expected an answer within {self._reply_within_s:g} s, got none")

    def _keep_pace(self) -> None:
        wait_s = self._sent_s + self._pause_s - self._clock.monotonic_s()
        if wait_s > 0.0:
            self._clock.sleep(wait_s)
        self._sent_s = self._clock.monotonic_s()
