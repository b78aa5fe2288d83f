"""Interpolation of an orbit between the nodes of an ephemeris: Lagrange and Hermite.

Both as Newton's divided differences, in which a node that also gives the velocity counts twice
(Burden and Faires, "Numerical Analysis", chapter 3).
"""

from dataclasses import dataclass
from enum import Enum

import numpy as np

from trunnion.sky.look import FloatArray
from trunnion.sky.site import Vector


class Method(Enum):
    """What the curve passes through."""

    LAGRANGE = "LAGRANGE"
    HERMITE = "HERMITE"
    LINEAR = "LINEAR"


@dataclass(frozen=True, slots=True)
class Interpolation:
    """Method and degree of the polynomial; the node count follows."""

    method: Method
    degree: int

    @property
    def nodes(self) -> int:
        """How many nodes around an instant it takes."""
        if self.method is Method.HERMITE:
            return max(2, (self.degree + 2) // 2)
        return self.degree + 1


@dataclass(frozen=True, slots=True, eq=False)
class Curve:
    """A polynomial for each interval between nodes: of the nodes nearest to it on both sides.

    `times` (n,) are seconds from any origin, increasing; `centres` and `coefficients` are those of
    Newton's form, of shapes (n - 1, k) and (n - 1, k, 3).
    """

    times: FloatArray
    centres: FloatArray
    coefficients: FloatArray

    @classmethod
    def through(
        cls, times: FloatArray, positions: FloatArray, velocities: FloatArray, how: Interpolation
    ) -> "Curve":
        """The curve through positions (n, 3), and with velocities (n, 3) if the method asks."""
        repeats = 2 if how.method is Method.HERMITE else 1
        count = len(times)
        first = np.clip(np.arange(count - 1) - (how.nodes // 2 - 1), 0, count - how.nodes)
        window = first[:, np.newaxis] + np.repeat(np.arange(how.nodes), repeats)
        centres = times[window]
        table = positions[window]
        coefficients = [table[:, 0]]
        for order in range(1, how.nodes * repeats):
            span = (centres[:, order:] - centres[:, :-order])[:, :, np.newaxis]
            rise = table[:, 1:] - table[:, :-1]
            is_repeated = span == 0.0
            slopes = velocities[window[:, : rise.shape[1]]]
            table = np.where(is_repeated, slopes, rise / np.where(is_repeated, 1.0, span))
            coefficients.append(table[:, 0])
        return cls(times, centres, np.stack(coefficients, axis=1))

    def at(self, time: float) -> tuple[Vector, Vector]:
        """Position and velocity; the caller keeps `time` within the nodes."""
        index = int(self.times.searchsorted(time, side="right")) - 1
        index = min(max(index, 0), len(self.centres) - 1)
        centres, rows = self.centres[index].tolist(), self.coefficients[index].tolist()
        (x, y, z), vx, vy, vz = rows[-1], 0.0, 0.0, 0.0
        for order in range(len(rows) - 2, -1, -1):
            step = time - centres[order]
            a, b, c = rows[order]
            vx, vy, vz = vx * step + x, vy * step + y, vz * step + z
            x, y, z = x * step + a, y * step + b, z * step + c
        return (x, y, z), (vx, vy, vz)
