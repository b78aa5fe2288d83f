"""Sun, Moon and planets by the built-in series: no file needed, good to a few seconds of arc.

Sources, all by way of ERFA: the Earth by epv00 (after VSOP2000), the Moon by moon98 (Meeus, after
ELP 2000-82), the planets by plan94 (Simon et al. 1994); what these leave out by refinement.py.
"""

from dataclasses import dataclass

import erfa
import numpy as np

from trunnion.sky.light import as_seen, earth_state
from trunnion.sky.look import FloatArray
from trunnion.sky.naming import Body
from trunnion.sky.place import AU_KM, J2000_JD, check_span
from trunnion.sky.refinement import refined

PLAN94 = {
    Body.MERCURY: 1,
    Body.VENUS: 2,
    Body.MARS: 4,
    Body.JUPITER: 5,
    Body.SATURN: 6,
    Body.URANUS: 7,
    Body.NEPTUNE: 8,
}
"""ERFA's numbers of the planets."""

SERIES_LIMIT_ARCSEC = {
    Body.SUN: 1.0,
    Body.MOON: 7.0,
    Body.MERCURY: 1.0,
    Body.VENUS: 4.0,
    Body.MARS: 12.0,
    Body.JUPITER: 5.0,
    Body.SATURN: 5.0,
    Body.URANUS: 8.0,
    Body.NEPTUNE: 2.0,
}
"""Largest difference of the apparent place from the JPL ephemeris DE421 between 2000 and 2050.

At Uranus it is the bending of light in conjunction, which nobody could receive; else 1″.
"""

YEAR_2050_S = 2_524_608_000.0
BEYOND_2050_ARCSEC = 120.0
"""The same for any planet up to 2100, where the outer ones drift: from JPL DE423, by hand."""

SLOW_NODE_DAYS = 0.5
MOON_NODE_DAYS = 0.125


@dataclass(frozen=True, slots=True)
class SeriesBody:
    """A body by the built-in series: a Place."""

    body: Body

    @property
    def name(self) -> str:
        """The body's name."""
        return self.body.value

    @property
    def has_range(self) -> bool:
        """A body is somewhere."""
        return True

    @property
    def node_days(self) -> float:
        """The Moon is fast."""
        return MOON_NODE_DAYS if self.body is Body.MOON else SLOW_NODE_DAYS

    def at(self, tt_days: float, *, is_apparent: bool) -> FloatArray:
        """From the Earth's centre, shape (3,); raises NoPosition outside 1900 to 2100."""
        check_span(self.name, tt_days)
        if not is_apparent:
            return AU_KM * self._geocentric_au(tt_days)
        return AU_KM * as_seen(self._geocentric_au, tt_days, earth_state(tt_days).from_sun_au)

    def _geocentric_au(self, tt_days: float) -> FloatArray:
        if self.body is Body.SUN:
            return -earth_state(tt_days).from_sun_au
        position_au = refined(self.body, series_au(self.body, tt_days), tt_days)
        if self.body is Body.MOON:
            return position_au
        return position_au - earth_state(tt_days).from_sun_au


def series_limit_arcsec(body: Body, utc_s: float) -> float:
    """What the user is told of the series' accuracy at an instant."""
    limit = SERIES_LIMIT_ARCSEC[body]
    return limit if utc_s < YEAR_2050_S or body is Body.SUN else BEYOND_2050_ARCSEC


def series_au(body: Body, tt_days: float) -> FloatArray:
    """By ERFA's series alone: the Moon from the Earth's centre, a planet from the Sun's."""
    if body is Body.MOON:
        return np.asarray(erfa.moon98(J2000_JD, tt_days)["p"])
    return np.asarray(erfa.plan94(J2000_JD, tt_days, PLAN94[body])["p"])
