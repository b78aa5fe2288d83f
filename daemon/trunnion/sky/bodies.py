"""Sun, Moon and planets by the built-in series: no file needed, good to a minute of arc.

Sources, all by way of ERFA: the Earth by epv00 (after VSOP2000), the Moon by moon98 (Meeus, after
ELP 2000-82), the planets by plan94 (Simon et al. 1994).
"""

from dataclasses import dataclass
from typing import Any

import erfa
import numpy as np

from trunnion.sky.light import as_seen, earth_state
from trunnion.sky.look import FloatArray
from trunnion.sky.naming import Body
from trunnion.sky.place import AU_KM, J2000_JD, check_span

_PLAN94 = {
    Body.MERCURY: 1,
    Body.VENUS: 2,
    Body.MARS: 4,
    Body.JUPITER: 5,
    Body.SATURN: 6,
    Body.URANUS: 7,
    Body.NEPTUNE: 8,
}

SERIES_LIMIT_ARCSEC = {
    Body.SUN: 1.0,
    Body.MOON: 15.0,
    Body.MERCURY: 2.0,
    Body.VENUS: 11.0,
    Body.MARS: 52.0,
    Body.JUPITER: 60.0,
    Body.SATURN: 95.0,
    Body.URANUS: 75.0,
    Body.NEPTUNE: 8.0,
}
"""Largest difference of the apparent place from the JPL ephemeris DE421 between 2000 and 2050."""

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
        if self.body is Body.MOON:
            return _position(erfa.moon98(J2000_JD, tt_days))
        sun_au = -earth_state(tt_days).from_sun_au
        if self.body is Body.SUN:
            return sun_au
        return sun_au + _position(erfa.plan94(J2000_JD, tt_days, _PLAN94[self.body]))


def _position(state: Any) -> FloatArray:
    return np.asarray(state["p"])
