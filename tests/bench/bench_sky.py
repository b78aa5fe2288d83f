"""What one look angle costs, against a bare call of SGP4 and against skyfield."""

import time
import warnings
from collections.abc import Callable
from datetime import UTC, datetime
from typing import Any

from sgp4.api import Satrec
from skyfield.api import EarthSatellite, Loader, load, wgs84
from skyfield_data import get_skyfield_data_path

from tests.bench.row import Row
from tests.sky.stations import EPOCH_S, NORTH, satellite
from trunnion.sky.atmosphere import standard_air
from trunnion.sky.elements import Satellite
from trunnion.sky.instants import julian_date
from trunnion.sky.refraction import TracedRefraction

FAST_CALLS = 300
SLOW_CALLS = 5
ROUNDS = 200
"""Short and many, so that some of them have the processor to themselves."""

STEP_S = 0.1
"""A control turn at 10 Hz."""


def rows() -> list[Row]:
    """One look with both rates, light time and refraction, of a low orbit."""
    air = TracedRefraction.radio(standard_air(NORTH.height_m), NORTH.height_m)
    target = satellite("QUILLON-1", refraction=air, is_apparent=True)
    ours_s, bare_s = _fastest_s(_our_looks(target), _bare_calls(target), FAST_CALLS, FAST_CALLS)
    looks = _our_looks(target)
    again_s, same_s = _fastest_s(looks, _skyfield_looks(target), FAST_CALLS, SLOW_CALLS)
    third_s, plain_s = _fastest_s(looks, _skyfield_plain_looks(target), FAST_CALLS, SLOW_CALLS)
    return [
        Row(
            "one look angle against one raw SGP4 call",
            _microseconds(ours_s),
            _microseconds(bare_s),
            ours_s / bare_s,
            4.5,
            is_at_least=False,
        ),
        Row(
            "one look angle, times faster than skyfield's apparent altaz with refraction",
            _microseconds(again_s),
            _microseconds(same_s),
            same_s / again_s,
            80.0,
            is_at_least=True,
        ),
        Row(
            "the same, times faster than skyfield's altaz without light time, air and rates",
            _microseconds(third_s),
            _microseconds(plain_s),
            plain_s / third_s,
            40.0,
            is_at_least=True,
        ),
    ]


def _fastest_s(
    ours: Callable[[int], None], theirs: Callable[[int], None], our_calls: int, their_calls: int
) -> tuple[float, float]:
    """Seconds a call of each, the best of rounds that take turns."""
    best_ours_s = best_theirs_s = float("inf")
    for _ in range(ROUNDS):
        best_ours_s = min(best_ours_s, _seconds_a_call(ours, our_calls))
        best_theirs_s = min(best_theirs_s, _seconds_a_call(theirs, their_calls))
    return best_ours_s, best_theirs_s


def _seconds_a_call(run: Callable[[int], None], calls: int) -> float:
    begin = time.perf_counter()
    run(calls)
    return (time.perf_counter() - begin) / calls


def _our_looks(target: Satellite) -> Callable[[int], None]:
    def run(calls: int) -> None:
        look = target.look
        for turn in range(calls):
            look(EPOCH_S + STEP_S * turn)

    return run


def _bare_calls(target: Satellite) -> Callable[[int], None]:
    elements = target.element_set
    satrec = Satrec.twoline2rv(elements.line_1, elements.line_2)
    midnight, fraction = julian_date(EPOCH_S)

    def run(calls: int) -> None:
        propagate, step = satrec.sgp4, STEP_S / 86_400.0
        for turn in range(calls):
            propagate(midnight, fraction + step * turn)

    return run


def _skyfield_looks(target: Satellite) -> Callable[[int], None]:
    """With light time and aberration, without bending by the planets; no rates."""
    with warnings.catch_warnings():
        warnings.simplefilter("ignore")  # of an expired table that is not used here
        earth = Loader(get_skyfield_data_path(), verbose=False)("de421.bsp")["earth"]
    timescale, craft, station = _in_skyfield(target)
    seen_from, seen = earth + station, earth + craft

    def run(calls: int) -> None:
        for turn in range(calls):
            instant = timescale.from_datetime(_moment(turn))
            seen_from.at(instant).observe(seen).apparent(deflectors=()).altaz(15.0, 1013.25)

    return run


def _skyfield_plain_looks(target: Satellite) -> Callable[[int], None]:
    timescale, craft, station = _in_skyfield(target)
    difference = craft - station

    def run(calls: int) -> None:
        for turn in range(calls):
            difference.at(timescale.from_datetime(_moment(turn))).altaz()

    return run


def _in_skyfield(target: Satellite) -> tuple[Any, Any, Any]:
    """Time scale, satellite and station."""
    elements, site = target.element_set, target.viewpoint.site
    timescale = load.timescale(builtin=True)
    station = wgs84.latlon(site.latitude_deg, site.longitude_deg, elevation_m=site.height_m)
    return timescale, EarthSatellite(elements.line_1, elements.line_2, ts=timescale), station


def _moment(turn: int) -> datetime:
    return datetime.fromtimestamp(EPOCH_S + STEP_S * turn, UTC)


def _microseconds(seconds: float) -> str:
    return f"{1e6 * seconds:.2f} µs"
