"""Where in the sky the boresight may be: above the floor and the horizon, outside the keep-outs."""

from dataclasses import dataclass, field, replace
from math import cos, radians

from trunnion.mount.horizon import HorizonMask

NARROWEST = 0.02
"""Cosine of an elevation so near the zenith that a box there reaches all round anyhow."""


@dataclass(frozen=True, slots=True)
class Sector:
    """A box of the sky that the boresight stays out of, edges included (degrees).

    It reaches clockwise from one azimuth (0 to 360) to the other, and may cross north.
    """

    name: str
    from_azimuth_deg: float
    to_azimuth_deg: float
    lower_elevation_deg: float
    upper_elevation_deg: float

    def with_margin(self, margin_deg: float) -> "Sector":
        """The same box, that much larger on every side, in azimuth by as much on the sky."""
        highest_deg = max(abs(self.lower_elevation_deg), abs(self.upper_elevation_deg))
        sideways_deg = margin_deg / max(cos(radians(highest_deg)), NARROWEST)
        width_deg = (self.to_azimuth_deg - self.from_azimuth_deg) % 360.0 or 360.0
        sideways_deg = min(sideways_deg, 0.5 * (360.0 - width_deg))
        return replace(
            self,
            from_azimuth_deg=(self.from_azimuth_deg - sideways_deg) % 360.0,
            to_azimuth_deg=(self.to_azimuth_deg + sideways_deg) % 360.0,
            lower_elevation_deg=self.lower_elevation_deg - margin_deg,
            upper_elevation_deg=self.upper_elevation_deg + margin_deg,
        )

    def contains(self, azimuth_deg: float, elevation_deg: float) -> bool:
        """Whether this direction lies in the box."""
        if not self.lower_elevation_deg <= elevation_deg <= self.upper_elevation_deg:
            return False
        width_deg = (self.to_azimuth_deg - self.from_azimuth_deg) % 360.0 or 360.0
        return (azimuth_deg - self.from_azimuth_deg) % 360.0 <= width_deg


@dataclass(frozen=True, slots=True)
class Clearance:
    """Elevation floor (deg), horizon mask if there is one, keep-out sectors.

    Above `free_above_deg` nothing stands in any direction.
    """

    floor_deg: float
    mask: HorizonMask | None
    keep_outs: tuple[Sector, ...] = ()
    free_above_deg: float = field(init=False, repr=False, compare=False)

    def __post_init__(self) -> None:
        masked_deg = [elevation_deg for _, elevation_deg in self.mask.points] if self.mask else []
        kept_out_deg = [sector.upper_elevation_deg for sector in self.keep_outs]
        highest_deg = max(self.floor_deg, *masked_deg, *kept_out_deg, -90.0)
        object.__setattr__(self, "free_above_deg", highest_deg)

    def with_margin(self, margin_deg: float) -> "Clearance":
        """The same, with floor, mask and keep-outs that much larger on every side."""
        mask = self.mask and HorizonMask(
            tuple(
                (azimuth_deg, high_deg + margin_deg) for azimuth_deg, high_deg in self.mask.points
            )
        )
        keep_outs = tuple(sector.with_margin(margin_deg) for sector in self.keep_outs)
        return Clearance(self.floor_deg + margin_deg, mask, keep_outs)

    def lowest_deg(self, azimuth_deg: float) -> float:
        """Lowest elevation that floor and mask allow in this direction."""
        if self.mask is None:
            return self.floor_deg
        return max(self.floor_deg, self.mask.elevation_deg(azimuth_deg))

    def keep_out(self, azimuth_deg: float, elevation_deg: float) -> Sector | None:
        """The keep-out that this direction lies in, if any."""
        for sector in self.keep_outs:
            if sector.contains(azimuth_deg, elevation_deg):
                return sector
        return None

    def is_clear(self, azimuth_deg: float, elevation_deg: float) -> bool:
        """Whether the boresight may be there."""
        return (
            elevation_deg >= self.lowest_deg(azimuth_deg)
            and self.keep_out(azimuth_deg, elevation_deg) is None
        )
