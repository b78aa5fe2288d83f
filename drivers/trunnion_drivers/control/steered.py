"""A driver whose mount is steered by the control laws; hardware fills in reading and telling."""

from abc import abstractmethod
from math import isfinite

from trunnion_drivers.control.command import Command
from trunnion_drivers.control.steering import Steering
from trunnion_drivers.interface.driver import Driver
from trunnion_drivers.interface.errors import DriverError
from trunnion_drivers.interface.values import Clock, DriverMotion, DriverReading, MountFacts


class SteeredDriver(Driver):
    """Fill `_open`, `_close`, `_look`, `_tell` and `_rest`; the laws see every reading."""

    def __init__(self, steering: Steering, facts: MountFacts, clock: Clock) -> None:
        super().__init__(facts, clock)
        self._steering = steering
        self._seen: DriverReading | None = None

    def _read(self) -> DriverReading:
        seen = self._look()
        if isfinite(seen.first_deg) and isfinite(seen.second_deg):
            self._seen = seen
        return seen

    def _move(self, motion: DriverMotion) -> None:
        seen = self._seen or self.read()
        command = self._steering.steer(self._clock.monotonic_s(), motion, seen)
        if command is not None:
            self._must_tell(command)

    def _halt(self) -> None:
        self._steering.forget(self._clock.monotonic_s())
        self._rest()

    def _must_tell(self, command: Command) -> None:
        """What may not have arrived is not taken for said."""
        try:
            self._tell(command)
        except DriverError:
            self._steering.forget(self._clock.monotonic_s())
            raise

    def _start_anew(self) -> None:
        """The link was opened: what was seen and said before holds no longer."""
        self._steering.forget(self._clock.monotonic_s())
        self._seen = None

    @abstractmethod
    def _look(self) -> DriverReading:
        """Ask the mount where it is."""

    @abstractmethod
    def _tell(self, command: Command) -> None:
        """Send a command of the kind that the steering makes."""

    @abstractmethod
    def _rest(self) -> None:
        """Bring both joints to rest."""
