"""A direction among the stars: a radio source, by its coordinates in the ICRS."""

from dataclasses import dataclass
from math import cos, isfinite, radians

import erfa
import numpy as np

from trunnion.sky.errors import SkyError
from trunnion.sky.light import aberrated, bent_by_sun, earth_state
from trunnion.sky.look import FloatArray
from trunnion.sky.place import AU_KM, check_span

DISTANT_AU = 1e13
"""So far off (50 parsec) that it makes no difference where on the Earth one stands."""

DAYS_A_YEAR = 365.25
MAS_A_DEGREE = 3.6e6

MOST_MOTION_MAS_YR = 20_000.0
MOST_PARALLAX_MAS = 1_000.0
"""No star is nearer or faster: Proxima Centauri 768 mas, Barnard's star 10 393 mas a year."""


@dataclass(frozen=True, slots=True)
class IcrsDirection:
    """Right ascension and declination (deg) at J2000.0, in the ICRS: a Place.

    Proper motion in milliarcseconds a year, that in right ascension times cos(declination), as
    catalogues have it; parallax in milliarcseconds. Raises SkyError.
    """

    right_ascension_deg: float
    declination_deg: float
    motion_ra_mas_yr: float = 0.0
    motion_dec_mas_yr: float = 0.0
    parallax_mas: float = 0.0

    def __post_init__(self) -> None:
        values = (self.right_ascension_deg, self.declination_deg, self.parallax_mas)
        motion = (self.motion_ra_mas_yr, self.motion_dec_mas_yr)
        if not all(map(isfinite, values + motion)) or not -90.0 <= self.declination_deg <= 90.0:
            raise SkyError(
                f"expected finite coordinates with a declination of -90 to 90, got {values[:2]}"
            )
        if max(map(abs, motion)) > MOST_MOTION_MAS_YR:
            raise SkyError(
                f"expected a proper motion of at most {MOST_MOTION_MAS_YR:g} mas a year, "
                f"got {motion}"
            )
        if not 0.0 <= self.parallax_mas <= MOST_PARALLAX_MAS:
            raise SkyError(
                f"expected a parallax of 0 to {MOST_PARALLAX_MAS:g} mas, got {self.parallax_mas}"
            )

    @property
    def name(self) -> str:
        """The way it is written in a plan."""
        return f"icrs:{self.right_ascension_deg:g},{self.declination_deg:g}"

    @property
    def has_range(self) -> bool:
        """A direction is nowhere in particular."""
        return False

    @property
    def node_days(self) -> float:
        """Parallax and nutation are slow."""
        return 0.5

    def at(self, tt_days: float, *, is_apparent: bool) -> FloatArray:
        """From the Earth's centre, shape (3,), very far off; raises NoPosition outside 1900-2100.

        Apparent: with the light's bending by the Sun and the aberration by the Earth's motion.
        """
        check_span(self.name, tt_days)
        earth = earth_state(tt_days)
        direction = self._coordinate_direction(tt_days, earth.position_au)
        if is_apparent:
            bent = bent_by_sun(direction, DISTANT_AU * direction, earth.from_sun_au)
            direction = aberrated(bent, earth)
        return np.asarray(DISTANT_AU * AU_KM * direction)

    def _coordinate_direction(self, tt_days: float, earth_au: FloatArray) -> FloatArray:
        declination = radians(self.declination_deg)
        per_mas = radians(1.0 / MAS_A_DEGREE)
        motion_ra = per_mas * self.motion_ra_mas_yr / max(cos(declination), 1e-12)
        direction: FloatArray = erfa.pmpx(
            radians(self.right_ascension_deg),
            declination,
            motion_ra,
            per_mas * self.motion_dec_mas_yr,
            1e-3 * self.parallax_mas,
            0.0,
            tt_days / DAYS_A_YEAR,
            earth_au,
        )
        return direction / np.linalg.norm(direction)
