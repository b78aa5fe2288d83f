"""Many invented satellites, the same every time."""

from math import tau
from random import Random

from tests.sky.stations import EPOCH_S
from trunnion.sky.elements import ElementSet, MeanElements

HIGH_ORBITS = (
    *((2.0057, 0.0081, 55.2), (1.0027, 0.0003, 0.05), (2.006, 0.7214, 63.4)),
    *((2.2713, 0.7287, 26.9), (8.017, 0.1213, 60.1), (1.0027, 0.0751, 42.7)),
)
"""Mean motion (1/day), eccentricity, inclination (deg)."""


def low_sets(count: int, seed: int = 7) -> list[ElementSet]:
    """Low orbits of all inclinations, some of them a little eccentric, some with much drag."""
    draw = Random(seed)
    return [_low(draw, number) for number in range(count)]


def high_sets(count: int, seed: int = 11) -> list[ElementSet]:
    """Navigation, geostationary, eccentric and transfer orbits by turns."""
    draw = Random(seed)
    return [
        _set(draw, 91_000 + number, *HIGH_ORBITS[number % len(HIGH_ORBITS)])
        for number in range(count)
    ]


def _low(draw: Random, number: int) -> ElementSet:
    mean_motion = draw.uniform(12.5, 15.8)
    eccentricity = draw.uniform(0.0001, 0.03 if mean_motion < 14.0 else 0.004)
    inclination_deg = draw.choice(
        [draw.uniform(40.0, 70.0), 97.5, draw.uniform(5.0, 30.0), 86.4, 142.1]
    )
    return _set(draw, 90_000 + number, mean_motion, eccentricity, inclination_deg)


def _set(
    draw: Random, number: int, mean_motion: float, eccentricity: float, inclination_deg: float
) -> ElementSet:
    mean = MeanElements(
        bstar=draw.uniform(1e-5, 3e-4),
        eccentricity=eccentricity,
        argument_of_perigee_deg=draw.uniform(0.0, 360.0),
        inclination_deg=inclination_deg,
        mean_anomaly_deg=draw.uniform(0.0, 360.0),
        mean_motion_rad_min=mean_motion * tau / 1440.0,
        node_deg=draw.uniform(0.0, 360.0),
    )
    return ElementSet(f"number {number}", number, EPOCH_S, mean=mean)
