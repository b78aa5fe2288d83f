"""When satellites in low orbits come closest to a station: from the shape of their orbits alone.

A plane turns with its node, the satellite runs in it with its perigee, both at the mean rates of
SGP4, and the station is carried round by the Earth. Once a revolution the satellite is where the
plane is nearest the station; good to a minute or so, which is for others to refine.
"""

from collections.abc import Sequence
from math import pi, radians
from typing import Any, NamedTuple

import numpy as np
from numpy.typing import NDArray

from trunnion.sky.earth_fixed import EARTH_RATE_RAD_S, sidereal_angle
from trunnion.sky.instants import SECONDS_A_DAY, UNIX_EPOCH_JD, julian_date
from trunnion.sky.look import FloatArray
from trunnion.sky.site import Site

MARGIN_DEG = 2.0
"""Added to what the station can see, for what the mean orbit leaves out."""

LONGEST_MIN, MOST_ECCENTRIC = 225.0, 0.1
"""Up to here the orbit is low and round enough for this to hold."""

IntArray = NDArray[np.int64]

_START_REVOLUTIONS = 0.8
"""Closer together than two close approaches ever are, so that none is stepped over."""

_STEPS = 2
_SAME_S = 600.0


class MeanOrbits(NamedTuple):
    """Angles (rad) at an instant, their rates (rad/s), and the shapes; one column an orbit."""

    inclination: FloatArray
    eccentricity: FloatArray
    semi_major_km: FloatArray
    node: FloatArray
    node_rate: FloatArray
    perigee: FloatArray
    perigee_rate: FloatArray
    anomaly: FloatArray
    anomaly_rate: FloatArray

    @classmethod
    def at(cls, satrecs: Sequence[Any], utc_s: float) -> "MeanOrbits":
        """Of initialised SGP4 records, carried to one instant."""
        return cls(*np.array([_at(each, utc_s) for each in satrecs]).reshape(-1, 9).T)


def closest_s(
    orbits: MeanOrbits, site: Site, window: tuple[float, float], above_deg: float
) -> tuple[IntArray, FloatArray]:
    """Which may culminate above an elevation, and near when; a revolution beyond both ends too.

    The orbits are those of the window's begin. In order of orbit and time.
    """
    turn_s = 2.0 * pi / (orbits.anomaly_rate + orbits.perigee_rate)
    counts = np.ceil((window[1] - window[0] + 2.5 * turn_s) / (_START_REVOLUTIONS * turn_s))
    which = np.repeat(np.arange(len(turn_s)), counts.astype(int))
    first = np.cumsum(counts) - counts
    place = np.arange(len(which)) - first[which]
    after_s = (_START_REVOLUTIONS * place - 1.0) * turn_s[which]
    carried = _carried(site, window[0])
    some = MeanOrbits(*(column[which] for column in orbits))
    for _ in range(_STEPS):
        behind = _behind(some, carried, after_s)
        after_s = after_s + behind * (turn_s[which] / (2.0 * pi))
    is_new = np.append(True, (np.diff(which) != 0) | (np.diff(after_s) > _SAME_S))
    is_near = is_new & (_highest(some, carried, after_s) >= radians(above_deg))
    return which[is_near], window[0] + after_s[is_near]


class _Carried(NamedTuple):
    """The station: right ascension (rad) at the window's begin, and its place on the globe."""

    right_ascension: float
    level: float
    up: float
    distance_km: float


def _carried(site: Site, utc_s: float) -> _Carried:
    x, y, z = site.position_km
    distance_km = float(np.linalg.norm(site.position_km))
    turned = sidereal_angle(*julian_date(utc_s)) + float(np.arctan2(y, x))
    return _Carried(turned, float(np.hypot(x, y)) / distance_km, z / distance_km, distance_km)


def _at(satrec: Any, utc_s: float) -> tuple[float, ...]:
    epoch_s = (satrec.jdsatepoch - UNIX_EPOCH_JD + satrec.jdsatepochF) * SECONDS_A_DAY
    minutes = (utc_s - epoch_s) / 60.0
    return (
        satrec.inclo,
        satrec.ecco,
        satrec.a * satrec.radiusearthkm,
        satrec.nodeo + satrec.nodedot * minutes,
        satrec.nodedot / 60.0,
        satrec.argpo + satrec.argpdot * minutes,
        satrec.argpdot / 60.0,
        satrec.mo + satrec.mdot * minutes,
        satrec.mdot / 60.0,
    )


def _behind(orbits: MeanOrbits, station: _Carried, after_s: FloatArray) -> FloatArray:
    """How far ahead the station's argument of latitude is, within half a turn."""
    true = _true_anomaly(orbits, after_s)
    latitude = true + orbits.perigee + orbits.perigee_rate * after_s
    p, q = _from_node(orbits, station, after_s)
    c, s = np.cos(orbits.inclination), np.sin(orbits.inclination)
    ahead = np.arctan2(q * c + station.up * s, p) - latitude
    behind: FloatArray = (ahead + pi) % (2.0 * pi) - pi
    return behind


def _highest(orbits: MeanOrbits, station: _Carried, after_s: FloatArray) -> FloatArray:
    """Elevation (rad) at the closest approach, more rather than less."""
    _, q = _from_node(orbits, station, after_s)
    off_plane = station.up * np.cos(orbits.inclination) - q * np.sin(orbits.inclination)
    apart = np.abs(np.arcsin(np.clip(off_plane, -1.0, 1.0))) - radians(MARGIN_DEG)
    apart = np.maximum(apart, 0.0)
    highest_km = orbits.semi_major_km * (1.0 + orbits.eccentricity)
    return np.arctan2(np.cos(apart) - station.distance_km / highest_km, np.sin(apart))


def _true_anomaly(orbits: MeanOrbits, after_s: FloatArray) -> FloatArray:
    """To the second order in the eccentricity."""
    mean, e = orbits.anomaly + orbits.anomaly_rate * after_s, orbits.eccentricity
    return mean + e * (2.0 + 2.5 * e * np.cos(mean)) * np.sin(mean)


def _from_node(
    orbits: MeanOrbits, station: _Carried, after_s: FloatArray
) -> tuple[FloatArray, FloatArray]:
    """The station's coordinates in the equator, from the node and at a right angle to it."""
    angle = station.right_ascension - orbits.node
    angle = angle + (EARTH_RATE_RAD_S - orbits.node_rate) * after_s
    return station.level * np.cos(angle), station.level * np.sin(angle)
