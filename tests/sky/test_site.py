"""A site: its place, its axes, and what is no place."""

from math import dist

import erfa
import numpy as np
import pytest
from hypothesis import example, given
from hypothesis import strategies as st

from trunnion.sky.errors import SkyError
from trunnion.sky.site import Site

WGS84 = 1
"""ERFA's number of the ellipsoid."""


@example(90.0, 33.3, 4.1)
@example(-90.0, -12.7, 2835.0)
@example(31.5, 35.5, -430.0)
@given(st.floats(-90.0, 90.0), st.floats(-180.0, 180.0), st.floats(-500.0, 9000.0))
def test_place_and_meridian_are_erfas_and_the_axes_are_a_frame(
    latitude_deg: float, longitude_deg: float, height_m: float
) -> None:
    site = Site(latitude_deg, longitude_deg, height_m)
    place_m = erfa.gd2gc(WGS84, *np.radians((longitude_deg, latitude_deg)), height_m)
    assert 1000.0 * dist(site.position_km, place_m / 1000.0) < 1e-6
    axes = np.array((site.east, site.north, site.up))
    np.testing.assert_allclose(axes @ axes.T, np.eye(3), atol=1e-15)
    assert np.linalg.det(axes) == pytest.approx(1.0)
    longitude, sin_lon, cos_lon, sin_lat, cos_lat, axis_km, plane_km = site.meridian
    np.testing.assert_allclose((-sin_lon, cos_lon, 0.0), site.east)
    np.testing.assert_allclose((cos_lat * cos_lon, cos_lat * sin_lon, sin_lat), site.up)
    np.testing.assert_allclose(
        (axis_km * np.cos(longitude), axis_km * np.sin(longitude), plane_km), site.position_km
    )


@pytest.mark.parametrize(
    "place",
    [(90.1, 0.0, 0.0), (float("nan"), 0.0, 0.0), (1.0, float("inf"), 0.0), (1.0, 2.0, -1e5)],
)
def test_what_is_no_place_is_refused(place: tuple[float, float, float]) -> None:
    with pytest.raises(SkyError, match="expected a"):
        Site(*place)
