"""Look angles: where a target stands, seen from the station."""

from typing import NamedTuple, Protocol

import numpy as np
from numpy.typing import NDArray

FloatArray = NDArray[np.float64]


class Look(NamedTuple):
    """Where a target stands at one instant, and how it moves.

    Azimuth in degrees from true north through east, 0 <= azimuth < 360; elevation in degrees above
    the plane at a right angle to the ellipsoid's normal; range in kilometres. Rates are per second
    of UTC; a positive range rate means the target recedes. Range and range rate are None for a
    target at no known distance.
    """

    azimuth_deg: float
    elevation_deg: float
    range_km: float | None
    azimuth_rate_deg_s: float
    elevation_rate_deg_s: float
    range_rate_km_s: float | None


class Looks(NamedTuple):
    """The same for many instants: one array of shape (n,) a field, in the units of `Look`."""

    azimuth_deg: FloatArray
    elevation_deg: FloatArray
    range_km: FloatArray | None
    azimuth_rate_deg_s: FloatArray
    elevation_rate_deg_s: FloatArray
    range_rate_km_s: FloatArray | None

    def where(self, is_chosen: NDArray[np.bool_]) -> "Looks":
        """Some of them."""
        return Looks(
            self.azimuth_deg[is_chosen],
            self.elevation_deg[is_chosen],
            None if self.range_km is None else self.range_km[is_chosen],
            self.azimuth_rate_deg_s[is_chosen],
            self.elevation_rate_deg_s[is_chosen],
            None if self.range_rate_km_s is None else self.range_rate_km_s[is_chosen],
        )


class Target(Protocol):
    """Anything a station can point at, seen from one viewpoint.

    Times are UTC as POSIX seconds. Both methods raise `trunnion.sky.errors.NoPosition` where the
    target has no position (decayed orbit, instant outside an ephemeris); neither ever returns a
    value that is not finite.
    """

    @property
    def name(self) -> str:
        """The name the user knows it by."""
        ...

    def look(self, utc_s: float) -> Look:
        """Where it stands at one instant: plain floats, fast, for the control turn."""
        ...

    def looks(self, utc_s: FloatArray) -> Looks:
        """Where it stands at many instants, shape (n,): for planning."""
        ...
