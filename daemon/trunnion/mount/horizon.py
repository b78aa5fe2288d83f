"""The horizon mask: how high the obstacles round the station stand."""

from bisect import bisect_left, bisect_right
from collections.abc import Iterator
from dataclasses import dataclass, field
from itertools import pairwise


@dataclass(frozen=True, slots=True)
class HorizonMask:
    """Elevation of the horizon (deg) at some azimuths (deg), straight lines between them.

    Azimuths rise from 0 to below 360; the last point joins the first across north. Two points at
    one azimuth make a step, at which the higher one counts. Raises ValueError for anything else.
    """

    points: tuple[tuple[float, float], ...]
    _azimuths: tuple[float, ...] = field(init=False, repr=False, compare=False)
    _around: tuple[tuple[float, float], ...] = field(init=False, repr=False, compare=False)

    def __post_init__(self) -> None:
        azimuths = [azimuth_deg for azimuth_deg, _ in self.points]
        if not azimuths:
            raise ValueError("expected at least one point, got none")
        if azimuths != sorted(azimuths) or not 0.0 <= azimuths[0] <= azimuths[-1] < 360.0:
            raise ValueError(f"expected azimuths that rise from 0 to below 360, got {azimuths}")
        last, first = self.points[-1], self.points[0]
        around = ((last[0] - 360.0, last[1]), *self.points, (first[0] + 360.0, first[1]))
        object.__setattr__(self, "_around", around)
        object.__setattr__(self, "_azimuths", tuple(point[0] for point in around))

    def elevation_deg(self, azimuth_deg: float) -> float:
        """Elevation of the horizon in this direction; any azimuth, whole turns do not matter."""
        azimuth_deg %= 360.0
        after = bisect_right(self._azimuths, azimuth_deg)
        at = bisect_left(self._azimuths, azimuth_deg)
        if at < after:
            return max(elevation_deg for _, elevation_deg in self._around[at:after])
        (before_deg, low), (after_deg, high) = self._around[at - 1], self._around[at]
        share = (azimuth_deg - before_deg) / (after_deg - before_deg)
        return low + share * (high - low)

    def spans(self) -> Iterator[tuple[float, float, float]]:
        """Azimuths from one point to the next (-360 to 720), and the higher end's elevation."""
        for (begin_deg, one_deg), (end_deg, other_deg) in pairwise(self._around):
            yield begin_deg, end_deg, max(one_deg, other_deg)

    def highest_deg(self, from_deg: float, to_deg: float) -> float:
        """Highest elevation of the horizon from one azimuth clockwise to another."""
        span_deg = (to_deg - from_deg) % 360.0 if to_deg - from_deg < 360.0 else 360.0
        between = (
            elevation_deg
            for azimuth_deg, elevation_deg in self.points
            if (azimuth_deg - from_deg) % 360.0 <= span_deg
        )
        return max(self.elevation_deg(from_deg), self.elevation_deg(to_deg), *between, -90.0)
