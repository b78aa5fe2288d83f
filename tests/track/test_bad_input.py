"""What no plan should hold, and yet does: a clear finding each, and nothing else is lost."""

import tracemalloc
from dataclasses import dataclass, replace

import numpy as np
import pytest

from tests.track.skies import START_S, Overflight
from tests.track.stations import BEAM, CLEARANCE, STOW, mount
from trunnion.mount.clearance import Clearance, Sector
from trunnion.mount.horizon import HorizonMask
from trunnion.mount.joints import Joints
from trunnion.mount.mount import Mount
from trunnion.sky.fixed import FixedDirection
from trunnion.sky.look import FloatArray, Look, Looks, Target
from trunnion.track.day import plan_day
from trunnion.track.programme import FindingKind, Programme
from trunnion.track.wanted import Wanted

TARGET = Overflight(48.1, heading_deg=211.1)


@dataclass(frozen=True)
class Jumping:
    """A table with an error: from an instant on, everything is somewhere else."""

    target: Overflight
    jump_s: float
    name: str = "jumping"

    def look(self, utc_s: float) -> Look:
        look = self.target.look(utc_s)
        return look._replace(azimuth_deg=(look.azimuth_deg + 77.7 * (utc_s > self.jump_s)) % 360.0)

    def looks(self, utc_s: FloatArray) -> Looks:
        looks = self.target.looks(utc_s)
        jump_deg = 77.7 * (utc_s > self.jump_s)
        return looks._replace(azimuth_deg=(looks.azimuth_deg + jump_deg) % 360.0)


@dataclass(frozen=True)
class Nowhere:
    """A target that breaks its promise to be finite."""

    target: Overflight
    name: str = "nowhere"

    def look(self, utc_s: float) -> Look:
        return self.target.look(utc_s)

    def looks(self, utc_s: FloatArray) -> Looks:
        looks = self.target.looks(utc_s)
        azimuth_deg = looks.azimuth_deg.copy()
        azimuth_deg[len(azimuth_deg) // 2] = np.nan
        return looks._replace(azimuth_deg=azimuth_deg)


def wanted(target: Target = TARGET, from_s: float = 60.0, until_s: float = 740.0) -> Wanted:
    return Wanted("c", target, START_S + from_s, START_S + until_s, 1)


def plan(
    *contacts: Wanted,
    machine: Mount | None = None,
    clearance: Clearance = CLEARANCE,
    start: Joints = STOW,
) -> Programme:
    return plan_day(contacts, machine or mount(), clearance, BEAM, start, START_S)


def kinds(programme: Programme, index: int = 0) -> list[FindingKind]:
    return [finding.kind for finding in programme.forecasts[index].findings]


def test_a_travel_that_reaches_no_part_of_the_sky() -> None:
    assert kinds(plan(wanted(), machine=mount(second=(-80.0, -60.0)))) == [FindingKind.OFF_TRAVEL]


def test_a_contact_entirely_in_the_mask() -> None:
    wall = Clearance(5.0, HorizonMask(((0.0, 60.0),)))
    assert kinds(plan(wanted(), clearance=wall)) == [FindingKind.NEVER_VISIBLE]


def test_start_joints_outside_the_travel() -> None:
    programme = plan(wanted(), start=Joints(300.0, 95.0))
    assert programme.forecasts[0].is_served


def test_a_keep_out_that_encloses_the_start() -> None:
    mast = Sector("mast", 0.0, 25.0, 0.0, 80.0)
    programme = plan(wanted(), clearance=Clearance(5.0, None, (mast,)))
    assert FindingKind.NO_WAY in kinds(programme) or FindingKind.LEFT_OUT in kinds(programme)
    assert not programme.forecasts[0].is_served


@pytest.mark.parametrize("until_s", [60.0, 50.0])
def test_a_contact_without_length(until_s: float) -> None:
    assert kinds(plan(wanted(until_s=until_s))) == [FindingKind.EMPTY]


def test_a_target_that_jumps() -> None:
    programme = plan(wanted(Jumping(TARGET, START_S + 377.0)), wanted(TARGET, 700.0, 740.0))
    (forecast, _) = programme.forecasts
    assert not forecast.is_served
    assert forecast.outside_beam_s > 5.0
    assert forecast.begin_s is not None


def test_a_direction_that_is_no_number() -> None:
    programme = plan(wanted(Nowhere(TARGET)), replace(wanted(), from_s=START_S + 700.0))
    assert FindingKind.NO_POSITION in kinds(programme, 0)
    assert programme.forecasts[0].begin_s is None


def test_contacts_back_to_back_with_no_pause() -> None:
    other = Overflight(33.3, heading_deg=31.0)
    programme = plan(wanted(TARGET, 60.0, 400.0), replace(wanted(other, 400.0, 740.0), contact="d"))
    assert [each.contact for each in programme.assignments] == ["c", "d"]
    assert programme.assignments[0].end_s <= programme.assignments[1].begin_s
    assert FindingKind.LATE in kinds(programme, 1)


def test_a_hundred_contacts_at_once() -> None:
    crowd = [replace(wanted(), contact=f"c{number}", priority=number % 7) for number in range(100)]
    programme = plan(*crowd)
    assert len(programme.forecasts) == 100
    assert [each.contact for each in programme.assignments] == ["c6"]
    served = [each.contact for each in programme.forecasts if each.is_served]
    assert served == ["c6"]


def test_a_contact_of_days_takes_no_more_memory_than_a_day_of_contacts() -> None:
    tracemalloc.start()
    try:
        fixed = FixedDirection(123.4, 45.6)
        programme = plan(replace(wanted(), target=fixed, until_s=START_S + 3 * 86_400.0))
        peak_mib = tracemalloc.get_traced_memory()[1] / 2**20
    finally:
        tracemalloc.stop()
    assert programme.forecasts[0].worst_error_deg < 1e-9
    assert peak_mib < 100.0
