"""The picture of errors: its cells against a search over the second joint."""

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from tests.track.skies import START_S, Overflight
from tests.track.stations import CLEARANCE, STOW, mount
from trunnion.mount.arrays import joint_errors_deg
from trunnion.mount.clearance import Clearance, Sector
from trunnion.mount.hinges import Hinges
from trunnion.mount.horizon import HorizonMask
from trunnion.mount.mount import JointBox, JointLimits, Mount
from trunnion.track.course import Course, sample_course
from trunnion.track.options import LOST_DEG
from trunnion.track.picture import BLOCKED_DEG, draw

OPEN = Clearance(-90.0, None)


def course(highest_deg: float = 71.3, hinges: Hinges | None = None) -> Course:
    target = Overflight(highest_deg, heading_deg=211.1)
    return sample_course(target, START_S + 150.0, START_S + 650.0, (hinges or mount().hinges))


@settings(max_examples=30, deadline=None)
@given(
    st.sampled_from([(0.0, 90.0), (0.0, 180.0), (20.0, 75.0), (-85.0, 85.0), (-20.0, 230.0)]),
    st.sampled_from([Hinges.azimuth_elevation(), Hinges.x_y_north_south()]),
    st.floats(15.0, 89.9),
    st.floats(0.0, 1.0),
    st.floats(0.0, 1.0),
)
def test_a_cell_is_as_good_as_its_best_second_angle(
    travel: tuple[float, float], hinges: Hinges, highest_deg: float, row: float, cell: float
) -> None:
    machine = mount(second=travel, hinges=hinges)
    sampled = course(highest_deg, hinges)
    picture = draw(sampled, machine, OPEN)
    at = int(row * (len(picture.error_deg) - 1)), int(cell * (len(picture.first_deg) - 1))
    sample = at[0] * picture.stride
    motions = sampled.part(sample, sample + 1).motions
    second_deg = np.linspace(*travel, 2001)
    errors = [
        joint_errors_deg(np.full_like(second_deg, first_deg), second_deg, motions).min()
        for first_deg in picture.first_deg[at[1]]
        + picture.half_cell_deg * np.linspace(-1.0, 1.0, 21)
    ]
    if min(errors) < LOST_DEG:  # what is lost anyway need not be known so well
        assert picture.error_deg[at] == pytest.approx(min(errors), abs=0.15)
    else:
        assert picture.error_deg[at] > LOST_DEG - 1.0


def test_a_mask_a_keep_out_and_a_strut_block_cells() -> None:
    sampled = course()
    mast = Sector("mast", 100.0, 140.0, 0.0, 90.0)
    hills = HorizonMask(((0.0, 5.0), (99.0, 5.0)))
    strut = JointBox("strut", -60.0, -40.0, 0.0, 90.0)
    plain = mount()
    blocked = draw(
        sampled,
        Mount(plain.hinges, plain.first, plain.second, STOW, (strut,)),
        Clearance(5.0, hills, (mast,)),
    )
    first_deg = blocked.first_deg
    in_mast = ((first_deg > 101.0) & (first_deg < 139.0)) | (
        (first_deg > -259.0) & (first_deg < -221.0)
    )
    in_strut = (first_deg > -59.0) & (first_deg < -41.0)
    assert (blocked.error_deg[:, in_mast | in_strut] == BLOCKED_DEG).all()
    free = draw(sampled, plain, CLEARANCE)
    assert (free.error_deg <= blocked.error_deg + 1e-9).all()
    assert free.error_deg.max() < BLOCKED_DEG


@pytest.mark.parametrize("rate_deg_s", [0.05, 0.4, 5.0, 60.0])
def test_a_step_of_the_picture_is_no_more_than_the_joint_can_do(rate_deg_s: float) -> None:
    plain = mount()
    limits = JointLimits(-271.0, 268.0, rate_deg_s, 3.0)
    sampled = course()
    picture = draw(sampled, Mount(plain.hinges, limits, plain.second, STOW), CLEARANCE)
    cell_deg = 2.0 * picture.half_cell_deg
    row_s = picture.stride * sampled.step_s
    assert picture.reach * cell_deg <= rate_deg_s * row_s * (1.0 + 1e-9)
    assert picture.error_deg.shape[1] < 6000
