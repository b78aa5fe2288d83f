"""How long to wait before the next attempt to open: longer each time, within bounds."""

FIRST_PAUSE_S = 0.1
LONGEST_PAUSE_S = 1.5


class Backoff:
    """Pauses that double from attempt to attempt until something has worked."""

    def __init__(self) -> None:
        self._pause_s = FIRST_PAUSE_S
        self._until_s: float | None = None

    def is_over(self, mono_s: float) -> bool:
        """Whether an attempt may be made now."""
        return self._until_s is None or mono_s >= self._until_s

    def begin(self, mono_s: float) -> None:
        """An attempt is made now; the next one no earlier than after the pause."""
        self._until_s = mono_s + self._pause_s
        self._pause_s = min(2.0 * self._pause_s, LONGEST_PAUSE_S)

    def reset(self) -> None:
        """It worked; the next failure is followed by the shortest pause."""
        self._pause_s = FIRST_PAUSE_S
