"""Rate commands: the goal's own rate fed forward, and a bounded feedback that closes the rest.

A proportional and integral law with feed-forward. The proportional part closes no faster than the
joint can stop (the braking parabola of uniform acceleration); the integral part takes up a steady
error only, is bounded, and waits while the command is saturated (anti-windup by conditional
integration).
"""

from collections import deque
from dataclasses import dataclass
from math import copysign, sqrt
from typing import NamedTuple


@dataclass(frozen=True, slots=True)
class RateSettings:
    """How one joint is steered by rate.

    `gain_per_s` is how much of the error is closed in a second; `integral_per_s2` how fast a steady
    error is taken up, at most `integral_limit_deg_s`; `latency_s` passes between an order and its
    effect; a command nearer to rest than `least_rate_deg_s`, which moves nothing, is sent as rest.
    """

    gain_per_s: float = 2.0
    integral_per_s2: float = 0.4
    integral_limit_deg_s: float = 0.1
    latency_s: float = 0.0
    least_rate_deg_s: float = 0.0


class _Told(NamedTuple):
    """A rate, and the second from which it has effect."""

    from_s: float
    rate_deg_s: float


class RateLaw:
    """Says at which rate to move a joint of this highest rate (deg/s) and acceleration."""

    def __init__(
        self, settings: RateSettings, rate_deg_s: float, acceleration_deg_s2: float
    ) -> None:
        self._settings = settings
        self._rate_deg_s = rate_deg_s
        self._acceleration_deg_s2 = acceleration_deg_s2
        self._integral_deg_s = 0.0
        self._told: deque[_Told] = deque(maxlen=16)
        self._seen_s: float | None = None

    def order_deg_s(
        self,
        mono_s: float,
        goal_deg: float,
        goal_rate_deg_s: float,
        reading_deg: float,
        taken_s: float,
    ) -> float:
        """The rate to order now, for a goal of now and an angle read at `taken_s`."""
        effect_s = mono_s + self._settings.latency_s
        expected_deg = reading_deg + self._travelled_deg(taken_s, effect_s)
        error_deg = goal_deg + goal_rate_deg_s * self._settings.latency_s - expected_deg
        closing = self._closing_deg_s(error_deg)
        free = goal_rate_deg_s + closing + self._integral_deg_s
        order = min(max(free, -self._rate_deg_s), self._rate_deg_s)
        if order == free:
            self._integrate(mono_s, error_deg)
        if abs(order) < self._settings.least_rate_deg_s:
            order = 0.0
        self._seen_s = mono_s
        self._told.append(_Told(effect_s, order))
        return order

    def forget(self) -> None:
        """The joint was halted."""
        self._told.clear()
        self._integral_deg_s, self._seen_s = 0.0, None

    def _closing_deg_s(self, error_deg: float) -> float:
        way = abs(error_deg)
        braking = 0.8 * sqrt(2.0 * self._acceleration_deg_s2 * way)
        return copysign(min(self._settings.gain_per_s * way, braking), error_deg)

    def _integrate(self, mono_s: float, error_deg: float) -> None:
        if self._seen_s is None:
            return
        limit = self._settings.integral_limit_deg_s
        step = self._settings.integral_per_s2 * error_deg * min(mono_s - self._seen_s, 1.0)
        self._integral_deg_s = min(max(self._integral_deg_s + step, -limit), limit)

    def _travelled_deg(self, from_s: float, until_s: float) -> float:
        """How far the rates told so far take the joint in this time, its ramps left out."""
        way_deg, end_s = 0.0, until_s
        for told in reversed(self._told):
            begin_s = max(told.from_s, from_s)
            if begin_s < end_s:
                way_deg += told.rate_deg_s * (end_s - begin_s)
                end_s = begin_s
        return way_deg
