"""The Sun as a target: for the noise it makes, and for keeping away from it."""

from dataclasses import dataclass
from math import hypot

import numpy as np

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
from trunnion.sky.solar import Float, sun_at, sun_at_many
from trunnion.sky.topocentric import LIGHT_KM_S, topocentric, topocentric_many
from trunnion.sky.viewpoint import Viewpoint

J2000_UTC_S = 946_728_000.0
"""2000-01-01T12:00 as POSIX seconds."""


@dataclass(frozen=True, slots=True)
class Sun:
    """The centre of the Sun's disc, seen from a viewpoint: a Target."""

    viewpoint: Viewpoint

    @property
    def name(self) -> str:
        """The way it is written in a plan."""
        return "sun"

    def look(self, utc_s: float) -> Look:
        """Where it stands; raises NoPosition outside 1900 to 2100."""
        view = self.viewpoint
        turned = view.earth.at(utc_s)
        position_km, velocity_km_s = sun_at(
            _tt_days(utc_s, view.earth.leap_seconds.at(utc_s)), is_apparent=view.is_apparent
        )
        jd_midnight, fraction = julian_date(utc_s)
        angle = rotation_angle(jd_midnight, fraction + turned[0] / SECONDS_A_DAY)
        (x, y, z), velocity_km_s = earth_fixed(position_km, velocity_km_s, angle, turned)
        if view.is_apparent:  # aberration by the Earth's rotation
            carried = EARTH_RATE_RAD_S * hypot(x, y, z) / LIGHT_KM_S
            x, y = x - carried * view.site.position_km[1], y + carried * view.site.position_km[0]
        return topocentric((x, y, z), velocity_km_s, view, with_light_time=False)

    def looks(self, utc_s: FloatArray) -> Looks:
        """Where it stands at many instants; raises NoPosition outside 1900 to 2100."""
        view = self.viewpoint
        ut1_s, pole_x, pole_y = view.earth.at_many(utc_s)
        tt_days = _tt_days(utc_s, view.earth.leap_seconds.at_many(utc_s))
        days = np.floor(utc_s / SECONDS_A_DAY)
        fraction = (utc_s - days * SECONDS_A_DAY) / SECONDS_A_DAY
        position_km, velocity_km_s = earth_fixed_many(
            *sun_at_many(tt_days, is_apparent=view.is_apparent),
            rotation_angles(UNIX_EPOCH_JD + days, fraction + ut1_s / SECONDS_A_DAY),
            pole_x,
            pole_y,
        )
        if view.is_apparent:
            carried = EARTH_RATE_RAD_S * np.linalg.norm(position_km, axis=0) / LIGHT_KM_S
            site_x, site_y, _ = view.site.position_km
            position_km = position_km + carried * np.array([[-site_y], [site_x], [0.0]])
        return topocentric_many(position_km, velocity_km_s, view, with_light_time=False)


def _tt_days(utc_s: Float, tai_minus_utc_s: Float) -> Float:
    """Days of terrestrial time from J2000."""
    return (utc_s - J2000_UTC_S + (tai_minus_utc_s + TT_MINUS_TAI_S)) / SECONDS_A_DAY
