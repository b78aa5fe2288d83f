"""Passes: none missed however short, edges exact, what the window and a mask cut off."""

from dataclasses import dataclass
from math import isclose

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from tests.sky.stations import DAY_S, EARTH, EPOCH_S, NORTH, satellite
from trunnion.sky.errors import SkyError
from trunnion.sky.fixed import FixedDirection
from trunnion.sky.look import FloatArray, Look, Looks
from trunnion.sky.passes import Pass, find_passes
from trunnion.sky.refraction import NoRefraction
from trunnion.sky.site import Site
from trunnion.sky.sun import Sun
from trunnion.sky.viewpoint import Viewpoint

FROM_S = EPOCH_S + 4321.7
UNTIL_S = FROM_S + DAY_S
EDGE_S = 1e-3
LOW = ("QUILLON-1", "QUILLON-2", "BRINDLE-4")


def only(passes: tuple[Pass, ...]) -> Pass:
    (one,) = passes
    return one


@pytest.mark.parametrize("name", [*LOW, "OSPRELL", "LANTERN-G"])
@pytest.mark.parametrize("above_deg", [-3.3, 4.7, 31.9])
def test_every_second_of_a_day_is_in_a_pass_or_out_of_it(name: str, above_deg: float) -> None:
    target = satellite(name)
    seconds = np.arange(FROM_S, UNTIL_S, 1.0)
    is_up = target.looks(seconds).elevation_deg >= above_deg
    in_a_pass = np.zeros_like(is_up)
    for each in find_passes(target, FROM_S, UNTIL_S, above_deg):
        begin_s = FROM_S if each.rise_s is None else each.rise_s
        end_s = UNTIL_S if each.set_s is None else each.set_s
        in_a_pass |= (seconds >= begin_s) & (seconds < end_s)
    np.testing.assert_array_equal(in_a_pass, is_up)


@pytest.mark.parametrize("name", LOW)
def test_rise_and_set_stand_at_the_threshold_and_culmination_at_the_top(name: str) -> None:
    target = satellite(name)
    passes = find_passes(target, FROM_S, UNTIL_S, 4.7)
    assert len(passes) > 3
    for each in passes:
        if each.rise_s is not None:
            assert target.look(each.rise_s).elevation_deg == pytest.approx(4.7, abs=1e-6)
        if each.set_s is not None:
            assert target.look(each.set_s).elevation_deg == pytest.approx(4.7, abs=1e-6)
        if each.culmination_s is not None:
            top = target.look(each.culmination_s)
            assert top.elevation_deg == pytest.approx(each.highest_elevation_deg, abs=1e-9)
            assert abs(top.elevation_rate_deg_s) < 1e-5


@settings(max_examples=25, deadline=None)
@given(st.sampled_from(LOW), st.floats(1e-7, 1e-3), st.floats(0.0, 7.0))
def test_a_pass_that_grazes_the_threshold_is_found(
    name: str, margin_deg: float, later_days: float
) -> None:
    """At 1e-7° below its highest elevation a low pass lasts a fraction of a second."""
    target = satellite(name)
    from_s = FROM_S + later_days * DAY_S
    for each in find_passes(target, from_s, from_s + 0.5 * DAY_S, 3.0):
        if each.culmination_s is None:
            continue
        threshold_deg = each.highest_elevation_deg - margin_deg
        around = (each.culmination_s - 1234.5, each.culmination_s + 1432.1)
        grazing = only(find_passes(target, *around, threshold_deg))
        assert grazing.rise_s is not None
        assert grazing.set_s is not None
        assert grazing.rise_s <= each.culmination_s + EDGE_S
        assert grazing.set_s >= each.culmination_s - EDGE_S


def test_a_window_that_opens_or_closes_in_a_pass_has_no_rise_or_set_there() -> None:
    target = satellite("QUILLON-1")
    whole = next(
        each for each in find_passes(target, FROM_S, UNTIL_S, 5.0) if each.rise_s and each.set_s
    )
    assert whole.rise_s is not None
    assert whole.culmination_s is not None
    assert whole.set_s is not None
    late = only(find_passes(target, whole.culmination_s + 7.1, whole.set_s + 60.0, 5.0))
    assert late.rise_s is None
    assert late.culmination_s is None
    assert late.set_s == pytest.approx(whole.set_s, abs=EDGE_S)
    assert late.highest_elevation_deg < whole.highest_elevation_deg
    early = only(find_passes(target, whole.rise_s - 60.0, whole.culmination_s - 7.1, 5.0))
    assert early.rise_s == pytest.approx(whole.rise_s, abs=EDGE_S)
    assert (early.culmination_s, early.set_s) == (None, None)


