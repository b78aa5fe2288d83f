"""The geometry for many instants at once is that for one."""

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from tests.mount.mounts import azimuths, elevations, hinges
from trunnion.mount.arrays import Motions, joint_errors_deg, plain_motions
from trunnion.mount.hinges import Hinges
from trunnion.mount.joints import Joints
from trunnion.mount.sphere import separation_deg

rates = st.floats(-3.0, 3.0)


@given(hinges, azimuths, elevations, rates, rates)
def test_joints_and_rates_are_those_of_one_instant(
    mount: Hinges, azimuth_deg: float, elevation_deg: float, rate: float, other: float
) -> None:
    many = plain_motions(
        mount, *(np.array([each]) for each in (azimuth_deg, elevation_deg, rate, other))
    )
    one = mount.motion(azimuth_deg, elevation_deg, rate, other)
    off_axis_deg = separation_deg(
        azimuth_deg, elevation_deg, mount.axis_azimuth_deg, mount.axis_elevation_deg
    )
    if 0.1 < off_axis_deg < 179.9:
        assert (many.first_deg[0] - one.first_deg + 180.0) % 360.0 == pytest.approx(180.0, abs=1e-6)
        assert many.second_deg[0] == pytest.approx(one.second_deg, abs=1e-9)
        assert many.first_rate_deg_s[0] == pytest.approx(one.first_rate_deg_s, rel=1e-6, abs=1e-6)
        assert many.second_rate_deg_s[0] == pytest.approx(one.second_rate_deg_s, abs=1e-6)


def test_the_first_joint_runs_on_across_north() -> None:
    azimuth_deg = np.array([353.1, 357.9, 3.3, 9.7])
    zero = np.zeros(4)
    motions = plain_motions(Hinges.azimuth_elevation(), azimuth_deg, zero + 41.0, zero, zero)
    assert motions.first_deg == pytest.approx([353.1, 357.9, 363.3, 369.7])


@given(hinges, azimuths, elevations, st.floats(-400.0, 400.0), st.floats(-80.0, 200.0))
def test_errors_are_angles_between_directions(
    mount: Hinges, azimuth_deg: float, elevation_deg: float, first_deg: float, second_deg: float
) -> None:
    zero = np.zeros(1)
    truth = plain_motions(mount, np.array([azimuth_deg]), np.array([elevation_deg]), zero, zero)
    error_deg = joint_errors_deg(np.array([first_deg]), np.array([second_deg]), truth)
    boresight = mount.boresight(Joints(first_deg, second_deg))
    expected_deg = separation_deg(azimuth_deg, elevation_deg, *boresight)
    assert error_deg[0] == pytest.approx(expected_deg, abs=1e-6)


def test_an_exact_path_has_no_error() -> None:
    truth = Motions(*(np.array([each]) for each in (211.3, 47.9, 0.0, 0.0)))
    assert joint_errors_deg(truth.first_deg, truth.second_deg, truth)[0] < 1e-13
    assert joint_errors_deg(truth.first_deg - 180.0, 180.0 - truth.second_deg, truth)[0] < 1e-6
