"""How far look angles can be trusted: what may be wrong with them, each in degrees on the sky.

Not a guarantee: an expectation, each part of it with the source of its size.
"""

from collections.abc import Iterator
from math import cos, hypot, pi, radians, sqrt, tan
from typing import NamedTuple

from trunnion.sky.angle_table import AngleTable
from trunnion.sky.bodies import SeriesBody, series_limit_arcsec
from trunnion.sky.celestial import Celestial
from trunnion.sky.earth_fixed import EARTH_RATE_RAD_S
from trunnion.sky.elements import Satellite
from trunnion.sky.ephemeris import EphemerisCraft
from trunnion.sky.growth import position_error_km
from trunnion.sky.look import Look, Target
from trunnion.sky.refraction import NoRefraction
from trunnion.sky.topocentric import LIGHT_KM_S
from trunnion.sky.viewpoint import Viewpoint
from trunnion.sky.whereabouts import earth_fixed_km

DEGREE = 180.0 / pi
LARGEST_UT1_MINUS_UTC_S = 0.9
LARGEST_POLE_DEG = 0.6 / 3600.0
COMMON_PRACTICE = "common practice, no source"


class Doubt(NamedTuple):
    """One thing that may be wrong: what, how much on the sky (deg), and who says so."""

    what: str
    angle_deg: float
    source: str


def doubts(target: Target, utc_s: float, clock_error_s: float = 0.0) -> tuple[Doubt, ...]:
    """What may be wrong with the target's look angles at this instant; raises NoPosition.

    `clock_error_s` is how far the station's clock may be off.
    """
    look = target.look(utc_s)
    found = list(_of_the_target(target, look, utc_s))
    viewpoint = getattr(target, "viewpoint", None)
    if isinstance(viewpoint, Viewpoint):
        found += _of_the_viewpoint(viewpoint, look, utc_s)
    if clock_error_s:
        found.append(Doubt("clock", sky_rate_deg_s(look) * clock_error_s, "the clock's own bound"))
    return tuple(found)


def expected_error_deg(found: tuple[Doubt, ...]) -> float:
    """All doubts together, as independent of each other: the root of the sum of their squares."""
    return sqrt(sum(each.angle_deg**2 for each in found))


def sky_rate_deg_s(look: Look) -> float:
    """How fast the target moves on the sky."""
    across = look.azimuth_rate_deg_s * cos(radians(look.elevation_deg))
    return hypot(across, look.elevation_rate_deg_s)


def _of_the_target(target: Target, look: Look, utc_s: float) -> Iterator[Doubt]:
    if isinstance(target, Satellite) and look.range_km:
        error_km = position_error_km(target.period_min, target.element_set.age_days(utc_s))
        angle_deg = DEGREE * error_km / look.range_km
        yield Doubt("age of the orbit elements", angle_deg, COMMON_PRACTICE)
    elif isinstance(target, Celestial) and isinstance(target.place, SeriesBody):
        limit_arcsec = series_limit_arcsec(target.place.body, utc_s)
        yield Doubt("built-in series", limit_arcsec / 3600.0, "largest difference from JPL DE421")
    elif isinstance(target, EphemerisCraft | AngleTable):
        yield Doubt("the file's own accuracy", 0.0, "not told in the file")


def _of_the_viewpoint(view: Viewpoint, look: Look, utc_s: float) -> Iterator[Doubt]:
    if not view.earth.covers(utc_s):
        what = "Earth orientation: none for this instant"
        yield Doubt(what, _standing_earth_deg(view, look), "|UT1 − UTC| < 0.9 s, ITU-R TF.460")
    if view.earth.leap_seconds.expires_s < utc_s:
        what = "leap-second table expired"
        yield Doubt(what, 0.5 / 3600.0, "the Moon's motion in a second; satellites unaffected")
    if not view.is_apparent and look.range_km:
        angle_deg = sky_rate_deg_s(look) * look.range_km / LIGHT_KM_S
        yield Doubt("light time left out", min(angle_deg, 0.006), "range over the speed of light")
    if isinstance(view.refraction, NoRefraction):
        yield Doubt("refraction left out", _lift_deg(look.elevation_deg), "ITU-R P.834, section 4")


def _standing_earth_deg(view: Viewpoint, look: Look) -> float:
    """How far the Earth's turn by 0.9 s displaces the target; by its distance from the axis."""
    turn = EARTH_RATE_RAD_S * LARGEST_UT1_MINUS_UTC_S
    place_km = earth_fixed_km(look, view.site)
    if place_km is None or not look.range_km:
        return DEGREE * turn + LARGEST_POLE_DEG
    share = hypot(*place_km) / look.range_km
    return DEGREE * turn * hypot(*place_km[:2]) / look.range_km + LARGEST_POLE_DEG * share


def _lift_deg(elevation_deg: float) -> float:
    """Radio refraction at sea level for a true elevation; none where nothing is seen."""
    if elevation_deg < -1.0:
        return 0.0
    if elevation_deg < 10.0:
        theta = max(elevation_deg, 0.0)
        return 1.0 / (1.728 + 0.5411 * theta + 0.03723 * theta * theta)
    return DEGREE * 315e-6 / tan(radians(min(elevation_deg, 89.99)))
