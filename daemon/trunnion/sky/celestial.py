"""Celestial targets: from the course of a place among the stars to look angles."""

from dataclasses import dataclass
from typing import Any

import numpy as np

from trunnion.sky.course import Float, course_at, course_at_many
from trunnion.sky.earth_fixed import (
    EARTH_RATE_RAD_S,
    earth_fixed,
    earth_fixed_many,
    rotation_angle,
    rotation_angles,
)
from trunnion.sky.instants import SECONDS_A_DAY, UNIX_EPOCH_JD, julian_date
from trunnion.sky.leap_seconds import TT_MINUS_TAI_S
from trunnion.sky.look import FloatArray, Look, Looks
from trunnion.sky.place import Place
from trunnion.sky.site import Vector
from trunnion.sky.topocentric import LIGHT_KM_S, topocentric, topocentric_many
from trunnion.sky.viewpoint import Viewpoint

J2000_UTC_S = 946_728_000.0
"""2000-01-01T12:00 as POSIX seconds."""


@dataclass(frozen=True, slots=True)
class Celestial:
    """A body's centre, or a direction among the stars, seen from a viewpoint: a Target."""

    place: Place
    viewpoint: Viewpoint

    @property
    def name(self) -> str:
        """The way it is written in a plan."""
        return self.place.name

    def look(self, utc_s: float) -> Look:
        """Where it stands; raises NoPosition."""
        view = self.viewpoint
        turned = view.earth.at(utc_s)
        tt_days = _tt_days(utc_s, view.earth.leap_seconds.at(utc_s))
        jd_midnight, fraction = julian_date(utc_s)
        angle = rotation_angle(jd_midnight, fraction + turned[0] / SECONDS_A_DAY)
        state = course_at(self.place, tt_days, is_apparent=view.is_apparent)
        position_km, velocity_km_s = earth_fixed(*state, angle, turned)
        if view.is_apparent:
            position_km = _carried(position_km, view.site.position_km)
        look = topocentric(position_km, velocity_km_s, view, with_light_time=False)
        return look if self.place.has_range else look._replace(range_km=None, range_rate_km_s=None)

    def looks(self, utc_s: FloatArray) -> Looks:
        """Where it stands at many instants; raises NoPosition when it has none at any of them."""
        view = self.viewpoint
        ut1_s, pole_x, pole_y = view.earth.at_many(utc_s)
        tt_days = _tt_days(utc_s, view.earth.leap_seconds.at_many(utc_s))
        days = np.floor(utc_s / SECONDS_A_DAY)
        fraction = (utc_s - days * SECONDS_A_DAY) / SECONDS_A_DAY
        angles = rotation_angles(UNIX_EPOCH_JD + days, fraction + ut1_s / SECONDS_A_DAY)
        state = course_at_many(self.place, tt_days, is_apparent=view.is_apparent)
        position_km, velocity_km_s = earth_fixed_many(*state, angles, pole_x, pole_y)
        if view.is_apparent:
            position_km = np.stack(_carried(tuple(position_km), view.site.position_km))
        looks = topocentric_many(position_km, velocity_km_s, view, with_light_time=False)
        has_range = self.place.has_range
        return looks if has_range else looks._replace(range_km=None, range_rate_km_s=None)


def _tt_days(utc_s: Float, tai_minus_utc_s: Float) -> Float:
    """Days of terrestrial time from J2000."""
    return (utc_s - J2000_UTC_S + (tai_minus_utc_s + TT_MINUS_TAI_S)) / SECONDS_A_DAY


def _carried(position_km: tuple[Any, ...], site_km: Vector) -> tuple[Any, ...]:
    """Aberration by the Earth's rotation, 0.3″ at most, which carries the site eastwards.

    For three numbers or three arrays.
    """
    x, y, z = position_km
    carried = EARTH_RATE_RAD_S / LIGHT_KM_S * (x * x + y * y + z * z) ** 0.5
    return x - carried * site_km[1], y + carried * site_km[0], z
