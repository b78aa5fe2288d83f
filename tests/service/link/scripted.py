"""A driver that does as it is told, and remembers what it was asked."""

from collections import deque
from collections.abc import Mapping
from typing import Self

from trunnion_drivers.interface.driver import Driver
from trunnion_drivers.interface.values import (
    Capabilities,
    Clock,
    DriverMotion,
    DriverReading,
    JointFacts,
    MountFacts,
)

FACTS = MountFacts(JointFacts(-270.0, 270.0, 6.0, 3.0), JointFacts(2.0, 90.0, 4.0, 3.0), 11.0, 88.0)


class ScriptedDriver(Driver):
    """Raises what is in `failures` of a call, in order, before it does it again."""

    def __init__(self, clock: Clock, *, cuts_power: bool = False) -> None:
        super().__init__(FACTS, clock)
        self.capabilities = Capabilities(cuts_power=cuts_power)
        self.calls: list[str] = []
        self.moves: list[DriverMotion] = []
        self.failures: dict[str, deque[Exception]] = {}
        self.stop_pressed = False

    @classmethod
    def from_settings(cls, settings: Mapping[str, object], facts: MountFacts, clock: Clock) -> Self:
        return cls(clock)

    def fail(self, call: str, *errors: Exception) -> None:
        """Let the next calls of this name fail with these, one after the other."""
        self.failures.setdefault(call, deque()).extend(errors)

    def _open(self) -> None:
        self._note("open")

    def _close(self) -> None:
        self._note("close")

    def _read(self) -> DriverReading:
        self._note("read")
        return DriverReading(
            self._clock.monotonic_s(), -148.5, 33.05, self.stop_pressed, False, None
        )

    def _move(self, motion: DriverMotion) -> None:
        self._note("move")
        self.moves.append(motion)

    def _halt(self) -> None:
        self._note("halt")

    def _cut_power(self) -> None:
        self._note("cut power")

    def _note(self, call: str) -> None:
        self.calls.append(call)
        if waiting := self.failures.get(call):
            raise waiting.popleft()
