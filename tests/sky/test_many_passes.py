"""The search over many satellites against the search over one, which knows no orbits."""

from dataclasses import replace

import numpy as np
import pytest

from tests.sky.fleets import high_sets, low_sets
from tests.sky.stations import DAY_S, EARTH, EPOCH_S, NORTH
from trunnion.sky.atmosphere import standard_air
from trunnion.sky.elements import ElementSet, Satellite
from trunnion.sky.errors import NoPosition, SkyError
from trunnion.sky.falsi import roots
from trunnion.sky.many_passes import Found, find_passes_of_many
from trunnion.sky.passes import Pass, find_passes
from trunnion.sky.refraction import NoRefraction, TracedRefraction
from trunnion.sky.site import Site
from trunnion.sky.viewpoint import Viewpoint

TOLERANCE_S = 0.01
TOLERANCE_DEG = 1e-3
WINDOW = EPOCH_S + 0.31 * DAY_S, EPOCH_S + 3.03 * DAY_S
VIEWS = {
    "north": Viewpoint(NORTH, EARTH, NoRefraction(), is_apparent=False),
    "apparent in the south": Viewpoint(
        Site(-33.871, 151.207, 61.9),
        EARTH,
        TracedRefraction.radio(standard_air(61.9), 61.9),
        is_apparent=True,
    ),
    "equator": Viewpoint(Site(0.0213, -51.066, 13.2), EARTH, NoRefraction(), is_apparent=False),
    "pole": Viewpoint(Site(89.9917, 33.3, 4.1), EARTH, NoRefraction(), is_apparent=False),
}


def passes_of(found: Found) -> tuple[Pass, ...]:
    assert not isinstance(found, NoPosition)
    return found


def assert_same(many: tuple[Pass, ...], one: tuple[Pass, ...]) -> None:
    assert len(many) == len(one)
    for ours, theirs in zip(many, one, strict=True):
        for a, b in ((ours.rise_s, theirs.rise_s), (ours.set_s, theirs.set_s)):
            assert (a is None) == (b is None)
            assert a is None or b is None or abs(a - b) < TOLERANCE_S
        assert (ours.culmination_s is None) == (theirs.culmination_s is None)
        assert ours.highest_elevation_deg == pytest.approx(
            theirs.highest_elevation_deg, abs=TOLERANCE_DEG
        )


@pytest.mark.parametrize("place", VIEWS)
@pytest.mark.parametrize("above_deg", [-0.7, 4.7, 31.3])
def test_low_orbits_lose_no_pass_and_invent_none(place: str, above_deg: float) -> None:
    satellites = [Satellite(each, VIEWS[place]) for each in low_sets(12)]
    found = find_passes_of_many(satellites, *WINDOW, above_deg)
    assert sum(len(passes_of(each)) for each in found) > 20
    for satellite, each in zip(satellites, found, strict=True):
        assert_same(passes_of(each), find_passes(satellite, *WINDOW, above_deg))


@pytest.mark.parametrize("place", VIEWS)
def test_high_and_eccentric_orbits_too(place: str) -> None:
    satellites = [Satellite(each, VIEWS[place]) for each in high_sets(12)]
    found = find_passes_of_many(satellites, *WINDOW, 4.7)
    for satellite, each in zip(satellites, found, strict=True):
        assert_same(passes_of(each), find_passes(satellite, *WINDOW, 4.7))


def test_a_pass_that_only_just_reaches_the_threshold_is_found() -> None:
    """The threshold is put just below each culmination: passes of seconds, and just above: none."""
    satellite = Satellite(low_sets(1)[0], VIEWS["north"])
    for each in find_passes(satellite, *WINDOW, 10.0):
        assert each.culmination_s is not None
        window = each.culmination_s - 900.0, each.culmination_s + 900.0
        just_below, just_above = (each.highest_elevation_deg + d for d in (-1e-4, 1e-4))
        (brief,) = passes_of(find_passes_of_many([satellite], *window, just_below)[0])
        assert brief.rise_s is not None
        assert brief.set_s is not None
        assert 0.0 < brief.set_s - brief.rise_s < 10.0
        for edge_s in (brief.rise_s, brief.set_s):
            assert satellite.look(edge_s).elevation_deg == pytest.approx(just_below, abs=1e-6)
        assert passes_of(find_passes_of_many([satellite], *window, just_above)[0]) == ()


def test_windows_may_begin_and_end_inside_a_pass() -> None:
    satellite = Satellite(low_sets(3)[2], VIEWS["north"])
    whole = find_passes(satellite, *WINDOW, 5.0)[1]
    assert whole.rise_s is not None
    assert whole.set_s is not None
    for shares in ((0.2, 0.8), (-0.5, 0.3), (0.7, 1.5), (0.4, 0.45)):
        from_s, until_s = (whole.rise_s + share * (whole.set_s - whole.rise_s) for share in shares)
        found = find_passes_of_many([satellite], from_s, until_s, 5.0)[0]
        assert_same(passes_of(found), find_passes(satellite, from_s, until_s, 5.0))


def test_a_satellite_that_has_decayed_does_not_spoil_the_others() -> None:
    sets = low_sets(5)
    mean = sets[2].mean
    assert mean is not None
    sets[2] = replace(sets[2], mean=mean._replace(bstar=0.9, mean_motion_rad_min=0.0705))
    satellites = [Satellite(each, VIEWS["north"]) for each in sets]
    told: list[int] = []
    found = find_passes_of_many(satellites, *WINDOW, 5.0, told.append)
    assert [isinstance(each, NoPosition) for each in found] == [False, False, True, False, False]
    assert told == [5]


def test_what_makes_no_sense_is_refused() -> None:
    sets: list[ElementSet] = low_sets(2)
    views = list(VIEWS.values())
    satellites = [Satellite(each, view) for each, view in zip(sets, views, strict=False)]
    with pytest.raises(SkyError, match="one and the same viewpoint"):
        find_passes_of_many(satellites, *WINDOW, 5.0)
    with pytest.raises(SkyError, match="expected a window"):
        find_passes_of_many(satellites[:1], WINDOW[1], WINDOW[0], 5.0)
    assert find_passes_of_many([], *WINDOW, 5.0) == ()


def test_roots_are_found_each_in_its_bracket() -> None:
    powers = np.array([1.0, 3.0, 5.0])
    found = roots(lambda which, x: x ** powers[which] - 0.3, np.zeros(3), np.full(3, 2.0), 1e-12)
    assert found == pytest.approx(0.3 ** (1.0 / powers), rel=1e-9)
    assert roots(lambda _, x: x, np.empty(0), np.empty(0), 1.0).size == 0


def test_elements_of_three_weeks_ago_lose_no_pass_either() -> None:
    """Drag has then moved satellites minutes ahead of what the mean orbit says."""
    window = EPOCH_S + 20.3 * DAY_S, EPOCH_S + 22.1 * DAY_S
    satellites = [Satellite(each, VIEWS["north"]) for each in low_sets(10, seed=23)]
    found = find_passes_of_many(satellites, *window, 4.7)
    for satellite, each in zip(satellites, found, strict=True):
        if not isinstance(each, NoPosition):
            assert_same(each, find_passes(satellite, *window, 4.7))
    assert sum(not isinstance(each, NoPosition) for each in found) > 5
