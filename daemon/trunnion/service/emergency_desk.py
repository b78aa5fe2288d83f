"""Where an emergency stop is taken in, kept, and lifted: one place for all who may ask for one.

Halting comes first and needs nothing that could block: no file, no lock held by others. Keeping the
stop on disk comes after it, and a disk that fails leaves the stop latched in memory.
"""

from collections.abc import Callable
from threading import RLock
from typing import Protocol

from trunnion.safety.emergency import EmergencyStop
from trunnion.service.clock import Clock
from trunnion.service.errors import ServiceError


class Halting(Protocol):
    """The part of the link that a stop needs."""

    def emergency_halt(self) -> None:
        """Halt now, and let no motion pass until released."""
        ...

    def release(self) -> None:
        """Let motion pass again; orders none."""
        ...


class Keeping(Protocol):
    """The part of the latch on disk that a stop needs; neither method raises."""

    def read(self) -> EmergencyStop | None:
        """The stop that is latched on disk; a damaged file counts as one."""
        ...

    def write(self, stop: EmergencyStop) -> str | None:
        """Keep it over a restart; what went wrong, if anything did."""
        ...

    def clear(self) -> str | None:
        """Lift it; what went wrong, if anything did."""
        ...


class StopNotLifted(ServiceError):  # noqa: N818 - named for what happened
    """A reset that is refused: the cause is still there, or the disk keeps the latch."""


class EmergencyDesk:
    """Takes in emergency stops from any thread; lifts them only when asked to, and may refuse."""

    def __init__(self, latch: Keeping, clock: Clock, tell: Callable[[str], None]) -> None:
        self._latch = latch
        self._link: Halting | None = None
        self._clock = clock
        self._tell = tell
        self._lock = RLock()  # a signal may ask for a stop in the middle of another
        self._stop = latch.read()

    def attach(self, link: Halting) -> None:
        """Have this link to halt from now on; at once where a stop is in force already."""
        self._link = link
        if self._stop is not None:
            link.emergency_halt()
            self._tell(f"still stopped since before this start: {self._stop.cause}")

    @property
    def latched(self) -> EmergencyStop | None:
        """The stop in force, if any; the first cause is kept when there are several."""
        return self._stop

    def stop(self, cause: str) -> None:
        """Halt the mount, and latch; may be called again and again, from any thread."""
        if self._link is not None:
            self._link.emergency_halt()
        with self._lock:
            if self._stop is not None:
                return
            self._stop = EmergencyStop(cause, self._clock.utc_s())
            trouble = self._latch.write(self._stop)
        self._tell(f"emergency stop: {cause}")
        if trouble:
            lost = "it" if self._latch.read() is None else "its cause"
            self._tell(f"the stop holds, but a restart would forget {lost}: {trouble}")

    def reset(self, still_there: str | None) -> None:
        """Lift the stop; orders no motion. Raises StopNotLifted while its cause is still there.

        `still_there` says what keeps the stop in force at this moment, None when nothing does.
        """
        if still_there:
            raise StopNotLifted(f"the emergency stop stays: {still_there}")
        with self._lock:
            if self._stop is None:
                return
            if trouble := self._latch.clear():
                raise StopNotLifted(f"the emergency stop stays: {trouble}")
            self._stop = None
            if self._link is not None:
                self._link.release()
        self._tell("emergency stop lifted; nothing moves until told to")
