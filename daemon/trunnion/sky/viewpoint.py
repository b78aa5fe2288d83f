"""From where, and through what, a target is seen."""

from dataclasses import dataclass, replace
from typing import Self

from trunnion.sky.earth import EarthOrientation
from trunnion.sky.refraction import NoRefraction, Refraction
from trunnion.sky.site import Site


@dataclass(frozen=True, slots=True)
class Viewpoint:
    """A site, the Earth's orientation, and the air.

    `is_apparent` adds what lies between a place and its image: light time and aberration. Without
    it, and without refraction, look angles are the straight line of one instant.
    """

    site: Site
    earth: EarthOrientation
    refraction: Refraction
    is_apparent: bool

    def geometric(self) -> Self:
        """The same viewpoint without light time, aberration and refraction."""
        return replace(self, refraction=NoRefraction(), is_apparent=False)
