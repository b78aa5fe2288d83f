"""The antenna's beam: how wide it is, and how well it should point."""

from dataclasses import dataclass


@dataclass(frozen=True, slots=True)
class Beam:
    """Full width between the half-power directions, and the error that counts as well pointed."""

    half_power_deg: float
    tolerance_deg: float

    @property
    def half_width_deg(self) -> float:
        """Largest error at which the target is still inside the beam."""
        return 0.5 * self.half_power_deg
