"""When a target can be pointed at: the stretches in which it is clear of everything."""

from collections.abc import Callable
from typing import NamedTuple

import numpy as np

from trunnion.mount.clearance import Clearance
from trunnion.sky.look import FloatArray, Looks
from trunnion.track.looking import finite_looks
from trunnion.track.wanted import Wanted

GRID_S = 1.0
"""A target that comes into sight for less than this is not worth a contact."""

MOST_STEPS = 50_000
"""Beyond half a day the grid widens."""

EDGE_S = 0.01
"""How well the ends of a stretch are found."""


class Stretch(NamedTuple):
    """From when until when (UTC, POSIX seconds)."""

    begin_s: float
    end_s: float


def clear_stretches(wanted: Wanted, clearance: Clearance) -> tuple[Stretch, ...]:
    """The stretches of the wanted time in which the target is clear; raises NoPosition."""
    clearance = clearance.with_margin(wanted.margin_deg)

    def is_clear(utc_s: float) -> bool:
        look = wanted.target.look(utc_s)
        return look.elevation_deg >= wanted.minimum_elevation_deg and clearance.is_clear(
            look.azimuth_deg, look.elevation_deg
        )

    times = grid(wanted.from_s, wanted.until_s)
    clear = _are_clear(finite_looks(wanted.target, times), wanted, clearance)
    edges = np.flatnonzero(clear[1:] != clear[:-1])
    bounds = [
        *([wanted.from_s] if clear[0] else []),
        *(_edge(is_clear, float(times[i]), float(times[i + 1])) for i in edges),
        *([wanted.until_s] if clear[-1] else []),
    ]
    pairs = zip(bounds[::2], bounds[1::2], strict=True)
    return tuple(Stretch(begin_s, end_s) for begin_s, end_s in pairs if end_s > begin_s)


def grid(from_s: float, until_s: float, step_s: float = GRID_S) -> FloatArray:
    """Instants from one to the other, both included, at most `step_s` apart but for very long."""
    steps = min(int(np.ceil((until_s - from_s) / step_s)), MOST_STEPS)
    return np.linspace(from_s, until_s, max(2, steps + 1))


def _are_clear(looks: Looks, wanted: Wanted, clearance: Clearance) -> np.ndarray:
    pairs = zip(looks.azimuth_deg.tolist(), looks.elevation_deg.tolist(), strict=True)
    return np.array(
        [
            elevation_deg >= wanted.minimum_elevation_deg
            and clearance.is_clear(azimuth_deg, elevation_deg)
            for azimuth_deg, elevation_deg in pairs
        ]
    )


def _edge(is_clear: Callable[[float], bool], before_s: float, after_s: float) -> float:
    """The instant between the two at which it changes, on the clear side."""
    is_setting = is_clear(before_s)
    while after_s - before_s > EDGE_S:
        middle_s = 0.5 * (before_s + after_s)
        if is_clear(middle_s) == is_setting:
            before_s = middle_s
        else:
            after_s = middle_s
    return before_s if is_setting else after_s
