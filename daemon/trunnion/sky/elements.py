"""Satellites by their orbit elements: SGP4, seen from a viewpoint."""

from dataclasses import dataclass, field
from math import radians, tau
from typing import Any, NamedTuple

import numpy as np
from sgp4.api import SGP4_ERRORS, WGS72, Satrec

from trunnion.sky.earth_fixed import (
    earth_fixed_many,
    sidereal_angle,
    sidereal_angles,
)
from trunnion.sky.errors import NoPosition
from trunnion.sky.instants import SECONDS_A_DAY, UNIX_EPOCH_JD, julian_date
from trunnion.sky.look import FloatArray, Look, Looks
from trunnion.sky.sight import sight
from trunnion.sky.site import Vector
from trunnion.sky.topocentric import topocentric_many
from trunnion.sky.viewpoint import Viewpoint

BLOCK = 4096

SGP4_EPOCH_JD = 2433281.5
"""The midnight from which SGP4 counts the days of an epoch: 1949-12-31."""


class MeanElements(NamedTuple):
    """The elements that SGP4 takes, where they did not come as two lines."""

    bstar: float
    eccentricity: float
    argument_of_perigee_deg: float
    inclination_deg: float
    mean_anomaly_deg: float
    mean_motion_rad_min: float
    node_deg: float


@dataclass(frozen=True, slots=True)
class ElementSet:
    """Elements as they were issued, checked by whoever read them: two lines, or mean elements."""

    name: str
    catalogue_number: int
    epoch_utc_s: float
    line_1: str = ""
    line_2: str = ""
    mean: MeanElements | None = None

    def age_days(self, utc_s: float) -> float:
        """Days from the epoch to this instant; negative before the epoch."""
        return (utc_s - self.epoch_utc_s) / SECONDS_A_DAY


class Propagator:
    """SGP4 for one element set: the state in the true equator, mean equinox frame (TEME).

    Elements are issued with the gravity constants of WGS 72, the default; others are for checks.
    """

    def __init__(self, element_set: ElementSet, gravity: int = WGS72) -> None:
        self._element_set = element_set
        self._satrec: Any = _satrec(element_set, gravity)

    def at(self, jd_midnight: float, fraction: float) -> tuple[Vector, Vector]:
        """Position (km) and velocity (km/s); raises NoPosition by SGP4's own error code.

        The code counts, not the numbers: for a decayed orbit those look like any others.
        """
        error, position_km, velocity_km_s = self._satrec.sgp4(jd_midnight, fraction)
        if error:
            raise NoPosition(self._sentence(error))
        return position_km, velocity_km_s

    def at_many(
        self, jd_midnight: FloatArray, fraction: FloatArray
    ) -> tuple[FloatArray, FloatArray]:
        """The same for arrays of shape (n,); states of shape (3, n)."""
        errors, positions_km, velocities_km_s = self._satrec.sgp4_array(jd_midnight, fraction)
        if errors.any():
            raise NoPosition(self._sentence(int(errors[np.flatnonzero(errors)[0]])))
        return positions_km.T, velocities_km_s.T

    @property
    def satrec(self) -> Any:
        """SGP4's own record, to read from."""
        return self._satrec

    @property
    def period_min(self) -> float:
        """Minutes of a revolution, by the mean motion."""
        return tau / float(self._satrec.no_kozai)

    def _sentence(self, error: int) -> str:
        reason = SGP4_ERRORS.get(error, f"error {error}")
        return f"{self._element_set.name}: expected an orbit, got none from SGP4: {reason}"


def _satrec(element_set: ElementSet, gravity: int) -> Any:
    mean = element_set.mean
    if mean is None:
        return Satrec.twoline2rv(element_set.line_1, element_set.line_2, gravity)
    satrec = Satrec()
    satrec.sgp4init(
        gravity,
        "i",  # the improved mode, which `twoline2rv` takes too
        0,  # SGP4 does not look at the catalogue number, and not all have room here
        element_set.epoch_utc_s / SECONDS_A_DAY + (UNIX_EPOCH_JD - SGP4_EPOCH_JD),
        mean.bstar,
        0.0,  # the derivatives of the mean motion are not for SGP4
        0.0,
        mean.eccentricity,
        radians(mean.argument_of_perigee_deg),
        radians(mean.inclination_deg),
        radians(mean.mean_anomaly_deg),
        mean.mean_motion_rad_min,
        radians(mean.node_deg),
    )
    return satrec


@dataclass(frozen=True, slots=True, eq=False)
class Satellite:
    """An element set seen from a viewpoint: a Target."""

    element_set: ElementSet
    viewpoint: Viewpoint
    _propagator: Propagator = field(init=False, repr=False)

    def __post_init__(self) -> None:
        object.__setattr__(self, "_propagator", Propagator(self.element_set))

    def __reduce__(self) -> tuple[type["Satellite"], tuple[ElementSet, Viewpoint]]:
        return Satellite, (self.element_set, self.viewpoint)

    @property
    def name(self) -> str:
        """The satellite's name, or its catalogue number where it has none."""
        return self.element_set.name

    @property
    def propagator(self) -> Propagator:
        """SGP4 for its elements."""
        return self._propagator

    @property
    def period_min(self) -> float:
        """Minutes of a revolution, by the mean motion."""
        return self._propagator.period_min

    def look(self, utc_s: float) -> Look:
        """Where it stands; raises NoPosition."""
        view = self.viewpoint
        jd_midnight, fraction = julian_date(utc_s)
        state = self._propagator.at(jd_midnight, fraction)
        turned = view.earth.at(utc_s)
        sidereal = sidereal_angle(jd_midnight, fraction + turned[0] / SECONDS_A_DAY)
        return sight(state, sidereal, turned, view)

    def looks(self, utc_s: FloatArray) -> Looks:
        """Where it stands at many instants; raises NoPosition when it has none at any of them."""
        if len(utc_s) <= BLOCK:
            return self._looks(utc_s)
        parts = [self._looks(utc_s[at : at + BLOCK]) for at in range(0, len(utc_s), BLOCK)]
        return Looks(*map(np.concatenate, zip(*parts, strict=True)))

    def _looks(self, utc_s: FloatArray) -> Looks:
        """Of so few instants that all that is worked out of them stays in the processor's cache."""
        view = self.viewpoint
        days = np.floor(utc_s / SECONDS_A_DAY)
        fraction = (utc_s - days * SECONDS_A_DAY) / SECONDS_A_DAY
        jd_midnight = UNIX_EPOCH_JD + days
        position_km, velocity_km_s = self._propagator.at_many(jd_midnight, fraction)
        ut1_s, pole_x, pole_y = view.earth.at_many(utc_s)
        sidereal = sidereal_angles(jd_midnight, fraction + ut1_s / SECONDS_A_DAY)
        position_km, velocity_km_s = earth_fixed_many(
            position_km, velocity_km_s, sidereal, pole_x, pole_y
        )
        return topocentric_many(position_km, velocity_km_s, view, with_light_time=view.is_apparent)
