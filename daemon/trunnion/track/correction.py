"""What an operator corrects while tracking: a time bias along the orbit, an offset on the sky."""

from dataclasses import dataclass, fields
from math import isfinite

MOST_TIME_S = 300.0
MOST_OFFSET_DEG = 10.0
"""Larger corrections are typing mistakes, or another target."""


@dataclass(frozen=True, slots=True)
class Correction:
    """Offsets that are added to what a target says of itself; zero means none.

    `time_bias_s` points where the target is said to be that much later. `azimuth_deg` and
    `elevation_deg` are added to the angles; `along_deg` and `across_deg` are angles on the sky, in
    the direction of the target's motion and to the right of it for somebody who faces the target.
    Raises ValueError for anything out of bounds.
    """

    time_bias_s: float = 0.0
    azimuth_deg: float = 0.0
    elevation_deg: float = 0.0
    along_deg: float = 0.0
    across_deg: float = 0.0

    def __post_init__(self) -> None:
        for each in fields(self):
            value = getattr(self, each.name)
            most = MOST_TIME_S if each.name == "time_bias_s" else MOST_OFFSET_DEG
            if not (isfinite(value) and abs(value) <= most):
                raise ValueError(f"expected {each.name} within ±{most:g}, got {value:g}")

    @property
    def is_none(self) -> bool:
        """Whether nothing is corrected."""
        return self == Correction()
