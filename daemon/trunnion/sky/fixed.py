"""A direction that does not move: a beacon, a test transmitter, a geostationary craft by hand."""

from dataclasses import dataclass
from math import isfinite

import numpy as np

from trunnion.sky.errors import SkyError
from trunnion.sky.look import FloatArray, Look, Looks


@dataclass(frozen=True, slots=True)
class FixedDirection:
    """The same azimuth and elevation (deg) at every instant, as the boresight is to have them."""

    azimuth_deg: float
    elevation_deg: float

    def __post_init__(self) -> None:
        if not (isfinite(self.azimuth_deg) and -90.0 <= self.elevation_deg <= 90.0):
            raise SkyError(
                "expected a finite azimuth and an elevation of -90 to 90, "
                f"got {self.azimuth_deg}, {self.elevation_deg}"
            )
        object.__setattr__(self, "azimuth_deg", self.azimuth_deg % 360.0)

    @property
    def name(self) -> str:
        """The way it is written in a plan."""
        return f"fixed:{self.azimuth_deg:g},{self.elevation_deg:g}"

    def look(self, utc_s: float) -> Look:  # noqa: ARG002 - it never moves
        """The direction; no range, no motion."""
        return Look(self.azimuth_deg, self.elevation_deg, None, 0.0, 0.0, None)

    def looks(self, utc_s: FloatArray) -> Looks:
        """The direction, as often as there are instants."""
        still = np.zeros_like(utc_s)
        return Looks(still + self.azimuth_deg, still + self.elevation_deg, None, still, still, None)
