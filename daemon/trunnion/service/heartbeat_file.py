"""A heartbeat from outside: a file that somebody touches as long as all is well there."""

from pathlib import Path

from trunnion.service.clock import Clock


class HeartbeatFile:
    """Hears a beat whenever the file's time of modification changes.

    Its age is counted on the monotonic clock; only the first sight goes by the file's own time.
    """

    def __init__(self, path: Path, clock: Clock) -> None:
        self._path = path
        self._clock = clock
        self._modified_ns: int | None = None
        self._heard_s: float | None = None

    def age_s(self) -> float | None:
        """How long ago (s) the last beat was heard; None for none ever."""
        now_s = self._clock.monotonic_s()
        modified_ns: int | None
        try:
            modified_ns = self._path.stat().st_mtime_ns
        except OSError:
            modified_ns = self._modified_ns
        if modified_ns is not None and modified_ns != self._modified_ns:
            is_first = self._modified_ns is None
            age_s = max(0.0, self._clock.utc_s() - modified_ns * 1e-9) if is_first else 0.0
            self._modified_ns, self._heard_s = modified_ns, now_s - age_s
        return None if self._heard_s is None else now_s - self._heard_s
