"""An operator's corrections, and planning the rest of a contact again."""

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from tests.track.skies import START_S, Overflight
from tests.track.stations import BEAM, CLEARANCE, STOW, mount
from trunnion.mount.joints import Motion
from trunnion.mount.motion import approach
from trunnion.mount.sphere import separation_deg
from trunnion.track.corrected import Corrected
from trunnion.track.correction import Correction
from trunnion.track.day import plan_day
from trunnion.track.replan import corrected, replan
from trunnion.track.wanted import Wanted

TARGET = Overflight(61.3, heading_deg=211.1)
INSTANT_S = START_S + 371.7


def test_a_time_bias_points_where_the_target_is_later() -> None:
    look = Corrected(TARGET, Correction(time_bias_s=2.7)).look(INSTANT_S)
    assert look == pytest.approx(TARGET.look(INSTANT_S + 2.7), rel=1e-4)


def test_offsets_of_the_angles_are_added() -> None:
    look = Corrected(TARGET, Correction(azimuth_deg=1.3, elevation_deg=-0.7)).look(INSTANT_S)
    plain = TARGET.look(INSTANT_S)
    assert look.azimuth_deg == pytest.approx(plain.azimuth_deg + 1.3)
    assert look.elevation_deg == pytest.approx(plain.elevation_deg - 0.7)
    assert look.range_km == plain.range_km


def test_an_elevation_beyond_the_zenith_is_the_other_side_of_it() -> None:
    target = Overflight(89.3)
    look = Corrected(target, Correction(elevation_deg=2.0)).look(target.culmination_s)
    assert look.elevation_deg == pytest.approx(88.7, abs=1e-3)


@given(st.floats(-5.0, 5.0), st.floats(-5.0, 5.0), st.floats(120.0, 680.0))
def test_offsets_on_the_sky_are_as_large_as_they_say(
    along_deg: float, across_deg: float, since_s: float
) -> None:
    plain = TARGET.look(START_S + since_s)
    corrected = Corrected(TARGET, Correction(along_deg=along_deg, across_deg=across_deg))
    look = corrected.look(START_S + since_s)
    moved_deg = separation_deg(*plain[:2], *look[:2])
    assert moved_deg == pytest.approx(np.hypot(along_deg, across_deg), abs=1e-6)


def test_along_is_ahead_and_across_is_to_the_right() -> None:
    plain, later = TARGET.look(INSTANT_S), TARGET.look(INSTANT_S + 1.0)
    step_deg = separation_deg(*plain[:2], *later[:2])
    ahead = Corrected(TARGET, Correction(along_deg=step_deg)).look(INSTANT_S)
    assert separation_deg(*ahead[:2], *later[:2]) < 0.01 * step_deg
    rising = Overflight(61.3)  # seen from the south it climbs, its azimuth hardly changes
    early_s = START_S + 130.0
    right = Corrected(rising, Correction(across_deg=1.0)).look(early_s)
    assert right.azimuth_deg > rising.look(early_s).azimuth_deg


def test_rates_are_the_derivatives() -> None:
    target = Corrected(TARGET, Correction(2.7, 1.1, -0.3, 0.9, -1.7))
    before, now, after = (target.look(INSTANT_S + by_s) for by_s in (-0.5, 0.0, 0.5))
    assert now.azimuth_rate_deg_s == pytest.approx(after[0] - before[0], abs=1e-4)
    assert now.elevation_rate_deg_s == pytest.approx(after[1] - before[1], abs=1e-4)


@pytest.mark.parametrize(
    "wrong",
    [{"time_bias_s": 301.0}, {"azimuth_deg": float("nan")}, {"along_deg": -11.0}],
)
def test_what_is_out_of_bounds_is_refused(wrong: dict[str, float]) -> None:
    with pytest.raises(ValueError, match=r"expected \w+ within ±"):
        Correction(**wrong)


def test_the_rest_is_planned_from_the_present_joints_and_taken_over_without_a_jump() -> None:
    wanted = Wanted("c", TARGET, START_S, START_S + 800.0, 3)
    (first,) = plan_day([wanted], mount(), CLEARANCE, BEAM, STOW, START_S).assignments
    now = first.path.at(INSTANT_S)
    correction = Correction(time_bias_s=3.0)
    programme = replan(wanted, correction, mount(), CLEARANCE, BEAM, now.joints, INSTANT_S)
    (second,) = programme.assignments
    assert second.begin_s == pytest.approx(INSTANT_S, abs=0.1)
    assert abs(second.path.at(second.begin_s).first_deg - now.first_deg) < 10.0
    flown, utc_s = now, INSTANT_S
    while flown != second.path.at(utc_s):
        utc_s += 0.1
        after = approach(flown, second.path.at(utc_s), mount(), 0.1)
        assert abs(after.first_rate_deg_s - flown.first_rate_deg_s) <= 0.3 + 1e-9
        flown = after
    assert utc_s < INSTANT_S + 5.0


def test_a_correction_replaces_the_one_before_and_none_takes_it_away() -> None:
    wanted = Wanted("c", TARGET, START_S, START_S + 800.0, 3)
    once = corrected(wanted, Correction(time_bias_s=3.0))
    twice = corrected(once, Correction(along_deg=0.3))
    assert isinstance(twice.target, Corrected)
    assert twice.target.target is TARGET
    assert corrected(twice, Correction()).target is TARGET


def test_a_late_start_takes_the_contact_up_where_the_mount_stands() -> None:
    wanted = Wanted("c", TARGET, START_S, START_S + 800.0, 3)
    programme = replan(wanted, Correction(), mount(), CLEARANCE, BEAM, STOW, INSTANT_S)
    assert programme.forecasts[0].findings[0].kind.name == "LATE"
    assert programme.forecasts[0].worst_error_deg < 1e-3
    assert isinstance(programme.assignments[0].path.at(INSTANT_S), Motion)
