"""Passes of satellites in high or eccentric orbits, which rise and fall slowly but in many ways.

The nodes are spaced evenly in eccentric anomaly, so that they are close where the satellite is
fast. Between nodes every maximum and minimum of the elevation is found by the sign of its rate,
and then every passage of the threshold.
"""

from collections.abc import Sequence
from math import pi
from typing import Any, NamedTuple

import numpy as np
from numpy.typing import NDArray

from trunnion.sky.candidates import IntArray, MeanOrbits
from trunnion.sky.elements import Satellite
from trunnion.sky.falsi import roots
from trunnion.sky.fleet import Fleet
from trunnion.sky.look import FloatArray
from trunnion.sky.viewpoint import Viewpoint

_NODES_A_TURN = 30.0
_MORE_NODES_BY_ECCENTRICITY = 100.0
_WITHIN_S = 1e-3


class Profile(NamedTuple):
    """Elevation over time: at all nodes, extremes and passages, in order of satellite and time."""

    which: IntArray
    utc_s: FloatArray
    elevation_deg: FloatArray
    is_passage: NDArray[np.bool_]

    def part(self, rows: slice) -> "Profile":
        """Some rows."""
        return Profile(
            self.which[rows], self.utc_s[rows], self.elevation_deg[rows], self.is_passage[rows]
        )


def high_profile(
    satellites: Sequence[Satellite],
    viewpoint: Viewpoint,
    window: tuple[float, float],
    above_deg: float,
) -> Profile:
    """What the passes above an elevation can be read from; raises NoPosition."""
    fleet = Fleet(satellites, viewpoint)
    orbits = MeanOrbits.at([each.propagator.satrec for each in satellites], window[0])
    nodes = [_nodes_s(MeanOrbits(*column), window) for column in zip(*orbits, strict=True)]
    which = np.repeat(np.arange(len(nodes)), [len(each) for each in nodes])
    utc_s = np.concatenate([np.empty(0), *nodes])
    looks = fleet.seen(which, utc_s).looks
    elevation_deg, rate = looks.elevation_deg, looks.elevation_rate_deg_s

    def rates(some: IntArray, at_s: FloatArray) -> FloatArray:
        return fleet.seen(turning[some], at_s).looks.elevation_rate_deg_s

    turns = _changes(which, rate > 0.0)
    turning = which[turns]
    extremes_s = roots(rates, utc_s[turns], utc_s[turns + 1], _WITHIN_S)
    highest = fleet.seen(turning, extremes_s).looks.elevation_deg
    which, utc_s, elevation_deg = _merged(
        (which, utc_s, elevation_deg), (turning, extremes_s, highest)
    )

    def excess_deg(some: IntArray, at_s: FloatArray) -> FloatArray:
        return fleet.seen(passing[some], at_s).looks.elevation_deg - above_deg

    passages = _changes(which, elevation_deg >= above_deg)
    passing = which[passages]
    passages_s = roots(excess_deg, utc_s[passages], utc_s[passages + 1], _WITHIN_S)
    level = np.full(len(passages), above_deg)
    is_passage = np.zeros(len(which))
    columns = _merged(
        (which, utc_s, elevation_deg, is_passage),
        (passing, passages_s, level, is_passage[: len(passages)] + 1.0),
    )
    return Profile(columns[0], columns[1], columns[2], columns[3] > 0.0)


def _nodes_s(orbit: MeanOrbits, window: tuple[float, float]) -> FloatArray:
    """Instants from the window's begin to its end for one orbit."""
    e = float(orbit.eccentricity)
    count = _NODES_A_TURN + _MORE_NODES_BY_ECCENTRICITY * e
    turn_s = 2.0 * pi / float(orbit.anomaly_rate)
    turns = np.arange(-1.0, (window[1] - window[0]) / turn_s + 2.0, 1.0 / count)
    eccentric = 2.0 * pi * turns
    since_perigee_s = (eccentric - e * np.sin(eccentric)) / float(orbit.anomaly_rate)
    anomaly = float(orbit.anomaly) % (2.0 * pi)
    utc_s = window[0] + since_perigee_s - anomaly / float(orbit.anomaly_rate)
    inside = utc_s[(utc_s > window[0]) & (utc_s < window[1])]
    return np.concatenate((window[:1], inside, window[1:]))


def _changes(which: IntArray, condition: NDArray[np.bool_]) -> IntArray:
    """Where a condition is another at the next node of the same satellite."""
    same = which[1:] == which[:-1]
    found: IntArray = np.flatnonzero(same & (condition[1:] != condition[:-1]))
    return found


def _merged(
    first: tuple[NDArray[Any], ...], second: tuple[NDArray[Any], ...]
) -> tuple[NDArray[Any], ...]:
    """Two sets of columns as one, in order of the first two."""
    columns = [np.concatenate(pair) for pair in zip(first, second, strict=True)]
    order = np.lexsort((columns[1], columns[0]))
    return tuple(column[order] for column in columns)
