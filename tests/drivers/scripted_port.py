"""A port on which everything comes as the test has it written down."""

from tests.drivers.mounts import HandClock


class Scripted:
    """A port under a clock by hand: what comes, and when (s after the message was sent)."""

    def __init__(self, clock: HandClock, *answers: list[tuple[float, bytes]]) -> None:
        self._clock = clock
        self._answers = list(answers)
        self._coming: list[tuple[float, bytes]] = []
        self.sent: list[bytes] = []

    def send(self, message: bytes) -> None:
        self.sent.append(message)
        now_s = self._clock.monotonic_s()
        answer = self._answers.pop(0) if self._answers else []
        self._coming += [(now_s + after_s, data) for after_s, data in answer]

    def receive(self, until_s: float) -> bytes:
        if self._coming and self._coming[0][0] <= until_s:
            at_s, data = self._coming.pop(0)
            self._clock.sleep(max(0.0, at_s - self._clock.monotonic_s()))
            return data
        self._clock.sleep(max(0.0, until_s - self._clock.monotonic_s()))
        return b""
