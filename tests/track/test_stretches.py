"""When a target can be pointed at."""

from dataclasses import replace

import pytest

from tests.track.skies import START_S, Lost, Overflight
from tests.track.stations import CLEARANCE, FLOOR_DEG
from trunnion.mount.clearance import Clearance, Sector
from trunnion.mount.horizon import HorizonMask
from trunnion.sky.errors import NoPosition
from trunnion.track.stretches import clear_stretches
from trunnion.track.wanted import Wanted

TARGET = Overflight(41.7, heading_deg=173.9)


def wanted(target: Overflight | Lost = TARGET, **changes: float) -> Wanted:
    return Wanted("c", target, START_S, START_S + 800.0, 1, **changes)


def test_a_stretch_begins_and_ends_at_the_floor() -> None:
    (stretch,) = clear_stretches(wanted(), CLEARANCE)
    for edge_s in stretch:
        assert TARGET.look(edge_s).elevation_deg == pytest.approx(FLOOR_DEG, abs=1e-3)
        assert TARGET.look(edge_s).elevation_deg >= FLOOR_DEG
    assert stretch.begin_s < TARGET.culmination_s < stretch.end_s


def test_a_wish_for_more_elevation_is_kept() -> None:
    (stretch,) = clear_stretches(wanted(minimum_elevation_deg=22.2), CLEARANCE)
    assert TARGET.look(stretch.begin_s).elevation_deg == pytest.approx(22.2, abs=2e-3)


def test_an_obstacle_in_the_middle_makes_two_stretches() -> None:
    azimuth_deg = TARGET.look(TARGET.culmination_s).azimuth_deg
    mast = Sector("mast", azimuth_deg - 5.0, azimuth_deg + 5.0, 0.0, 60.0)
    before, after = clear_stretches(wanted(), Clearance(FLOOR_DEG, None, (mast,)))
    assert before.end_s < TARGET.culmination_s < after.begin_s
    assert TARGET.look(before.end_s).azimuth_deg == pytest.approx(azimuth_deg + 5.0, abs=0.02)


def test_behind_the_mask_there_is_nothing() -> None:
    wall = Clearance(FLOOR_DEG, HorizonMask(((0.0, 50.0),)))
    assert clear_stretches(wanted(), wall) == ()


def test_no_position_is_said() -> None:
    with pytest.raises(NoPosition):
        clear_stretches(wanted(Lost(TARGET, START_S + 300.0)), CLEARANCE)


def test_a_margin_keeps_away_from_the_floor() -> None:
    target = Overflight(48.1, 17.3)
    plain = Wanted("c", target, START_S, START_S + 800.0, 1)
    spared = replace(plain, margin_deg=0.7)
    (near,), (far,) = clear_stretches(plain, CLEARANCE), clear_stretches(spared, CLEARANCE)
    assert near.begin_s < far.begin_s < far.end_s < near.end_s
    lowest_deg = target.look(far.begin_s).elevation_deg
    assert lowest_deg == pytest.approx(CLEARANCE.lowest_deg(0.0) + 0.7, abs=0.01)
