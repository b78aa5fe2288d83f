"""Where a joint is between the steps of a coarse encoder.

Set membership: the angle lies within half a step of what is read, and within what the motor can
have done since the last look; the estimate is dead reckoning kept inside both.
"""


class CoarseEstimate:
    """For an encoder that rounds to this resolution (deg; 0 for a fine one)."""

    def __init__(self, resolution_deg: float) -> None:
        self._half_deg = 0.5 * resolution_deg
        self._seen_s: float | None = None
        self._lowest_deg = self._highest_deg = self._likely_deg = 0.0

    def update(
        self, mono_s: float, reading_deg: float, likely_deg_s: float, fastest_deg_s: float
    ) -> float:
        """Take in what was read at this second; return the angle (deg).

        Since the last look the joint has likely moved at the one rate, and at any rate between rest
        and the fastest; both are positive one way and negative the other.
        """
        read = reading_deg - self._half_deg, reading_deg + self._half_deg
        if self._seen_s is None:
            self._begin(reading_deg, read)
        else:
            time_s = mono_s - self._seen_s
            self._likely_deg += likely_deg_s * time_s
            self._highest_deg += max(0.0, fastest_deg_s * time_s)
            self._lowest_deg += min(0.0, fastest_deg_s * time_s)
            self._intersect(reading_deg, read)
        self._seen_s = mono_s
        return self._likely_deg

    def forget(self) -> None:
        """The joint was moved by something else."""
        self._seen_s = None

    def _begin(self, reading_deg: float, read: tuple[float, float]) -> None:
        (self._lowest_deg, self._highest_deg), self._likely_deg = read, reading_deg

    def _intersect(self, reading_deg: float, read: tuple[float, float]) -> None:
        lowest, highest = max(self._lowest_deg, read[0]), min(self._highest_deg, read[1])
        if lowest > highest:
            self._begin(reading_deg, read)
        else:
            self._lowest_deg, self._highest_deg = lowest, highest
            self._likely_deg = min(max(self._likely_deg, lowest), highest)
