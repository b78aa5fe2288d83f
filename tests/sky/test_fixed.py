"""A direction that does not move."""

import numpy as np
import pytest

from trunnion.sky.errors import SkyError
from trunnion.sky.fixed import FixedDirection
from trunnion.sky.look import Look


def test_it_stands_still_at_no_distance() -> None:
    beacon = FixedDirection(143.7, -2.9)
    assert beacon.look(1.23e9) == Look(143.7, -2.9, None, 0.0, 0.0, None)
    looks = beacon.looks(np.array([1.2e9, 1.3e9, 1.4e9]))
    np.testing.assert_array_equal(looks.azimuth_deg, [143.7] * 3)
    np.testing.assert_array_equal(looks.elevation_deg, [-2.9] * 3)
    assert not looks.azimuth_rate_deg_s.any()
    assert looks.range_km is None


def test_azimuth_is_brought_into_one_turn_and_the_name_says_both() -> None:
    assert FixedDirection(-16.4, 5.25).name == "fixed:343.6,5.25"
    assert FixedDirection(360.0, 5.0) == FixedDirection(0.0, 5.0)


@pytest.mark.parametrize(
    "angles", [(float("nan"), 3.0), (float("inf"), 3.0), (3.0, 90.1), (3.0, float("nan"))]
)
def test_what_is_no_direction_is_refused(angles: tuple[float, float]) -> None:
    with pytest.raises(SkyError, match="expected a finite azimuth and an elevation"):
        FixedDirection(*angles)
