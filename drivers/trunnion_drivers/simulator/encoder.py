"""What the mount believes of a joint's angle: the truth with noise, in whole steps."""

from random import Random


class Encoder:
    """Adds Gaussian noise (standard deviation, deg), then rounds to the resolution (deg).

    Zero switches either off. The same seed gives the same noise.
    """

    def __init__(self, resolution_deg: float, noise_deg: float, seed: str) -> None:
        self._resolution_deg = resolution_deg
        self._noise_deg = noise_deg
        self._random = Random(seed)  # noqa: S311 - noise, no secret

    def reading_deg(self, true_deg: float) -> float:
        """The angle as it would be read."""
        if self._noise_deg > 0.0:
            true_deg += self._random.gauss(0.0, self._noise_deg)
        if self._resolution_deg > 0.0:
            return round(true_deg / self._resolution_deg) * self._resolution_deg
        return true_deg
