"""The continuous pass: paths within every limit, exact where the mount can follow."""

import numpy as np
import pytest
from hypothesis import Phase, given, settings
from hypothesis import strategies as st

from tests.track.skies import START_S, Overflight
from tests.track.stations import BEAM, CLEARANCE, STOW, mount
from trunnion.mount.arrays import FloatArray, Motions, joint_errors_deg
from trunnion.mount.hinges import Hinges
from trunnion.mount.mount import JointLimits, Mount
from trunnion.track.course import Course, sample_course
from trunnion.track.objective import Objective
from trunnion.track.options import options_for
from trunnion.track.planned_arrays import motions_along, planned_path
from trunnion.track.steering import Aim, steer
from trunnion.track.stretches import clear_stretches
from trunnion.track.wanted import Wanted

NO_ENCODER_DEG = 1e-4
"""Smaller than any encoder resolves."""

NO_SHRINKING = (Phase.explicit, Phase.reuse, Phase.generate)
"""An example takes a tenth of a second: shrinking one would take minutes."""


def planned(
    target: Overflight, machine: Mount, objective: Objective = Objective.WORST_ERROR
) -> tuple[Course, Motions]:
    """The best option's first leg, or all there is of it."""
    wanted = Wanted("c", target, START_S, START_S + 800.0, 1)
    (stretch,) = clear_stretches(wanted, CLEARANCE)
    course = sample_course(target, *stretch, machine.hinges)
    aim = Aim(machine, CLEARANCE, objective, BEAM.half_width_deg)
    option = options_for(course, aim, BEAM)[0]
    leg = option.legs[0]
    part = course.part(leg.begin, leg.last + 1)
    return part, steer(part, option.branch[leg.begin : leg.last + 1], aim)


def errors_deg(course: Course, motions: Motions) -> FloatArray:
    return joint_errors_deg(motions.first_deg, motions.second_deg, course.motions)


def assert_within_limits(course: Course, motions: Motions, machine: Mount) -> None:
    """At every sample and between them: the path is looked at 20 times a step."""
    path = planned_path(Overflight(50.0), course.begin_s, course.step_s, motions)
    fine_s = float(course.step_s / 20.0)
    utc_s = np.asarray(course.begin_s + fine_s * np.arange(20 * (course.size - 1) + 1))
    flown = motions_along(path, utc_s)
    for angle, rate, limits in (
        (flown.first_deg, flown.first_rate_deg_s, machine.first),
        (flown.second_deg, flown.second_rate_deg_s, machine.second),
    ):
        assert angle.min() >= limits.soft_lower_deg - NO_ENCODER_DEG
        assert angle.max() <= limits.soft_upper_deg + NO_ENCODER_DEG
        assert np.abs(rate).max() <= limits.rate_deg_s * 1.001
        accelerations = np.diff(rate) / fine_s
        assert np.abs(accelerations).max() <= limits.acceleration_deg_s2 * 1.001


machines = st.builds(
    Mount,
    st.sampled_from(
        [
            Hinges.azimuth_elevation(),
            Hinges.x_y_north_south(),
            Hinges.x_y_east_west(),
            Hinges.hour_angle_declination(47.3),
            Hinges(31.1, 61.7, is_clockwise=False),
        ]
    ),
    st.builds(
        JointLimits,
        st.floats(-300.0, -91.0),
        st.floats(91.0, 300.0),
        st.floats(1.0, 12.0),
        st.floats(0.3, 5.0),
    ),
    st.builds(
        JointLimits,
        st.floats(-91.0, 5.0),
        st.floats(85.0, 185.0),
        st.floats(2.0, 12.0),
        st.floats(0.5, 5.0),
        st.floats(0.0, 2.0),
    ),
    st.just(STOW),
)


@settings(max_examples=30, deadline=None, phases=NO_SHRINKING)
@given(machines, st.floats(20.0, 89.95), st.floats(0.0, 359.0), st.sampled_from(Objective))
def test_any_path_obeys_every_limit_at_the_samples_and_between(
    machine: Mount, highest_deg: float, heading_deg: float, objective: Objective
) -> None:
    course, motions = planned(Overflight(highest_deg, heading_deg), machine, objective)
    assert_within_limits(course, motions, machine)


@pytest.mark.parametrize("second", [(0.0, 90.0), (0.0, 180.0)])
def test_where_the_mount_can_follow_the_error_is_nothing(second: tuple[float, float]) -> None:
    course, motions = planned(Overflight(79.3, 211.1), mount(second=second))
    assert errors_deg(course, motions).max() < 1e-9


@pytest.mark.parametrize("objective", Objective)
def test_far_from_the_keyhole_the_path_is_exact(objective: Objective) -> None:
    course, motions = planned(Overflight(88.1, 211.1), mount(), objective)
    far = course.motions.second_deg < 45.0
    assert far.sum() > 200
    assert errors_deg(course, motions)[far].max() < 1e-9


@pytest.mark.parametrize("highest_deg", [88.0, 89.5, 89.9])
def test_over_the_top_the_error_is_the_miss_of_the_zenith(highest_deg: float) -> None:
    course, motions = planned(Overflight(highest_deg, 211.1), mount(second=(0.0, 180.0)))
    assert errors_deg(course, motions).max() <= 1.05 * (90.0 - highest_deg)


@pytest.mark.parametrize("highest_deg", [85.0, 88.0, 89.5])
def test_a_faster_joint_never_makes_it_worse(highest_deg: float) -> None:
    worst_deg = [
        errors_deg(*planned(Overflight(highest_deg, 211.1), mount(rate_deg_s=rate))).max()
        for rate in (4.0, 5.0, 7.0, 10.0)
    ]
    assert worst_deg == sorted(worst_deg, reverse=True)


def test_more_travel_never_makes_it_worse() -> None:
    worst_deg = [
        errors_deg(*planned(Overflight(89.0, 211.1), mount(second=(0.0, upper_deg)))).max()
        for upper_deg in (80.0, 85.0, 90.0, 120.0, 180.0)
    ]
    assert worst_deg == sorted(worst_deg, reverse=True)


def test_less_time_outside_the_beam_may_cost_a_larger_error() -> None:
    target = Overflight(89.0, 211.1)
    by_time, by_error = (
        errors_deg(*planned(target, mount(), objective))
        for objective in (Objective.TIME_OUTSIDE_BEAM, Objective.WORST_ERROR)
    )
    outside = [int((each > BEAM.half_width_deg).sum()) for each in (by_time, by_error)]
    assert outside[0] <= outside[1]
    assert by_error.max() <= by_time.max() * 1.01


def test_whole_turns_of_the_travel_change_nothing() -> None:
    target = Overflight(88.0, 211.1)
    one, other = (
        planned(target, mount(first=(-271.0 + turn_deg, 268.0 + turn_deg)))
        for turn_deg in (0.0, 360.0)
    )
    assert errors_deg(*one) == pytest.approx(errors_deg(*other), abs=1e-6)
