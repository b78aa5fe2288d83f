"""How wide the bands are, against a search over both joints."""

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from trunnion.mount.arrays import Motions, joint_errors_deg
from trunnion.mount.mount import JointLimits
from trunnion.track.bands import UNBOUNDED_DEG, half_widths_deg


@settings(max_examples=100, deadline=None)
@given(
    st.floats(1.0, 89.9),
    st.floats(0.1, 25.0),
    st.sampled_from([(0.0, 90.0), (0.0, 180.0), (20.0, 75.0), (-90.0, 90.0), (10.0, 120.0)]),
    st.integers(0, 1),
)
def test_a_turn_is_within_the_band_exactly_when_the_level_can_be_reached(
    plain_deg: float, level_deg: float, travel: tuple[float, float], branch: int
) -> None:
    limits = JointLimits(*travel, 5.0, 3.0)
    motions = Motions(*(np.array([each]) for each in (0.0, plain_deg, 0.0, 0.0)))
    half_deg = half_widths_deg(np.array([level_deg]), motions, np.array([branch]), limits)[0]
    lower_deg, upper_deg = (
        (max(travel[0], 90.0), travel[1])
        if branch
        else (
            travel[0],
            min(travel[1], 90.0),
        )
    )
    if lower_deg > upper_deg:
        assert half_deg == -1.0
        return
    second_deg = np.linspace(lower_deg, upper_deg, 4001)

    def least_error_deg(turn_deg: float) -> float:
        first_deg = np.full_like(second_deg, turn_deg + 180.0 * branch)
        return float(joint_errors_deg(first_deg, second_deg, motions).min())

    if half_deg == UNBOUNDED_DEG:
        assert least_error_deg(180.0) <= level_deg + 0.03
    elif half_deg < 0.0:
        assert least_error_deg(0.0) > level_deg - 1e-6
    else:
        assert least_error_deg(half_deg * 0.99) <= level_deg + 0.03
        assert least_error_deg(min(half_deg + 1.0, 180.0)) >= level_deg - 1e-6


def test_a_band_as_in_the_textbook() -> None:
    """Within the travel the half-width is asin(sin e / cos elevation): spherical trigonometry."""
    motions = Motions(*(np.array([each]) for each in (0.0, 61.3, 0.0, 0.0)))
    limits = JointLimits(0.0, 90.0, 5.0, 3.0)
    half_deg = half_widths_deg(np.array([7.7]), motions, np.array([0]), limits)[0]
    expected_deg = np.degrees(np.arcsin(np.sin(np.radians(7.7)) / np.cos(np.radians(61.3))))
    assert half_deg == pytest.approx(expected_deg)
