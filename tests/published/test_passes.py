"""Passes against skyfield's own search for events.

skyfield brackets culminations on a grid and finds rise and set by secants; its events wander by a
few tenths of a second, so instants are compared to that. Of a pass with several maxima of the
elevation it tells each, where we tell the highest.
"""

from typing import Any

import pytest
from skyfield.api import EarthSatellite, load, wgs84

from tests.sky.stations import DAY_S, EARTH, EPOCH_S, NORTH, example_sets
from trunnion.sky.elements import Satellite
from trunnion.sky.instants import julian_date
from trunnion.sky.passes import Pass, find_passes
from trunnion.sky.refraction import NoRefraction
from trunnion.sky.site import Site
from trunnion.sky.viewpoint import Viewpoint

WANDER_S = 0.5
FLAT_WANDER_S = 1.0
"""Of a culmination near apogee, where the elevation hardly changes for minutes."""
ABOVE_DEG = 4.7
RISE, CULMINATION, SET = range(3)
SITES = {
    "north": NORTH,
    "south": Site(-33.871, 151.207, 61.9),
    "far north": Site(78.23, 15.41, 460.3),
}


def skyfield_events(
    name: str, site: Site, from_s: float, until_s: float
) -> list[tuple[float, int]]:
    """Instants (UTC, POSIX seconds) and kinds, by the same UT1 − UTC at the middle of the span."""
    elements = example_sets()[name]
    timescale = load.timescale(builtin=True)
    tt_minus_utc_s = EARTH.leap_seconds.at(from_s) + 32.184
    ut1_minus_utc_s, _, _ = EARTH.at(0.5 * (from_s + until_s))
    timescale.delta_t_function = lambda tt: tt_minus_utc_s - ut1_minus_utc_s + 0.0 * tt

    def instant(utc_s: float) -> Any:
        midnight, fraction = julian_date(utc_s)
        return timescale.tt_jd(midnight, fraction + tt_minus_utc_s / DAY_S)

    station = wgs84.latlon(site.latitude_deg, site.longitude_deg, elevation_m=site.height_m)
    craft = EarthSatellite(elements.line_1, elements.line_2, ts=timescale)
    times, kinds = craft.find_events(station, instant(from_s), instant(until_s), ABOVE_DEG)
    begin = instant(from_s)
    since_s = ((times.whole - begin.whole) + (times.tt_fraction - begin.tt_fraction)) * DAY_S
    return [(from_s + float(each), int(kind)) for each, kind in zip(since_s, kinds, strict=True)]


def our_events(passes: tuple[Pass, ...]) -> list[tuple[float, int]]:
    events = [
        (utc_s, kind)
        for each in passes
        for utc_s, kind in (
            (each.rise_s, RISE),
            (each.culmination_s, CULMINATION),
            (each.set_s, SET),
        )
        if utc_s is not None
    ]
    return sorted(events)


@pytest.mark.parametrize("site", SITES.values(), ids=SITES)
@pytest.mark.parametrize("name", ["QUILLON-1", "QUILLON-2", "BRINDLE-4", "OSPRELL"])
def test_three_days_of_passes(name: str, site: Site) -> None:
    from_s, until_s = EPOCH_S + 0.1 * DAY_S, EPOCH_S + 3.1 * DAY_S
    viewpoint = Viewpoint(site, EARTH, NoRefraction(), is_apparent=False)
    target = Satellite(example_sets()[name], viewpoint)
    ours = our_events(find_passes(target, from_s, until_s, ABOVE_DEG))
    theirs = skyfield_events(name, site, from_s, until_s)
    theirs_by_kind = [[utc_s for utc_s, each in theirs if each == kind] for kind in range(3)]
    ours_by_kind = [[utc_s for utc_s, each in ours if each == kind] for kind in range(3)]
    for kind in (RISE, SET):
        assert ours_by_kind[kind] == pytest.approx(theirs_by_kind[kind], abs=WANDER_S)
    for our_s in ours_by_kind[CULMINATION]:
        assert min(abs(our_s - each) for each in theirs_by_kind[CULMINATION]) < FLAT_WANDER_S
