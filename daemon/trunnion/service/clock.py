"""Time as a thing that is handed in: the machine's own, or one that only moves when told."""

import time
from typing import Protocol


class Clock(Protocol):
    """Both times a station needs, and the two ways of waiting.

    UTC in POSIX seconds may be stepped by whoever sets the machine's clock; monotonic seconds begin
    anywhere and are never stepped. Durations and deadlines use the monotonic ones alone.
    """

    def utc_s(self) -> float:
        """UTC now, as POSIX seconds."""
        ...

    def monotonic_s(self) -> float:
        """Seconds since an arbitrary start, never stepped."""
        ...

    def sleep(self, seconds: float) -> None:
        """Let this much time pass."""
        ...

    def sleep_until(self, mono_s: float) -> None:
        """Let time pass until this monotonic second; return at once where it is past."""
        ...


class SystemClock:
    """The machine's own time."""

    def utc_s(self) -> float:
        """UTC now, as POSIX seconds."""
        return time.time()

    def monotonic_s(self) -> float:
        """Seconds since an arbitrary start, never stepped."""
        return time.monotonic()

    def sleep(self, seconds: float) -> None:
        """Let this much time pass."""
        time.sleep(max(0.0, seconds))

    def sleep_until(self, mono_s: float) -> None:
        """Let time pass until this monotonic second; return at once where it is past."""
        self.sleep(mono_s - time.monotonic())


class VirtualClock:
    """Time that passes only while somebody sleeps: a day in the blink of an eye.

    For one thread; a second one would see time jump.
    """

    def __init__(self, utc_s: float, monotonic_s: float = 0.0) -> None:
        self._monotonic_s = monotonic_s
        self._utc_less_monotonic_s = utc_s - monotonic_s

    def utc_s(self) -> float:
        """UTC now, as POSIX seconds."""
        return self._utc_less_monotonic_s + self._monotonic_s

    def monotonic_s(self) -> float:
        """Seconds since the start given, never stepped."""
        return self._monotonic_s

    def sleep(self, seconds: float) -> None:
        """Let this much time pass, at once."""
        self._monotonic_s += max(0.0, seconds)

    def sleep_until(self, mono_s: float) -> None:
        """Go to this monotonic second; stay where it is past."""
        self._monotonic_s = max(self._monotonic_s, mono_s)

    def step_utc(self, seconds: float) -> None:
        """Set UTC forward (or back) as an operator or a time service would; durations stay."""
        self._utc_less_monotonic_s += seconds
