"""How far look angles can be trusted: sizes by hand, and by taking away what is doubted."""

from dataclasses import replace

import pytest

from tests.sky.stations import DAY_S, EARTH, EPOCH_S, NORTH, satellite
from trunnion.sky.atmosphere import standard_air
from trunnion.sky.bodies import SeriesBody
from trunnion.sky.celestial import Celestial
from trunnion.sky.earth import EarthOrientation
from trunnion.sky.elements import Satellite
from trunnion.sky.fixed import FixedDirection
from trunnion.sky.growth import OrbitClass, orbit_class, position_error_km
from trunnion.sky.instants import parse_utc
from trunnion.sky.naming import Body
from trunnion.sky.passes import find_passes
from trunnion.sky.refraction import TracedRefraction
from trunnion.sky.sun import Sun
from trunnion.sky.trust import doubts, expected_error_deg, sky_rate_deg_s
from trunnion.sky.viewpoint import Viewpoint

RADIO = TracedRefraction.radio(standard_air(30.0), 30.0)
VIEW = Viewpoint(NORTH, EARTH, RADIO, is_apparent=True)


def overhead_s() -> float:
    passes = find_passes(satellite("QUILLON-1"), EPOCH_S, EPOCH_S + DAY_S, 10.0)
    highest = max(passes, key=lambda each: each.highest_elevation_deg)
    assert highest.culmination_s is not None
    return highest.culmination_s


def seen(view: Viewpoint) -> Satellite:
    return Satellite(satellite("QUILLON-1").element_set, view)


def sizes(target: Satellite, utc_s: float, clock_error_s: float = 0.0) -> dict[str, float]:
    return {each.what: each.angle_deg for each in doubts(target, utc_s, clock_error_s)}


def test_with_everything_in_place_only_the_elements_are_in_doubt() -> None:
    utc_s = overhead_s()
    target = seen(VIEW)
    found = doubts(target, utc_s)
    assert [each.what for each in found] == ["age of the orbit elements"]
    assert found[0].source == "common practice, no source"
    range_km = target.look(utc_s).range_km
    assert range_km is not None
    error_km = position_error_km(94.9, (utc_s - EPOCH_S) / DAY_S)
    assert expected_error_deg(found) == pytest.approx(57.29578 * error_km / range_km, rel=1e-3)


def test_the_error_grows_with_age_on_both_sides_of_the_epoch() -> None:
    errors = [position_error_km(95.0, days) for days in (0.0, 0.5, 3.0, 14.0)]
    assert errors == sorted(errors)
    assert position_error_km(95.0, -3.0) == position_error_km(95.0, 3.0)


@pytest.mark.parametrize(
    ("period_min", "kind"),
    [
        (94.9, OrbitClass.LOW),
        (718.0, OrbitClass.MIDDLE),
        (1436.1, OrbitClass.SYNCHRONOUS),
        (3000.0, OrbitClass.HIGH),
    ],
)
def test_orbits_have_classes(period_min: float, kind: OrbitClass) -> None:
    assert orbit_class(period_min) is kind


def test_without_an_earth_orientation_the_doubt_covers_what_it_changes() -> None:
    """A turn by 0.9 s moves an overhead satellite by no more than is said, and not by far less."""
    utc_s = overhead_s()
    without = replace(VIEW, earth=EarthOrientation.none())
    told = sizes(seen(without), utc_s)["Earth orientation: none for this instant"]
    look = seen(without).look(utc_s)
    sky_rate = sky_rate_deg_s(look)
    assert 0.3 * 0.9 * 0.065 * sky_rate < told < 0.05
    assert told > 0.01


def test_what_the_viewpoint_leaves_out_is_in_doubt_by_what_it_would_add() -> None:
    utc_s = overhead_s()
    full, bare = seen(VIEW), seen(VIEW.geometric())
    found = sizes(bare, utc_s)
    moved_deg = full.look(utc_s).elevation_deg - bare.look(utc_s).elevation_deg
    assert found["light time left out"] > 0.0
    assert found["light time left out"] + found["refraction left out"] > abs(moved_deg)
    low_s = find_passes(bare, utc_s - 1500.0, utc_s + 1500.0, 5.0)[0].rise_s
    assert low_s is not None
    lift_deg = full.look(low_s).elevation_deg - bare.look(low_s).elevation_deg
    assert sizes(bare, low_s)["refraction left out"] == pytest.approx(lift_deg, rel=0.1)


def test_a_clock_that_is_off_moves_the_target_by_its_own_motion() -> None:
    utc_s = overhead_s()
    target = seen(VIEW)
    before, after = target.look(utc_s), target.look(utc_s + 0.5)
    moved_deg = abs(after.azimuth_deg - before.azimuth_deg)
    told = sizes(target, utc_s, clock_error_s=0.5)["clock"]
    assert told == pytest.approx(0.5 * sky_rate_deg_s(before), rel=1e-9)
    assert 0.0 < told < moved_deg + 0.5


def test_a_series_is_trusted_less_beyond_its_fit() -> None:
    saturn = Celestial(SeriesBody(Body.SATURN), VIEW)
    limits = [
        doubts(saturn, parse_utc(instant))[0].angle_deg * 3600.0
        for instant in ("2049-11-12T13:14:15Z", "2053-11-12T13:14:15Z")
    ]
    assert limits == pytest.approx([5.0, 120.0])


def test_the_sun_is_as_good_as_its_series_and_a_beacon_needs_no_trust() -> None:
    (series,) = doubts(Sun(VIEW), EPOCH_S)
    assert series.angle_deg == pytest.approx(1.0 / 3600.0)
    assert "DE421" in series.source
    assert doubts(FixedDirection(12.3, 45.6), EPOCH_S) == ()
    assert expected_error_deg(()) == 0.0


def test_an_expired_table_of_leap_seconds_is_told() -> None:
    expired = replace(EARTH.leap_seconds, expires_s=EPOCH_S - 1.0)
    view = replace(VIEW, earth=replace(EARTH, leap_seconds=expired))
    assert "leap-second table expired" in [each.what for each in doubts(Sun(view), EPOCH_S)]
