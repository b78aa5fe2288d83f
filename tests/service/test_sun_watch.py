"""The circle round the Sun, from the station file to a contact that the Sun interrupts."""

from dataclasses import dataclass, field
from math import inf, nan
from pathlib import Path

import pytest

from tests.service.stations import station_with, write_plan, write_station
from trunnion.files.problems import FileProblems
from trunnion.mount.sphere import separation_deg
from trunnion.pilot.phase import Phase
from trunnion.safety.verdict import Rule
from trunnion.service.clock import VirtualClock
from trunnion.service.rehearsal import rehearsal_of
from trunnion.service.senses import Senses
from trunnion.service.sun_watch import EVERY_S, TRUSTED_S, SunWatch, sun_watch_of
from trunnion.service.viewpoint import viewpoint_of
from trunnion.sky.errors import NoPosition
from trunnion.sky.instants import format_utc, parse_utc
from trunnion.sky.look import Look
from trunnion.sky.sun import Sun

NOON_S = parse_utc("2026-12-01T02:31:17Z")
RADIUS_DEG = 3.7
KEPT = {"sun_keep_out_deg: null": f"sun_keep_out_deg: {RADIUS_DEG}"}


@dataclass
class CountedSun:
    """A Sun that moves a degree a second, and is lost from some second on."""

    lost_s: float = inf
    looks: list[float] = field(default_factory=list)

    def look(self, utc_s: float) -> Look:
        self.looks.append(utc_s)
        if utc_s >= self.lost_s:
            raise NoPosition("expected a Sun, got none")
        return Look(utc_s - NOON_S, 41.3, None, 1.0, 0.0, None)


def test_it_is_looked_up_every_few_seconds_and_after_every_step_of_the_clock() -> None:
    clock, sun = VirtualClock(NOON_S), CountedSun()
    watch = SunWatch(sun, clock)
    told = []
    for _ in range(50):
        told.append(watch.direction(0.01))
        clock.sleep(0.1)
    assert len(sun.looks) == 3
    assert told[-1] == pytest.approx((2.0 * EVERY_S, 41.3), abs=0.15)
    assert watch.direction(0.01) is not None


@pytest.mark.parametrize("error_s", [None, inf, nan, TRUSTED_S + 0.1])
def test_by_a_clock_that_nobody_trusts_it_is_not_known(error_s: float | None) -> None:
    watch = SunWatch(CountedSun(), VirtualClock(NOON_S))
    assert watch.direction(error_s) is None
    assert watch.direction(TRUSTED_S) == (0.0, 41.3)


def test_a_sun_that_cannot_be_computed_is_not_known() -> None:
    assert SunWatch(CountedSun(lost_s=NOON_S), VirtualClock(NOON_S)).direction(0.0) is None


def test_it_is_the_sun_as_the_station_sees_it(tmp_path: Path) -> None:
    station = station_with(tmp_path, KEPT)
    watch = sun_watch_of(station, VirtualClock(NOON_S))
    assert watch is not None
    seen = Sun(viewpoint_of(station)).look(NOON_S)
    assert watch.direction(0.0) == (seen.azimuth_deg, seen.elevation_deg)
    sensed = Senses(None, None, watch).now()
    assert sensed.sun == watch.direction(sensed.clock_error_s)


def test_without_the_key_nobody_looks(tmp_path: Path) -> None:
    assert sun_watch_of(station_with(tmp_path), VirtualClock(NOON_S)) is None


@pytest.mark.parametrize("radius", ["-3", "0", "90.1", ".nan", "wide"])
def test_a_circle_of_no_size_or_of_more_than_half_the_sky_is_a_mistake(
    tmp_path: Path, radius: str
) -> None:
    with pytest.raises(FileProblems, match=r"safety\.sun_keep_out_deg"):
        station_with(tmp_path, {"sun_keep_out_deg: null": f"sun_keep_out_deg: {radius}"})


def test_the_sun_moves_over_a_contact_and_on(tmp_path: Path) -> None:
    """It enters the circle before, passes, and leaves: the mount gives way and comes back."""
    station = write_station(tmp_path, KEPT)
    sun = Sun(viewpoint_of(station_with(tmp_path, KEPT)))
    there = sun.look(NOON_S)
    target = f"fixed:{there.azimuth_deg:.3f},{there.elevation_deg:.3f}"
    begin, end = (format_utc(NOON_S + aside_s, 0) for aside_s in (-1200.0, 1500.0))
    write_plan(tmp_path, f'{{target: "{target}", from: {begin}, until: {end}}}')
    _, rehearsal = rehearsal_of(station, None)
    nearest_deg, acted, tracked = 180.0, set(), []
    for turn in rehearsal.turns():
        assert turn.reading is not None
        assert turn.world.sun is not None
        boresight = rehearsal.mount.hinges.boresight(turn.reading.joints)
        nearest_deg = min(nearest_deg, separation_deg(*boresight, *turn.world.sun))
        acted |= {each.rule for each in turn.verdict.interventions}
        if turn.decision.phase is Phase.TRACKING:
            tracked.append(turn.utc_s)
    assert nearest_deg > RADIUS_DEG - 0.05
    assert Rule.SUN_IN_BEAM in acted
    assert Rule.SUN_UNKNOWN not in acted
    assert tracked[0] < NOON_S - 1000.0
    assert tracked[-1] > NOON_S + 1400.0
    assert not [each for each in tracked if abs(each - NOON_S) < 600.0]
