"""Floor, horizon mask and keep-outs."""

from math import cos, radians

import pytest
from hypothesis import given
from hypothesis import strategies as st

from trunnion.mount.clearance import Clearance, Sector
from trunnion.mount.horizon import HorizonMask

MASK = HorizonMask(((17.3, 4.1), (93.1, 11.7), (93.1, 2.3), (271.9, 8.9)))
MAST = Sector("mast", 351.5, 12.3, 1.1, 27.9)


def test_straight_lines_between_the_points_and_across_north() -> None:
    assert MASK.elevation_deg(55.2) == pytest.approx(7.9)
    across_deg = 4.1 + (8.9 - 4.1) * (17.3 - 0.0) / (17.3 + 360.0 - 271.9)
    assert MASK.elevation_deg(0.0) == pytest.approx(across_deg)
    assert MASK.elevation_deg(720.0) == pytest.approx(across_deg)


def test_at_a_step_the_higher_side_counts() -> None:
    assert MASK.elevation_deg(93.1) == 11.7
    assert MASK.elevation_deg(93.1 + 1e-9) == pytest.approx(2.3)


@given(st.floats(-720.0, 720.0), st.floats(0.0, 359.0), st.floats(0.0, 1.0))
def test_nothing_within_a_span_is_above_its_highest(
    from_deg: float, width_deg: float, share: float
) -> None:
    highest_deg = MASK.highest_deg(from_deg, from_deg + width_deg)
    assert MASK.elevation_deg(from_deg + share * width_deg) <= highest_deg + 1e-9
    assert highest_deg <= 11.7


def test_a_whole_turn_sees_the_highest_point() -> None:
    assert MASK.highest_deg(200.0, 560.0) == 11.7


@pytest.mark.parametrize(
    "points",
    [(), ((10.0, 3.0), (9.0, 3.0)), ((-0.1, 3.0),), ((360.0, 3.0),)],
)
def test_a_mask_out_of_order_is_refused(points: tuple[tuple[float, float], ...]) -> None:
    with pytest.raises(ValueError, match="expected"):
        HorizonMask(points)


@pytest.mark.parametrize(
    ("azimuth_deg", "elevation_deg", "is_inside"),
    [
        (355.7, 15.3, True),
        (4.9, 15.3, True),
        (364.9, 15.3, True),
        (351.4, 15.3, False),
        (12.4, 15.3, False),
        (181.0, 15.3, False),
        (4.9, 28.0, False),
        (4.9, 1.0, False),
    ],
)
def test_a_sector_may_cross_north(
    azimuth_deg: float, elevation_deg: float, is_inside: bool
) -> None:
    assert MAST.contains(azimuth_deg, elevation_deg) is is_inside


def test_clear_means_above_floor_and_mask_and_outside_every_keep_out() -> None:
    clearance = Clearance(5.3, MASK, (MAST,))
    assert clearance.lowest_deg(150.0) == 5.3
    assert clearance.lowest_deg(93.1) == 11.7
    assert clearance.is_clear(150.0, 5.3)
    assert not clearance.is_clear(150.0, 5.2)
    assert not clearance.is_clear(93.1, 11.0)
    assert not clearance.is_clear(4.9, 15.3)
    assert clearance.keep_out(4.9, 15.3) is MAST


@given(st.floats(0.0, 359.9), st.floats(-10.0, 89.0), st.floats(0.0, 5.0))
def test_what_is_clear_with_a_margin_is_clear_without_it(
    azimuth_deg: float, elevation_deg: float, margin_deg: float
) -> None:
    clearance = Clearance(5.3, MASK, (MAST,))
    if clearance.with_margin(margin_deg).is_clear(azimuth_deg, elevation_deg):
        assert clearance.is_clear(azimuth_deg, elevation_deg - margin_deg)
        assert clearance.is_clear(azimuth_deg, elevation_deg)


def test_a_margin_makes_everything_larger_by_as_much_on_the_sky() -> None:
    wide = Clearance(5.3, MASK, (MAST,)).with_margin(0.5)
    assert wide.floor_deg == pytest.approx(5.8)
    assert wide.lowest_deg(93.1) == pytest.approx(12.2)
    sector = wide.keep_outs[0]
    assert (sector.lower_elevation_deg, sector.upper_elevation_deg) == pytest.approx((0.6, 28.4))
    sideways_deg = 351.5 - sector.from_azimuth_deg
    assert sideways_deg * cos(radians(27.9)) == pytest.approx(0.5)
    assert not sector.contains(181.0, 15.3)


def test_a_margin_round_the_whole_horizon_stays_a_whole_turn() -> None:
    ring = Sector("ring", 10.0, 9.0, -5.0, 2.0).with_margin(3.0)
    assert all(ring.contains(azimuth_deg, 1.0) for azimuth_deg in (0.0, 9.5, 181.0, 350.0))
