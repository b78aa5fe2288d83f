"""How well a contact was pointed: kept turn by turn, read at its end."""

from dataclasses import dataclass
from math import sqrt


@dataclass(slots=True)
class Score:
    """Sums over the turns of one contact.

    Errors are angles on the sky between boresight and target (deg); times are seconds in which the
    error was above half the half-power beamwidth, or above the pointing tolerance.
    """

    half_beam_deg: float
    tolerance_deg: float
    seconds: float = 0.0
    worst_error_deg: float = 0.0
    worst_at_utc_s: float | None = None
    outside_beam_s: float = 0.0
    outside_tolerance_s: float = 0.0
    interventions: int = 0
    squares_deg2_s: float = 0.0

    def add(self, utc_s: float, error_deg: float, dt_s: float) -> None:
        """Count one turn that stood for `dt_s` seconds of the contact."""
        self.seconds += dt_s
        self.squares_deg2_s += error_deg * error_deg * dt_s
        if error_deg > self.worst_error_deg or self.worst_at_utc_s is None:
            self.worst_error_deg, self.worst_at_utc_s = error_deg, utc_s
        if error_deg > self.half_beam_deg:
            self.outside_beam_s += dt_s
        if error_deg > self.tolerance_deg:
            self.outside_tolerance_s += dt_s

    @property
    def rms_error_deg(self) -> float | None:
        """Root mean square over time; None before the first turn."""
        return sqrt(self.squares_deg2_s / self.seconds) if self.seconds > 0.0 else None


def combined(one: Score, other: Score) -> Score:
    """The score of two parts of one contact."""
    worst = max(one, other, key=lambda each: each.worst_error_deg)
    return Score(
        one.half_beam_deg,
        one.tolerance_deg,
        one.seconds + other.seconds,
        worst.worst_error_deg,
        worst.worst_at_utc_s,
        one.outside_beam_s + other.outside_beam_s,
        one.outside_tolerance_s + other.outside_tolerance_s,
        one.interventions + other.interventions,
        one.squares_deg2_s + other.squares_deg2_s,
    )
