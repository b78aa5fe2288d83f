"""Circles, the skyline, and "all is free around here": never said where something stands."""

from math import cos, radians, sin

import pytest
from hypothesis import given
from hypothesis import strategies as st

from trunnion.mount.clearance import Circle, Clearance, Sector, azimuth_reach_deg
from trunnion.mount.horizon import HorizonMask
from trunnion.mount.sphere import direction, separation_deg, unit_vector

MASK = HorizonMask(((17.3, 4.1), (93.1, 11.7), (93.1, 2.3), (271.9, 8.9)))
MAST = Sector("the mast", 141.3, 146.9, 1.1, 27.9)
NORTH = Sector("the roof", 351.7, 3.0, 10.3, 31.3)
SUN = Circle("the Sun", 233.7, 41.9, 5.3)
CLEARANCE = Clearance(5.3, MASK, (MAST, NORTH), (SUN,))


def test_a_circle_is_as_deep_as_its_edge_is_away() -> None:
    assert SUN.depth_deg(233.7, 41.9) == pytest.approx(5.3)
    assert SUN.depth_deg(233.7, 36.9) == pytest.approx(0.3)
    assert SUN.depth_deg(233.7 - 360.0, 47.3) == pytest.approx(-0.1)
    # half an angle of azimuth, cos 41.9° of it on the sky (exact on the parallel's chord)
    assert SUN.depth_deg(226.7, 41.9) == pytest.approx(5.3 - separation_deg(7.0, 41.9, 0.0, 41.9))


@given(st.floats(0.0, 359.9), st.floats(-89.0, 89.9), st.floats(0.1, 30.0), st.floats(0.0, 6.283))
def test_the_box_around_a_circle_holds_all_of_it(
    azimuth_deg: float, elevation_deg: float, radius_deg: float, turn: float
) -> None:
    circle = Circle("it", azimuth_deg, elevation_deg, radius_deg)
    east, north, up = _aside(azimuth_deg, elevation_deg, 0.999 * radius_deg, turn)
    assert circle.around().contains(*direction(east, north, up))


def test_a_circle_is_not_clear_and_grows_with_the_margin() -> None:
    assert not CLEARANCE.is_clear(233.7, 37.0)
    assert CLEARANCE.is_clear(233.7, 36.5)
    assert not CLEARANCE.with_margin(0.2).is_clear(233.7, 36.5)
    assert Clearance(5.3, None).with_circle(SUN) == Clearance(5.3, None, (), (SUN,))


@pytest.mark.parametrize(
    ("azimuth_deg", "elevation_deg", "radius_deg", "is_free"),
    [
        (120.3, 80.1, 1.0, True),  # above all of it
        (150.3, 13.9, 1.0, True),  # beside the mast
        (148.3, 13.9, 1.0, True),
        (147.9, 13.9, 1.0, False),
        (144.1, 29.0, 1.0, True),  # above it
        (144.1, 28.8, 1.0, False),
        (120.3, 6.2, 1.0, False),  # the floor
        (357.9, 30.3, 0.3, False),  # the roof, across north
        (0.2, 33.3, 1.9, True),
        (5.2, 30.3, 0.3, True),
        (225.6, 41.9, 1.0, False),  # beside the Sun, below it, above it
        (225.0, 41.9, 1.0, True),
        (233.7, 35.7, 1.0, False),
        (233.7, 35.5, 1.0, True),
        (233.7, 48.1, 1.0, False),
        (233.7, 48.3, 1.0, True),
        (93.1, 12.6, 1.0, False),  # a step of the mask
        (95.1, 12.6, 0.9, True),
        (10.0, 50.0, 41.0, False),  # round the zenith
    ],
)
def test_where_all_is_free_around(
    azimuth_deg: float, elevation_deg: float, radius_deg: float, *, is_free: bool
) -> None:
    assert CLEARANCE.is_free_around(azimuth_deg, elevation_deg, radius_deg) == is_free


masks = st.lists(
    st.tuples(st.floats(0.0, 359.9), st.floats(-3.0, 40.0)), min_size=1, max_size=6
).map(lambda points: HorizonMask(tuple(sorted(points))))
sectors = st.lists(
    st.builds(
        Sector,
        st.just("a box"),
        st.one_of(st.floats(0.0, 360.0), st.integers(0, 360).map(float)),
        st.one_of(st.floats(0.0, 360.0), st.integers(0, 360).map(float)),
        st.floats(-5.0, 10.0),
        st.floats(10.0, 50.0),
    ),
    max_size=2,
).map(tuple)
circles = st.lists(
    st.builds(
        Circle,
        st.just("it"),
        st.floats(0.0, 359.9),
        st.floats(-5.0, 89.0),
        st.floats(0.1, 20.0),
    ),
    max_size=1,
).map(tuple)


@given(
    st.builds(Clearance, st.floats(-2.0, 10.0), st.none() | masks, sectors, circles),
    st.floats(-400.0, 400.0),
    st.floats(0.0, 89.0),
    st.floats(0.001, 12.0),
    st.lists(st.tuples(st.floats(0.0, 1.0), st.floats(0.0, 6.283)), min_size=4, max_size=12),
)
def test_what_is_called_free_is_clear_all_around(
    clearance: Clearance,
    azimuth_deg: float,
    elevation_deg: float,
    radius_deg: float,
    spots: list[tuple[float, float]],
) -> None:
    if not clearance.is_free_around(azimuth_deg, elevation_deg, radius_deg):
        return
    for share, turn in [*spots, (1.0, 1.5707), (1.0, 4.7124), (1.0, 3.1416)]:
        spot = direction(*_aside(azimuth_deg, elevation_deg, 0.9999 * share * radius_deg, turn))
        assert clearance.is_clear(*spot)


@given(st.floats(0.0, 88.0), st.floats(0.01, 40.0), st.floats(0.0, 6.283))
def test_nothing_in_a_circle_is_further_aside_than_it_reaches(
    elevation_deg: float, radius_deg: float, turn: float
) -> None:
    azimuth_deg, _ = direction(*_aside(180.0, elevation_deg, radius_deg, turn))
    assert abs(azimuth_deg - 180.0) <= azimuth_reach_deg(elevation_deg, radius_deg) + 1e-6


def _aside(
    azimuth_deg: float, elevation_deg: float, away_deg: float, turn: float
) -> tuple[float, float, float]:
    """The direction so far away from another one; `turn` from up, by east."""
    ahead = unit_vector(azimuth_deg, elevation_deg)
    up = unit_vector(azimuth_deg, elevation_deg + 90.0)
    right = unit_vector(azimuth_deg + 90.0, 0.0)
    near, far = cos(radians(away_deg)), sin(radians(away_deg))
    east, north, height = (
        near * a + far * (cos(turn) * u + sin(turn) * r)
        for a, u, r in zip(ahead, up, right, strict=True)
    )
    return east, north, height
