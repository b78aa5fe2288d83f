"""Where in the sky the boresight may be: above the floor and the horizon, outside the keep-outs."""

from dataclasses import dataclass, field, replace
from math import asin, ceil, cos, degrees, floor, radians, sin

from trunnion.mount.horizon import HorizonMask
from trunnion.mount.sphere import separation_deg

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
class Circle:
    """All directions within `radius_deg` (at most 90) of one, which the boresight stays out of."""

    name: str
    azimuth_deg: float
    elevation_deg: float
    radius_deg: float

    def depth_deg(self, azimuth_deg: float, elevation_deg: float) -> float:
        """How far inside a direction is; negative outside."""
        away_deg = separation_deg(azimuth_deg, elevation_deg, self.azimuth_deg, self.elevation_deg)
        return self.radius_deg - away_deg

    def around(self) -> Sector:
        """The smallest box of the sky that holds it."""
        lower_deg, upper_deg = (
            self.elevation_deg - self.radius_deg,
            self.elevation_deg + self.radius_deg,
        )
        aside_deg = azimuth_reach_deg(self.elevation_deg, self.radius_deg)
        return Sector(
            self.name,
            (self.azimuth_deg - aside_deg) % 360.0 if aside_deg < 180.0 else 0.0,
            (self.azimuth_deg + aside_deg) % 360.0 if aside_deg < 180.0 else 360.0,
            max(lower_deg, -90.0),
            min(upper_deg, 90.0),
        )


@dataclass(frozen=True, slots=True)
class Clearance:
    """Elevation floor (deg), horizon mask if there is one, keep-out sectors, keep-out circles.

    `skyline_deg` has, for each whole degree of azimuth up to the next one, edges included, an
    elevation above which nothing stands but circles; above `free_above_deg` nothing is at all.
    """

    floor_deg: float
    mask: HorizonMask | None
    keep_outs: tuple[Sector, ...] = ()
    circles: tuple[Circle, ...] = ()
    free_above_deg: float = field(init=False, repr=False, compare=False)
    skyline_deg: tuple[float, ...] = field(init=False, repr=False, compare=False)

    def __post_init__(self) -> None:
        skyline_deg = [self.floor_deg] * 360
        if self.mask is not None:
            for begin_deg, end_deg, highest_deg in self.mask.spans():
                _raise(skyline_deg, begin_deg, end_deg, highest_deg)
        for box in self.keep_outs:
            width_deg = (box.to_azimuth_deg - box.from_azimuth_deg) % 360.0 or 360.0
            end_deg = box.from_azimuth_deg + width_deg
            _raise(skyline_deg, box.from_azimuth_deg, end_deg, box.upper_elevation_deg)
        object.__setattr__(self, "skyline_deg", tuple(skyline_deg))
        circled_deg = (circle.elevation_deg + circle.radius_deg for circle in self.circles)
        object.__setattr__(self, "free_above_deg", max(*skyline_deg, *circled_deg))

    def with_margin(self, margin_deg: float) -> "Clearance":
        """The same, with floor, mask and keep-outs that much larger on every side."""
        mask = self.mask and HorizonMask(
            tuple(
                (azimuth_deg, high_deg + margin_deg) for azimuth_deg, high_deg in self.mask.points
            )
        )
        keep_outs = tuple(sector.with_margin(margin_deg) for sector in self.keep_outs)
        circles = tuple(
            replace(circle, radius_deg=circle.radius_deg + margin_deg) for circle in self.circles
        )
        return Clearance(self.floor_deg + margin_deg, mask, keep_outs, circles)

    def with_circle(self, circle: Circle) -> "Clearance":
        """The same, with one more circle."""
        return replace(self, circles=(*self.circles, circle))

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
            and all(each.depth_deg(azimuth_deg, elevation_deg) < 0.0 for each in self.circles)
        )

    def is_free_around(self, azimuth_deg: float, elevation_deg: float, radius_deg: float) -> bool:
        """Whether all is clear within this angle of a direction; False may mean "look closer"."""
        lowest_deg = elevation_deg - radius_deg
        if lowest_deg > self.free_above_deg:
            return True
        if lowest_deg <= self.floor_deg:
            return False
        for circle in self.circles:
            if circle.depth_deg(azimuth_deg, elevation_deg) >= -radius_deg:
                return False
        aside_deg = azimuth_reach_deg(elevation_deg, radius_deg)
        if aside_deg >= 180.0:
            return False
        skyline_deg = self.skyline_deg
        return all(
            lowest_deg > skyline_deg[number % 360]
            for number in range(floor(azimuth_deg - aside_deg), floor(azimuth_deg + aside_deg) + 1)
        )


def azimuth_reach_deg(elevation_deg: float, radius_deg: float) -> float:
    """How far (deg) in azimuth a circle of the sky reaches to either side; 180 over the zenith."""
    if abs(elevation_deg) + radius_deg >= 90.0:
        return 180.0
    return degrees(asin(sin(radians(radius_deg)) / cos(radians(elevation_deg))))


def _raise(skyline_deg: list[float], begin_deg: float, end_deg: float, high_deg: float) -> None:
    """Raise the skyline to this height from one azimuth clockwise to the other, at most a turn."""
    for number in range(ceil(begin_deg) - 1, floor(end_deg) + 1):
        skyline_deg[number % 360] = max(skyline_deg[number % 360], high_deg)
