"""Where the station stands: geodetic coordinates, and the axes of its sky."""

from dataclasses import dataclass, field
from math import cos, isfinite, radians, sin, sqrt

from trunnion.sky.errors import SkyError

Vector = tuple[float, float, float]

Meridian = tuple[float, float, float, float, float, float, float]
"""Longitude (rad), its sine and cosine, sine and cosine of the latitude, distance (km) from the
Earth's axis and above the equator's plane."""

WGS84_RADIUS_KM = 6378.137
WGS84_FLATTENING = 1.0 / 298.257223563
"""Defining constants of the World Geodetic System 1984 (NGA.STND.0036)."""

LOWEST_M, HIGHEST_M = -12_000.0, 100_000.0


@dataclass(frozen=True, slots=True)
class Site:
    """Geodetic latitude and longitude (deg, north and east positive), ellipsoidal height (m).

    `position_km` is Earth-fixed; `east`, `north` and `up` are unit vectors in the same frame.
    """

    latitude_deg: float
    longitude_deg: float
    height_m: float
    position_km: Vector = field(init=False, repr=False, compare=False)
    east: Vector = field(init=False, repr=False, compare=False)
    north: Vector = field(init=False, repr=False, compare=False)
    up: Vector = field(init=False, repr=False, compare=False)
    meridian: Meridian = field(init=False, repr=False, compare=False)

    def __post_init__(self) -> None:
        values = (self.latitude_deg, self.longitude_deg, self.height_m)
        if not all(map(isfinite, values)) or abs(self.latitude_deg) > 90.0:
            raise SkyError(f"expected a finite place with a latitude of -90 to 90, got {values}")
        if not LOWEST_M <= self.height_m <= HIGHEST_M:
            raise SkyError(
                f"expected a height of {LOWEST_M:g} to {HIGHEST_M:g} m, got {self.height_m}"
            )
        latitude, longitude = radians(self.latitude_deg), radians(self.longitude_deg)
        sin_lat, cos_lat = sin(latitude), cos(latitude)
        sin_lon, cos_lon = sin(longitude), cos(longitude)
        eccentricity2 = WGS84_FLATTENING * (2.0 - WGS84_FLATTENING)
        normal_km = WGS84_RADIUS_KM / sqrt(1.0 - eccentricity2 * sin_lat * sin_lat)
        height_km = 1e-3 * self.height_m
        axis_km = (normal_km + height_km) * cos_lat
        plane_km = (normal_km * (1.0 - eccentricity2) + height_km) * sin_lat
        self._set("meridian", (longitude, sin_lon, cos_lon, sin_lat, cos_lat, axis_km, plane_km))
        self._set("position_km", (axis_km * cos_lon, axis_km * sin_lon, plane_km))
        self._set("east", (-sin_lon, cos_lon, 0.0))
        self._set("north", (-sin_lat * cos_lon, -sin_lat * sin_lon, cos_lat))
        self._set("up", (cos_lat * cos_lon, cos_lat * sin_lon, sin_lat))

    def _set(self, name: str, value: Vector | Meridian) -> None:
        object.__setattr__(self, name, value)
