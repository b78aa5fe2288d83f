"""What can be measured in a series of readings of one joint. Pure.

Laws of uniform acceleration throughout.
"""

from collections.abc import Sequence
from itertools import pairwise
from statistics import pstdev
from typing import NamedTuple

_RATE_OVER = 3


class Sample(NamedTuple):
    """An angle (deg) and the monotonic second it was true at."""

    taken_s: float
    angle_deg: float


def moved_deg(samples: Sequence[Sample]) -> float:
    """From the first to the last; positive for a reading that grows."""
    return samples[-1].angle_deg - samples[0].angle_deg


def noise_deg(samples: Sequence[Sample]) -> float:
    """The standard deviation of readings at rest."""
    return pstdev(sample.angle_deg for sample in samples)


def step_deg(samples: Sequence[Sample]) -> float | None:
    """The least difference between two readings, which is the encoder's step or above it."""
    steps = {round(abs(b.angle_deg - a.angle_deg), 9) for a, b in pairwise(samples)}
    return min((step for step in steps if step > 1e-9), default=None)


def latency_s(ordered_s: float, samples: Sequence[Sample], least_deg: float) -> float | None:
    """From an order to the first reading that has moved by this much; None for none."""
    begin_deg = samples[0].angle_deg
    moved = (s.taken_s for s in samples if abs(s.angle_deg - begin_deg) >= least_deg)
    first_s = next(moved, None)
    return None if first_s is None else max(0.0, first_s - ordered_s)


def highest_rate_deg_s(samples: Sequence[Sample]) -> float:
    """The highest rate, each over some readings so that noise counts less; never negative."""
    return max((abs(rate) for _, rate in _rates(samples)), default=0.0)


def acceleration_deg_s2(samples: Sequence[Sample]) -> float | None:
    """The even acceleration from rest, between a fifth and four fifths of the highest rate."""
    top = highest_rate_deg_s(samples)
    ramp = []
    for at_s, rate in _rates(samples):
        ramp.append((at_s, abs(rate)))
        if abs(rate) >= 0.8 * top:
            break
    climbing = [(at_s, rate) for at_s, rate in ramp if rate >= 0.2 * top]
    if top <= 0.0 or len(climbing) < 2:
        return None
    (begin_s, low), (end_s, high) = climbing[0], climbing[-1]
    return (high - low) / (end_s - begin_s) if end_s > begin_s and high > low else None


def stopping_deg(samples: Sequence[Sample]) -> float:
    """How far it went after the first of these readings, at which the stop was ordered."""
    return abs(moved_deg(samples))


def _rates(samples: Sequence[Sample]) -> list[tuple[float, float]]:
    """The middle second and the rate of each short stretch."""
    stretches = zip(samples, samples[_RATE_OVER:], strict=False)
    return [
        ((a.taken_s + b.taken_s) / 2, (b.angle_deg - a.angle_deg) / (b.taken_s - a.taken_s))
        for a, b in stretches
        if b.taken_s > a.taken_s
    ]
