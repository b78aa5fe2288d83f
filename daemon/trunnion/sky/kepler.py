"""Motion about a point mass from a known state: a minute or ten ahead, to a few hundred metres.

Lagrange's f and g in the difference of eccentric anomaly (Battin, "An Introduction to the
Mathematics and Methods of Astrodynamics", section 4.3). For brackets and first guesses.
"""

from typing import NamedTuple

import numpy as np
from numpy.typing import NDArray

from trunnion.sky.look import FloatArray

MU_KM3_S2 = 398_600.8
"""Of WGS 72, as in SGP4."""

_NEWTON_STEPS = 4


class States(NamedTuple):
    """Positions (km) and velocities (km/s) at rest, shape (3, n)."""

    position_km: FloatArray
    velocity_km_s: FloatArray

    def where(self, is_chosen: NDArray[np.bool_]) -> "States":
        """Some of them."""
        return States(self.position_km[:, is_chosen], self.velocity_km_s[:, is_chosen])


def moved(states: States, after_s: FloatArray) -> States:
    """The states after this many seconds, shape (n,), for orbits that are closed."""
    r0, v0 = states
    distance = np.sqrt(np.einsum("in,in->n", r0, r0))
    a = 1.0 / (2.0 / distance - np.einsum("in,in->n", v0, v0) / MU_KM3_S2)
    root_a = np.sqrt(a)
    sigma = np.einsum("in,in->n", r0, v0) / np.sqrt(MU_KM3_S2)
    mean = after_s * np.sqrt(MU_KM3_S2) / (a * root_a)
    k, h = 1.0 - distance / a, sigma / root_a
    x = mean
    for _ in range(_NEWTON_STEPS):
        c, s = np.cos(x), np.sin(x)
        x = x - (x - k * s + h * (1.0 - c) - mean) / (1.0 - k * c + h * s)
    c, s = np.cos(x), np.sin(x)
    later = a * (1.0 - k * c + h * s)
    f = 1.0 - a * (1.0 - c) / distance
    g = after_s - (x - s) * a * root_a / np.sqrt(MU_KM3_S2)
    f_dot = -np.sqrt(MU_KM3_S2) * root_a * s / (later * distance)
    g_dot = 1.0 - a * (1.0 - c) / later
    return States(f * r0 + g * v0, f_dot * r0 + g_dot * v0)
