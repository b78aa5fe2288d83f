"""How far a motor coasts once switched off, learned from every stop.

Under even friction the run-on grows with the square of the rate at which the power goes.
"""

from typing import NamedTuple

from trunnion_drivers.control.command import Turn

_WEIGHT = 1.0 / 3.0  # of a new value; the older ones fade: exponential smoothing
_LEAST_SHARE = 0.3  # of the full rate; a slower stop says too little about a full one


class _Stop(NamedTuple):
    turn: Turn
    off_s: float
    off_deg: float
    rate_deg_s: float


class RunOn:
    """The run-on from the full rate (deg/s) in each sense (deg), from a first guess."""

    def __init__(self, first_guess_deg: float, full_rate_deg_s: float) -> None:
        self._believed_deg = {Turn.UP: first_guess_deg, Turn.DOWN: first_guess_deg}
        self._full_rate_deg_s = full_rate_deg_s
        self._stop: _Stop | None = None

    def expected_deg(self, turn: Turn, rate_deg_s: float) -> float:
        """How far it coasts after turning this way at this rate."""
        return self._believed_deg[turn] * (rate_deg_s / self._full_rate_deg_s) ** 2

    def coasting_deg_s(self, mono_s: float) -> float:
        """The rate (signed) at which it likely coasts at this second."""
        if self._stop is None:
            return 0.0
        way_deg = self.expected_deg(self._stop.turn, self._stop.rate_deg_s)
        if way_deg <= 0.0 or self._stop.rate_deg_s <= 0.0:
            return 0.0
        left = 1.0 - (mono_s - self._stop.off_s) * self._stop.rate_deg_s / (2.0 * way_deg)
        return self._stop.turn.value * self._stop.rate_deg_s * max(0.0, left)

    @property
    def turn(self) -> Turn:
        """Which way it coasts, if it does not rest yet; OFF where it is known to rest."""
        return self._stop.turn if self._stop else Turn.OFF

    def switched_off(self, mono_s: float, turn: Turn, angle_deg: float, rate_deg_s: float) -> None:
        """It turned this way at this rate, until now and here."""
        self._stop = _Stop(turn, mono_s, angle_deg, rate_deg_s)

    def came_to_rest(self, angle_deg: float) -> None:
        """It rests here now: learn."""
        stop, self._stop = self._stop, None
        if stop is None:
            return
        share = stop.rate_deg_s / self._full_rate_deg_s
        if share >= _LEAST_SHARE:
            measured = max(0.0, stop.turn.value * (angle_deg - stop.off_deg)) / share**2
            self._believed_deg[stop.turn] += _WEIGHT * (measured - self._believed_deg[stop.turn])

    def forget(self) -> None:
        """Nothing is learned from this stop."""
        self._stop = None
