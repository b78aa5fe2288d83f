"""Passes of satellites in low orbits: few evaluations of SGP4, none of them on a grid.

The shape of the orbit tells near which instants a satellite may culminate. From one state there,
motion about a point mass leads to the culmination, and from the state at that, to rise and set;
what SGP4 says there corrects them. Four evaluations a pass.
"""

from collections.abc import Sequence
from typing import NamedTuple

import numpy as np
from numpy.typing import NDArray

from trunnion.sky.candidates import IntArray, MeanOrbits, closest_s
from trunnion.sky.elements import Satellite
from trunnion.sky.fleet import Fleet, Sightings, looks_of
from trunnion.sky.kepler import MU_KM3_S2, States, moved
from trunnion.sky.look import FloatArray, Looks
from trunnion.sky.viewpoint import Viewpoint

_SURELY_LOWER_DEG = 3.0
"""So much lower at a culmination by a rough look ahead, and SGP4 need not be asked again."""

_SETTLED_S = 0.02
"""A correction smaller than this leaves less than a millisecond to correct."""

EARTH_RADIUS_KM = 6371.0
_LONGEST_STEP_S = 200.0
_CLIMB_STEPS = 2
_EDGE_STEPS = 2
_MOST_ROUNDS = 8


class Arcs(NamedTuple):
    """Passes of many satellites, shape (n,): which, and instants (UTC) and elevation (deg)."""

    which: IntArray
    rise_s: FloatArray
    culmination_s: FloatArray
    set_s: FloatArray
    highest_deg: FloatArray


class _Tops(NamedTuple):
    """Culminations: which, when, the states and what is seen there."""

    which: IntArray
    utc_s: FloatArray
    states: States
    looks: Looks

    def where(self, is_chosen: NDArray[np.bool_]) -> "_Tops":
        return _Tops(
            self.which[is_chosen],
            self.utc_s[is_chosen],
            self.states.where(is_chosen),
            self.looks.where(is_chosen),
        )


def low_arcs(
    satellites: Sequence[Satellite],
    viewpoint: Viewpoint,
    window: tuple[float, float],
    above_deg: float,
) -> Arcs:
    """All passes that reach into a window, whole; raises NoPosition."""
    fleet = Fleet(satellites, viewpoint)
    orbits = MeanOrbits.at([each.propagator.satrec for each in satellites], window[0])
    which, near_s = closest_s(orbits, viewpoint.site, window, above_deg)
    tops = _culminations(fleet, which, near_s, above_deg)
    rise_s, set_s = (_edge(fleet, tops, above_deg, side) for side in (-1.0, 1.0))
    reaches_in = (set_s > window[0]) & (rise_s < window[1])
    tops = tops.where(reaches_in)
    return Arcs(
        tops.which, rise_s[reaches_in], tops.utc_s, set_s[reaches_in], tops.looks.elevation_deg
    )


def _culminations(fleet: Fleet, which: IntArray, near_s: FloatArray, above_deg: float) -> _Tops:
    """Those above an elevation."""
    first = fleet.seen(which, near_s)
    step_s = _to_top_s(first.states, first.looks)
    reaches = _soon_deg(first, step_s) >= above_deg - _SURELY_LOWER_DEG
    which, near_s = which[reaches], (near_s + step_s)[reaches]
    tops = _by_model(fleet.viewpoint, which, near_s, fleet.seen(which, near_s))
    return tops.where(tops.looks.elevation_deg >= above_deg)


def _soon_deg(seen: Sightings, after_s: FloatArray) -> FloatArray:
    """Elevation a minute or so later, were the motion a parabola under gravity alone."""
    motion, half = _motion(seen.looks), 0.5 * after_s * after_s
    pull = MU_KM3_S2 / np.linalg.norm(seen.states.position_km, axis=0) ** 3
    up = motion.up + motion.up_rate * after_s - half * pull * (motion.up + EARTH_RADIUS_KM)
    bend = motion.speed2 - pull * (motion.range2 + EARTH_RADIUS_KM * motion.up)
    range2 = motion.range2 + 2.0 * motion.along * after_s + 2.0 * half * bend
    sine = up / np.sqrt(np.maximum(range2, up * up))
    return np.asarray(np.degrees(np.arcsin(sine)))


