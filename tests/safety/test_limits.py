"""What the gate counts on when the mount brakes."""

import pytest

from tests.safety.bench_mount import LIMITS


@pytest.mark.parametrize("joint", ["first", "second"])
def test_braking_counts_on_less_than_all_the_acceleration_and_leaves_the_rate(joint: str) -> None:
    full, braking = getattr(LIMITS.mount, joint), getattr(LIMITS.braking, joint)
    assert braking.acceleration_deg_s2 == pytest.approx(0.8 * full.acceleration_deg_s2)
    assert braking.rate_deg_s == full.rate_deg_s
