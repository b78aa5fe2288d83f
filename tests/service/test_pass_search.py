from dataclasses import dataclass
from math import cos, pi, sin

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from trunnion.service.pass_search import search_passes
from trunnion.sky.look import FloatArray, Look, Looks
from trunnion.sky.passes import find_passes

DAY_S = 86400.0


@dataclass(frozen=True)
class Swinging:
    """A target that rises and sets like a pendulum, with this period, highest at time zero."""

    period_s: float
    name: str = "pendulum"

    def look(self, utc_s: float) -> Look:
        phase, rate = 2 * pi * utc_s / self.period_s, 2 * pi / self.period_s
        return Look(123.0, 40 * cos(phase), None, 0.0, -40 * rate * sin(phase), None)

    def looks(self, utc_s: FloatArray) -> Looks:
        rate = 2 * pi / self.period_s
        elevation_deg, slope = np.cos(rate * utc_s), -rate * np.sin(rate * utc_s)
        still = np.zeros_like(utc_s)
        return Looks(still + 123, 40 * elevation_deg, None, still, 40 * slope, None)


@given(st.floats(0.3, 70), st.floats(-30, 30), st.floats(16, 60))
def test_a_search_in_pieces_finds_what_one_search_finds(
    period_days: float, begin_days: float, days: float
) -> None:
    target = Swinging(period_days * DAY_S)
    begin_s, end_s = begin_days * DAY_S, (begin_days + days) * DAY_S
    done_s: list[float] = []
    pieces = search_passes(target, begin_s, end_s, 11.3, done_s.append)
    whole = find_passes(target, begin_s, end_s, 11.3)
    assert len(done_s) > 1
    assert sum(done_s) == pytest.approx(end_s - begin_s)
    assert len(pieces) == len(whole)
    for one, other in zip(pieces, whole, strict=True):
        assert one.rise_s == pytest.approx(other.rise_s, abs=0.01)
        assert one.set_s == pytest.approx(other.set_s, abs=0.01)
        assert one.highest_elevation_deg == pytest.approx(other.highest_elevation_deg, abs=1e-6)
        assert (one.culmination_s is None) == (other.culmination_s is None)


def test_a_culmination_at_the_seam_itself_is_kept() -> None:
    target = Swinging(4 * DAY_S)
    (found,) = search_passes(target, -10 * DAY_S, 10 * DAY_S, 39.0, lambda _: None)[2:3]
    assert found.culmination_s == pytest.approx(0.0, abs=0.01)
    assert found.rise_s is not None
    assert found.set_s == pytest.approx(-found.rise_s)
