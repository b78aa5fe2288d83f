"""Directions on the sphere of the sky. Standard library only."""

from math import atan2, cos, degrees, hypot, radians, sin


def unit_vector(azimuth_deg: float, elevation_deg: float) -> tuple[float, float, float]:
    """East, north and up components of the direction; azimuth from north through east."""
    azimuth, elevation = radians(azimuth_deg), radians(elevation_deg)
    level = cos(elevation)
    return level * sin(azimuth), level * cos(azimuth), sin(elevation)


def principal_deg(angle_deg: float) -> float:
    """The same direction as an angle of 0 <= angle < 360."""
    angle_deg %= 360.0
    return angle_deg if angle_deg < 360.0 else 0.0  # of a tiny negative angle, `%` makes 360.0


def direction(east: float, north: float, up: float) -> tuple[float, float]:
    """Azimuth (0 <= azimuth < 360) and elevation in degrees of a vector of any length but zero."""
    return principal_deg(degrees(atan2(east, north))), degrees(atan2(up, hypot(east, north)))


def separation_deg(
    azimuth_1_deg: float, elevation_1_deg: float, azimuth_2_deg: float, elevation_2_deg: float
) -> float:
    """Angle between two directions, 0 to 180 degrees.

    Vincenty's formula for a sphere, which keeps its digits at small and at large angles alike.
    """
    turn = radians(azimuth_2_deg - azimuth_1_deg)
    one, other = radians(elevation_1_deg), radians(elevation_2_deg)
    across = cos(other) * sin(turn)
    along = cos(one) * sin(other) - sin(one) * cos(other) * cos(turn)
    ahead = sin(one) * sin(other) + cos(one) * cos(other) * cos(turn)
    return degrees(atan2(hypot(across, along), ahead))