def test_what_never_sets_is_one_pass_and_what_never_rises_none() -> None:
    beacon = FixedDirection(143.7, 26.9)
    assert find_passes(beacon, FROM_S, UNTIL_S, 12.3) == (Pass(None, None, None, 26.9),)
    assert find_passes(beacon, FROM_S, UNTIL_S, 31.2) == ()
    beneath = satellite("LANTERN-G", Site(3.217, 118.9, 14.2))
    always = only(find_passes(beneath, FROM_S, UNTIL_S, 50.3))
    assert (always.rise_s, always.set_s) == (None, None)


def test_the_sun_rises_culminates_and_sets_once_a_day() -> None:
    viewpoint = Viewpoint(NORTH, EARTH, NoRefraction(), is_apparent=True)
    day = only(find_passes(Sun(viewpoint), FROM_S, FROM_S + DAY_S, -0.833))
    assert day.rise_s is not None
    assert day.culmination_s is not None
    assert day.set_s is not None
    assert day.rise_s < day.culmination_s < day.set_s
    assert day.highest_elevation_deg == pytest.approx(90.0 - 52.347 - 21.9, abs=0.2)


def test_a_mask_cuts_a_pass_into_pieces() -> None:
    target = satellite("QUILLON-1")
    whole = max(
        find_passes(target, FROM_S, UNTIL_S, 0.0), key=lambda each: each.highest_elevation_deg
    )
    assert whole.rise_s is not None
    assert whole.set_s is not None
    post_deg = target.look(whole.rise_s + 95.3).azimuth_deg

    def mask(azimuth_deg: float) -> float:
        return 89.9 if abs((azimuth_deg - post_deg + 180.0) % 360.0 - 180.0) < 0.4 else 0.0

    before, after = find_passes(target, whole.rise_s - 100.0, whole.set_s + 100.0, mask)
    assert before.set_s is not None
    assert after.rise_s is not None
    assert before.rise_s == pytest.approx(whole.rise_s, abs=EDGE_S)
    assert before.set_s < whole.rise_s + 95.3 < after.rise_s
    assert target.look(before.set_s - 0.01).azimuth_deg != pytest.approx(post_deg, abs=0.399)
    assert target.look(before.set_s + 0.01).azimuth_deg == pytest.approx(post_deg, abs=0.401)


@dataclass(frozen=True)
class Swing:
    """A target that hangs above the threshold for a second in every hour."""

    name: str = "swing"

    def look(self, utc_s: float) -> Look:
        return Look(*(float(each[0]) for each in self._fields(np.array([utc_s]))))

    def looks(self, utc_s: FloatArray) -> Looks:
        azimuth, elevation, distance, *rates = self._fields(utc_s)
        return Looks(azimuth, elevation, distance, *rates)

    @staticmethod
    def _fields(utc_s: FloatArray) -> list[FloatArray]:
        turn = 2.0 * np.pi / 3600.0
        phase = turn * ((utc_s - FROM_S) % 3600.0)
        still = np.zeros_like(utc_s)
        rate = -30.0 * turn * np.sin(phase - 2.7)
        return [still + 77.7, 30.0 * np.cos(phase - 2.7), still + 1.0, still, rate, still]


def test_peaks_far_shorter_than_the_grid_are_found_at_their_places() -> None:
    half_s = 0.5
    threshold_deg = 30.0 * float(np.cos(2.0 * np.pi / 3600.0 * half_s))
    passes = find_passes(Swing(), FROM_S, FROM_S + 24.0 * 3600.0, threshold_deg)
    assert len(passes) == 24
    for hour, each in enumerate(passes):
        assert each.rise_s is not None
        assert each.set_s is not None
        top_s = FROM_S + 3600.0 * (hour + 2.7 / (2.0 * np.pi))
        assert isclose(each.rise_s, top_s - half_s, abs_tol=2e-3)
        assert isclose(each.set_s, top_s + half_s, abs_tol=2e-3)


@pytest.mark.parametrize("length_s", [0.0, -5.0, 367.0 * DAY_S, float("nan")])
def test_an_impossible_window_is_refused(length_s: float) -> None:
    with pytest.raises(SkyError, match="expected a window"):
        find_passes(FixedDirection(1.2, 3.4), FROM_S, FROM_S + length_s, 0.0)


def test_a_site_at_the_pole_sees_a_polar_orbit_on_every_turn() -> None:
    target = satellite("QUILLON-1", Site(89.9, 12.3, 2801.0))
    assert len(find_passes(target, FROM_S, UNTIL_S, 5.0)) in {15, 16}
