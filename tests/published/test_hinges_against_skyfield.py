"""Joint angles of every geometry against skyfield's directions to satellites.

skyfield (a general-purpose library) gives altitude and azimuth, and hour angle and declination, of
the same position. X–Y angles follow from its altitude and azimuth by X = atan2(east, up) and
Y = asin(north) for a lower axis along the meridian; for the other, east and north change places.
"""

from math import asin, atan2, cos, degrees, radians, sin

import pytest
from skyfield.api import EarthSatellite, load, wgs84

from trunnion.mount.hinges import Hinges

LINES = (
    "1 25544U 98067A   19343.69339541  .00001764  00000-0  38792-4 0  9991",
    "2 25544  51.6439 211.2001 0007417  17.6667  85.6398 15.50103472202482",
)
TOLERANCE_DEG = 1e-6


@pytest.fixture(scope="module", params=[(42.38, -71.13, 24.0), (-42.137, 146.52, 812.0)])
def sightings(request: pytest.FixtureRequest) -> list[tuple[float, float, float, float, float]]:
    """Latitude, azimuth, elevation, hour angle, declination (deg), below the horizon as well."""
    latitude_deg, longitude_deg, height_m = request.param
    timescale = load.timescale(builtin=True)
    satellite = EarthSatellite(*LINES, "published elements", timescale)
    place = wgs84.latlon(latitude_deg, longitude_deg, elevation_m=height_m)
    found = []
    for minute in range(3, 1400, 37):
        position = (satellite - place).at(timescale.utc(2019, 12, 10, 0, minute, 17.3))
        elevation, azimuth, _ = position.altaz()
        hour_angle, declination, _ = position.hadec()
        angles = (azimuth.degrees, elevation.degrees, hour_angle._degrees, declination.degrees)
        found.append((latitude_deg, *(float(each) for each in angles)))
    return found


def difference_deg(one: float, other: float) -> float:
    return abs((one - other + 180.0) % 360.0 - 180.0)


def test_hour_angle_and_declination(
    sightings: list[tuple[float, float, float, float, float]],
) -> None:
    for latitude_deg, azimuth_deg, elevation_deg, hour_angle_deg, declination_deg in sightings:
        hinges = Hinges.hour_angle_declination(latitude_deg)
        plain, tipped = hinges.solutions(azimuth_deg, elevation_deg)
        assert difference_deg(plain.first_deg, hour_angle_deg) < TOLERANCE_DEG
        assert plain.second_deg == pytest.approx(declination_deg, abs=TOLERANCE_DEG)
        assert difference_deg(tipped.first_deg, hour_angle_deg + 180.0) < TOLERANCE_DEG


def test_both_kinds_of_x_and_y(
    sightings: list[tuple[float, float, float, float, float]],
) -> None:
    for _, azimuth_deg, elevation_deg, _, _ in sightings:
        azimuth, elevation = radians(azimuth_deg), radians(elevation_deg)
        east, north = cos(elevation) * sin(azimuth), cos(elevation) * cos(azimuth)
        for hinges, across, along in (
            (Hinges.x_y_north_south(), east, north),
            (Hinges.x_y_east_west(), north, east),
        ):
            plain, _ = hinges.solutions(azimuth_deg, elevation_deg)
            assert difference_deg(plain.first_deg, degrees(atan2(across, sin(elevation)))) < 1e-9
            assert plain.second_deg == pytest.approx(degrees(asin(along)), abs=1e-9)


def test_azimuth_and_elevation(
    sightings: list[tuple[float, float, float, float, float]],
) -> None:
    for _, azimuth_deg, elevation_deg, _, _ in sightings:
        plain, _ = Hinges.azimuth_elevation().solutions(azimuth_deg, elevation_deg)
        assert tuple(plain) == pytest.approx((azimuth_deg, elevation_deg))
