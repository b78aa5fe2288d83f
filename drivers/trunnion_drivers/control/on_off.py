"""On–off motors: run past the goal and let it catch up, with the run-on learned on the way.

A goal slower than the motor is met by pulses. The error then saws between two edges; it is least on
average where both lie equally far from zero. So the motor starts when the antenna lags by the
threshold, and is switched off where its run-on will carry it as far ahead.
"""

from dataclasses import dataclass
from math import inf

from trunnion_drivers.control.coarse import CoarseEstimate
from trunnion_drivers.control.command import Turn
from trunnion_drivers.control.run_on import RunOn

_PATIENCE = 2.5  # thresholds that the antenna may be ahead of a goal that comes its way


@dataclass(frozen=True, slots=True)
class OnOffSettings:
    """How one joint is switched.

    `threshold_deg` is the lag at which it starts. `resolution_deg` is the step of its encoder, 0
    for a fine one. `run_on_deg` is what is believed before any run-on is measured; it takes
    `coasting_s` at most. A pulse lasts at least `least_pulse_s`, a pause at least `least_rest_s`.
    """

    threshold_deg: float = 0.5
    resolution_deg: float = 0.0
    run_on_deg: float = 0.0
    coasting_s: float = 0.8
    least_pulse_s: float = 0.1
    least_rest_s: float = 0.3


class OnOffLaw:
    """Says what the contacts of one joint shall do, for a motor of this rate and acceleration."""

    def __init__(
        self, settings: OnOffSettings, rate_deg_s: float, acceleration_deg_s2: float
    ) -> None:
        self._settings = settings
        self._rate_deg_s = rate_deg_s
        self._acceleration_deg_s2 = acceleration_deg_s2
        self._estimate = CoarseEstimate(settings.resolution_deg)
        self._turn = Turn.OFF
        self._switched_s = -inf
        self._asked_s = -inf
        self._was_deg_s = 0.0
        self.run_on = RunOn(settings.run_on_deg, rate_deg_s)
        self.starts = 0

    def order(
        self,
        mono_s: float,
        goal_deg: float,
        goal_rate_deg_s: float,
        reading_deg: float,
        taken_s: float,
    ) -> Turn:
        """What to switch now, for a goal of now and an angle read at `taken_s`."""
        angle_deg = self._angle_deg(mono_s, reading_deg, taken_s)
        error_deg = goal_deg - angle_deg
        if self._turn is Turn.OFF:
            wanted = self._start(error_deg, goal_rate_deg_s)
        else:
            wanted = self._keep_on(mono_s, error_deg, goal_rate_deg_s)
        self._asked_s = mono_s
        if wanted is not self._turn and self._may_switch(mono_s):
            self._switch(mono_s, wanted, angle_deg)
        return self._turn

    def forget(self, mono_s: float) -> None:
        """The joint was halted."""
        if self._turn is not Turn.OFF:
            self._turn, self._switched_s = Turn.OFF, mono_s
        self._estimate.forget()
        self.run_on.forget()

    def _angle_deg(self, mono_s: float, reading_deg: float, taken_s: float) -> float:
        """Where the joint is now; its motor has been switched for the whole interval."""
        is_on = self._turn is not Turn.OFF
        turn = self._turn if is_on else self.run_on.turn
        now_deg_s = self._rate_now_deg_s(mono_s)
        likely_deg_s = 0.5 * (self._was_deg_s + now_deg_s)
        self._was_deg_s = now_deg_s
        angle_deg = self._estimate.update(
            taken_s, reading_deg, likely_deg_s, turn.value * self._rate_deg_s
        )
        if not is_on and mono_s - self._switched_s >= self._settings.coasting_s:
            self.run_on.came_to_rest(angle_deg)
        return angle_deg + now_deg_s * (mono_s - taken_s)

    def _rate_now_deg_s(self, mono_s: float) -> float:
        if self._turn is Turn.OFF:
            return self.run_on.coasting_deg_s(mono_s)
        return float(self._turn.value) * self._spun_up_deg_s(mono_s)

    def _spun_up_deg_s(self, mono_s: float) -> float:
        """The rate that a motor that is on has reached."""
        return min(self._rate_deg_s, (mono_s - self._switched_s) * self._acceleration_deg_s2)

    def _start(self, error_deg: float, goal_rate_deg_s: float) -> Turn:
        goal_comes = error_deg * goal_rate_deg_s < 0.0
        threshold = self._settings.threshold_deg * (_PATIENCE if goal_comes else 1.0)
        if abs(error_deg) <= threshold:
            return Turn.OFF
        return Turn.UP if error_deg > 0.0 else Turn.DOWN

    def _keep_on(self, mono_s: float, error_deg: float, goal_rate_deg_s: float) -> Turn:
        """Off where the run-on leads to the far edge, or nearer to it now than at the next call."""
        sense, rate_deg_s = self._turn.value, self._spun_up_deg_s(mono_s)
        lead_deg = self._settings.threshold_deg if sense * goal_rate_deg_s > 0.0 else 0.0
        interval_s = min(mono_s - self._asked_s, 0.5)
        closed_deg = 0.5 * interval_s * (rate_deg_s - sense * goal_rate_deg_s)
        left_deg = sense * error_deg + lead_deg - self.run_on.expected_deg(self._turn, rate_deg_s)
        return self._turn if left_deg > closed_deg else Turn.OFF

    def _may_switch(self, mono_s: float) -> bool:
        is_on = self._turn is not Turn.OFF
        least_s = self._settings.least_pulse_s if is_on else self._settings.least_rest_s
        return mono_s - self._switched_s >= least_s

    def _switch(self, mono_s: float, wanted: Turn, angle_deg: float) -> None:
        if wanted is Turn.OFF:
            self.run_on.switched_off(mono_s, self._turn, angle_deg, self._spun_up_deg_s(mono_s))
        else:
            self.run_on.forget()
            self.starts += 1
        self._turn, self._switched_s = wanted, mono_s
