"""Backlash: the antenna follows once the motor has taken up the play.

The play operator, a rate-independent hysteresis: the antenna stays where it is while the motor
moves within the play, and is carried along by whichever flank the motor leans on.
"""


class Play:
    """The antenna's side of a gear with this much play (deg), centred at first."""

    def __init__(self, width_deg: float, antenna_deg: float) -> None:
        self._half_deg = 0.5 * width_deg
        self.antenna_deg = antenna_deg

    def follow(self, motor_deg: float) -> float:
        """Let the motor go there without turning back on the way; return the antenna's angle."""
        lowest, highest = motor_deg - self._half_deg, motor_deg + self._half_deg
        self.antenna_deg = min(max(self.antenna_deg, lowest), highest)
        return self.antenna_deg

    def carries(self, motor_deg: float, motor_rate_deg_s: float) -> bool:
        """Whether a motor there, moving this way, takes the antenna with it."""
        lag_deg = (motor_deg - self.antenna_deg) * (1.0 if motor_rate_deg_s > 0.0 else -1.0)
        return lag_deg >= self._half_deg