def _by_model(view: Viewpoint, which: IntArray, from_s: FloatArray, seen: Sightings) -> _Tops:
    """The culminations near states, by the model from there."""
    states, looks, utc_s = seen.states, seen.looks, from_s
    for _ in range(_CLIMB_STEPS):
        step_s = _to_top_s(states, looks)
        utc_s = utc_s + step_s
        states = moved(states, step_s)
        looks = looks_of(states, utc_s, view)
        if not step_s.size or np.abs(step_s).max() < _SETTLED_S:
            break
    return _Tops(which, utc_s, states, looks)


def _to_top_s(states: States, looks: Looks) -> FloatArray:
    """Newton's step to where the sine of the elevation, up over range, is level.

    Level is where `up′ range² = up range range′`. Of the accelerations that are in the derivative
    of that, gravity alone is taken; the Earth's turning makes the convergence linear, by 0.1.
    """
    motion = _motion(looks)
    pull = MU_KM3_S2 / np.linalg.norm(states.position_km, axis=0) ** 3
    up_bend = -pull * (motion.up + EARTH_RADIUS_KM)
    along_rate = motion.speed2 - pull * (motion.range2 + EARTH_RADIUS_KM * motion.up)
    value = motion.up_rate * motion.range2 - motion.up * motion.along
    slope = up_bend * motion.range2 + motion.up_rate * motion.along - motion.up * along_rate
    return np.asarray(np.clip(-value / slope, -_LONGEST_STEP_S, _LONGEST_STEP_S))


class _Motion(NamedTuple):
    """Height above the station (km) and its rate, range squared, range times its rate, speed²."""

    up: FloatArray
    up_rate: FloatArray
    range2: FloatArray
    along: FloatArray
    speed2: FloatArray


def _motion(looks: Looks) -> _Motion:
    """As the station sees it."""
    elevation = np.radians(looks.elevation_deg)
    s, c = np.sin(elevation), np.cos(elevation)
    range_km, recede = np.asarray(looks.range_km), np.asarray(looks.range_rate_km_s)
    climb = np.radians(looks.elevation_rate_deg_s) * range_km
    turn = np.radians(looks.azimuth_rate_deg_s) * range_km * c
    return _Motion(
        range_km * s,
        recede * s + climb * c,
        range_km * range_km,
        range_km * recede,
        recede * recede + climb * climb + turn * turn,
    )


def _half_s(tops: _Tops, above_deg: float) -> FloatArray:
    """About how long from the culmination to the edge, were the orbit a circle."""
    radius_km = np.linalg.norm(tops.states.position_km, axis=0)
    lowest, highest = np.radians(above_deg), np.radians(tops.looks.elevation_deg)
    far, near = (
        np.arccos(EARTH_RADIUS_KM * np.cos(each) / radius_km) - each for each in (lowest, highest)
    )
    share = np.arccos(np.clip(np.cos(far) / np.cos(near), -1.0, 1.0))
    return np.asarray(share * radius_km / np.sqrt(_motion(tops.looks).speed2))


def _passed_s(looks: Looks, above_deg: float, from_top_s: FloatArray) -> FloatArray:
    """Seconds from the top to where the elevation is passed, on the parabola about the top.

    At the top itself the parabola is level; so a pass that only just reaches the threshold does not
    throw the step off.
    """
    rate, short_deg = looks.elevation_rate_deg_s, above_deg - looks.elevation_deg
    bend = np.divide(rate, from_top_s, out=np.zeros_like(rate), where=from_top_s != 0.0)
    steeper = np.sqrt(np.maximum(rate * rate + 2.0 * bend * short_deg, 0.0))
    both = rate + np.copysign(steeper, rate)
    step_s = np.divide(2.0 * short_deg, both, out=np.zeros_like(both), where=both != 0.0)
    return from_top_s + step_s


def _edge(fleet: Fleet, tops: _Tops, above_deg: float, side: float) -> FloatArray:
    """Rise (side −1) or set (+1): the instant where the elevation is passed."""
    view = fleet.viewpoint
    after_s = side * _half_s(tops, above_deg)
    for _ in range(_EDGE_STEPS):
        looks = looks_of(moved(tops.states, after_s), tops.utc_s + after_s, view)
        after_s = _passed_s(looks, above_deg, after_s)
    edge_s = tops.utc_s + after_s
    open_ = np.arange(len(edge_s))
    for _ in range(_MOST_ROUNDS):
        if not open_.size:
            break
        looks = fleet.seen(tops.which[open_], edge_s[open_]).looks
        from_top_s = edge_s[open_] - tops.utc_s[open_]
        later_s = _passed_s(looks, above_deg, from_top_s)
        edge_s[open_] += later_s - from_top_s
        open_ = open_[np.abs(later_s - from_top_s) > _SETTLED_S]
    return edge_s
