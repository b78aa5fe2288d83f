"""Planned near-zenith passes against the optimum of a linear programme (scipy, HiGHS)."""

import pytest

from tests.bench.passes import linear_programme_deg, machine, planned_errors_deg
from tests.track.skies import Overflight
from trunnion.track.beam import Beam
from trunnion.track.objective import Objective

BEAM = Beam(1.0, 0.1)


@pytest.mark.parametrize(
    ("rate_deg_s", "acceleration_deg_s2", "most"), [(5.0, 3.0, 1.0), (6.0, 0.5, 1.02)]
)
@pytest.mark.parametrize("highest_deg", [85.0, 88.0, 89.9])
def test_no_worse_than_the_best_of_azimuth_alone(
    highest_deg: float, rate_deg_s: float, acceleration_deg_s2: float, most: float
) -> None:
    """The programme moves the azimuth alone; the second joint helps ours."""
    target, mount = Overflight(highest_deg), machine(rate_deg_s, acceleration_deg_s2)
    ours_deg = planned_errors_deg(target, mount, Objective.WORST_ERROR, BEAM).max()
    assert 0.5 * linear_programme_deg(target, mount) < ours_deg
    assert ours_deg <= most * linear_programme_deg(target, mount)


def test_nothing_is_lost_where_the_programme_loses_nothing() -> None:
    target, mount = Overflight(80.0), machine(5.0, 3.0)
    assert linear_programme_deg(target, mount) < 1e-9
    assert planned_errors_deg(target, mount, Objective.WORST_ERROR, BEAM).max() < 1e-5
