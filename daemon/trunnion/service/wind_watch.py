"""A thread that reads the wind, so that a slow sensor never makes a control turn late."""

from threading import Event, Thread

from trunnion.service.wind_gauge import Wind, WindGauge

_EVERY_S = 1.0
_LONGEST_GOODBYE_S = 3.0


class WindWatch:
    """Reads from construction until closed."""

    def __init__(self, gauge: WindGauge) -> None:
        self._gauge = gauge
        self._is_closing = Event()
        self._thread = Thread(target=self._run, name="wind", daemon=True)
        self._thread.start()

    @property
    def trouble(self) -> str | None:
        """Why the last reading failed, if it did."""
        return self._gauge.trouble

    def wind(self) -> Wind | None:
        """The wind now; None where it is not known."""
        return self._gauge.wind()

    def close(self) -> None:
        """End; a sensor that hangs is left behind after `_LONGEST_GOODBYE_S`."""
        self._is_closing.set()
        self._thread.join(_LONGEST_GOODBYE_S)

    def _run(self) -> None:
        while not self._is_closing.is_set():
            self._gauge.look()
            self._is_closing.wait(_EVERY_S)
        self._gauge.close()
