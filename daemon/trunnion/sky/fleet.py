"""Many satellites from one viewpoint, each at instants of its own, in one go."""

from collections.abc import Sequence
from dataclasses import dataclass
from itertools import pairwise
from typing import NamedTuple

import numpy as np
from numpy.typing import NDArray

from trunnion.sky.earth_fixed import earth_fixed_many, sidereal_angles
from trunnion.sky.elements import Satellite
from trunnion.sky.instants import SECONDS_A_DAY, UNIX_EPOCH_JD
from trunnion.sky.kepler import States
from trunnion.sky.look import FloatArray, Looks
from trunnion.sky.topocentric import topocentric_many
from trunnion.sky.viewpoint import Viewpoint

IntArray = NDArray[np.int64]


class Sightings(NamedTuple):
    """States (TEME) and look angles, one each for every instant asked."""

    states: States
    looks: Looks


@dataclass(frozen=True, slots=True, eq=False)
class Fleet:
    """Satellites that share a viewpoint."""

    satellites: Sequence[Satellite]
    viewpoint: Viewpoint

    def seen(self, which: IntArray, utc_s: FloatArray) -> Sightings:
        """Of the satellites of these indices (in order, repeated) at these instants, shape (n,).

        Raises NoPosition when any has none.
        """
        days = np.floor(utc_s / SECONDS_A_DAY)
        jd_midnight, fraction = UNIX_EPOCH_JD + days, utc_s / SECONDS_A_DAY - days
        position_km, velocity_km_s = np.empty((3, len(utc_s))), np.empty((3, len(utc_s)))
        edges = [0, *(np.flatnonzero(np.diff(which)) + 1).tolist(), len(which)]
        for begin, end in pairwise(edges if len(which) else []):
            part = slice(begin, end)
            propagator = self.satellites[which[begin]].propagator
            position_km[:, part], velocity_km_s[:, part] = propagator.at_many(
                jd_midnight[part], fraction[part]
            )
        states = States(position_km, velocity_km_s)
        return Sightings(states, looks_of(states, utc_s, self.viewpoint))


def looks_of(states: States, utc_s: FloatArray, view: Viewpoint) -> Looks:
    """Look angles of states (TEME) at instants, shape (n,)."""
    days = np.floor(utc_s / SECONDS_A_DAY)
    ut1_s, pole_x, pole_y = view.earth.at_many(utc_s)
    ut1_fraction = (utc_s + ut1_s) / SECONDS_A_DAY - days
    sidereal = sidereal_angles(UNIX_EPOCH_JD + days, ut1_fraction)
    fixed = earth_fixed_many(*states, sidereal, pole_x, pole_y)
    return topocentric_many(*fixed, view, with_light_time=view.is_apparent)
