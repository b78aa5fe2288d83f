"""Degrees, and the numbers that stand for them in messages and registers."""

from collections.abc import Mapping
from dataclasses import dataclass

FIRST, SECOND = "first", "second"
FIRST_RATE, SECOND_RATE = "first_rate", "second_rate"
ANGLES = (FIRST, SECOND)
RATES = (FIRST_RATE, SECOND_RATE)


@dataclass(frozen=True, slots=True)
class Scale:
    """One joint's numbers: units a degree, the angle (deg) that is written as zero, the sense."""

    units_per_deg: float = 1.0
    zero_deg: float = 0.0
    is_reversed: bool = False
    rate_units_per_deg_s: float = 1.0

    def written(self, angle_deg: float) -> float:
        """The number that stands for this angle."""
        return (angle_deg - self.zero_deg) * self.units_per_deg * self._sense

    def angle_deg(self, written: float) -> float:
        """The angle that this number stands for."""
        return written / self.units_per_deg * self._sense + self.zero_deg

    def written_rate(self, rate_deg_s: float) -> float:
        """The number that stands for this rate."""
        return rate_deg_s * self.rate_units_per_deg_s * self._sense

    def rate_deg_s(self, written: float) -> float:
        """The rate that this number stands for."""
        return written / self.rate_units_per_deg_s * self._sense

    @property
    def _sense(self) -> float:
        return -1.0 if self.is_reversed else 1.0


@dataclass(frozen=True, slots=True)
class Scales:
    """Both joints' scales."""

    first: Scale
    second: Scale

    def written(self, degrees: Mapping[str, float]) -> dict[str, float]:
        """Turn angles (deg) and rates (deg/s) by name into numbers of the messages."""
        return {name: self._by_name(name, value, is_read=False) for name, value in degrees.items()}

    def degrees(self, written: Mapping[str, float]) -> dict[str, float]:
        """Turn numbers of the messages into angles (deg) and rates (deg/s); others stay."""
        return {name: self._by_name(name, value, is_read=True) for name, value in written.items()}

    def _by_name(self, name: str, value: float, *, is_read: bool) -> float:
        scale = self.first if name.startswith(FIRST) else self.second
        if name in ANGLES:
            return scale.angle_deg(value) if is_read else scale.written(value)
        if name in RATES:
            return scale.rate_deg_s(value) if is_read else scale.written_rate(value)
        return value
