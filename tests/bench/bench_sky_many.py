"""What planning costs: arrays of instants, and the passes of many satellites over many days."""

import time
import tracemalloc
from collections.abc import Callable, Sequence
from functools import partial

import numpy as np
from sgp4.api import Satrec
from skyfield.api import EarthSatellite, load, wgs84

from tests.bench.row import Row
from tests.sky.fleets import high_sets, low_sets
from tests.sky.stations import DAY_S, EARTH, EPOCH_S, NORTH, satellite
from trunnion.sky.elements import ElementSet, Propagator, Satellite
from trunnion.sky.instants import UNIX_EPOCH_JD
from trunnion.sky.look import FloatArray
from trunnion.sky.many_passes import find_passes_of_many
from trunnion.sky.refraction import NoRefraction
from trunnion.sky.viewpoint import Viewpoint

ABOVE_DEG = 5.0
WINDOW = EPOCH_S + 0.25 * DAY_S, EPOCH_S + 7.25 * DAY_S
DAYS = 7.0
LOW, HIGH = 180, 20
VIEW = Viewpoint(NORTH, EARTH, NoRefraction(), is_apparent=False)


def rows() -> list[Row]:
    """Arrays and searches."""
    low, high = _seen(low_sets(LOW)), _seen(high_sets(HIGH))
    return [_array_row(), *_search_rows(low, high), *_evaluation_rows(low), *_many_rows()]


def _seen(sets: Sequence[ElementSet]) -> list[Satellite]:
    return [Satellite(each, VIEW) for each in sets]


def _array_row() -> Row:
    target = satellite("QUILLON-1")
    utc_s = EPOCH_S + np.arange(86_400.0)
    days = np.floor(utc_s / DAY_S)
    satrec = Satrec.twoline2rv(target.element_set.line_1, target.element_set.line_2)
    moments = UNIX_EPOCH_JD + days, utc_s / DAY_S - days
    ours_s, bare_s = _fastest_s(
        lambda: target.looks(utc_s), lambda: satrec.sgp4_array(*moments), rounds=9
    )
    return Row(
        "86 400 instants of one satellite against sgp4_array alone",
        _milliseconds(ours_s),
        _milliseconds(bare_s),
        ours_s / bare_s,
        1.35,
        is_at_least=False,
    )


def _search_rows(low: list[Satellite], high: list[Satellite]) -> list[Row]:
    found = []
    for figure, satellites, limit in (
        ("passes of 200 satellites in 7 days, times faster than skyfield", low + high, 35.0),
        ("the same of the low orbits alone", low, 70.0),
    ):
        ours_s = min(_seconds(partial(_search, satellites)) for _ in range(7))
        theirs_s = min(_seconds(partial(_skyfield, satellites)) for _ in range(2))
        times = _milliseconds(ours_s), _milliseconds(theirs_s)
        found.append(Row(figure, *times, theirs_s / ours_s, limit, is_at_least=True))
    return found


class _Counting(Propagator):
    """Counts what SGP4 is asked."""

    def __init__(self, element_set: ElementSet) -> None:
        super().__init__(element_set)
        self.asked = 0

    def at_many(
        self, jd_midnight: FloatArray, fraction: FloatArray
    ) -> tuple[FloatArray, FloatArray]:
        self.asked += len(fraction)
        return super().at_many(jd_midnight, fraction)


def _evaluation_rows(low: list[Satellite]) -> list[Row]:
    """How often SGP4 is asked, and what as many bare evaluations cost."""
    counters = [_Counting(each.element_set) for each in low]
    for each, counter in zip(low, counters, strict=True):
        object.__setattr__(each, "_propagator", counter)
    _search(low)
    a_day = sum(each.asked for each in counters) / len(low) / DAYS
    utc_s = np.linspace(*WINDOW, round(a_day * DAYS))
    days = np.floor(utc_s / DAY_S)
    moments = UNIX_EPOCH_JD + days, utc_s / DAY_S - days
    records = [each.satrec for each in counters]
    ours_s, bare_s = _fastest_s(
        lambda: _search(low), lambda: [each.sgp4_array(*moments) for each in records], rounds=15
    )
    return [
        Row(
            "SGP4 evaluations a satellite-day, low orbits",
            f"{a_day:.1f}",
            "40",
            a_day,
            40.0,
            is_at_least=False,
        ),
        Row(
            "passes of low orbits against as many bare evaluations",
            _milliseconds(ours_s),
            _milliseconds(bare_s),
            ours_s / bare_s,
            3.0,
            is_at_least=False,
        ),
    ]


def _many_rows() -> list[Row]:
    some, many = _seen(low_sets(1_000)), _seen(low_sets(5_000))
    some_s = _seconds(lambda: _search(some))
    many_s = _seconds(lambda: _search(many))
    tracemalloc.start()
    _search(many[:1_000])
    _, peak = tracemalloc.get_traced_memory()
    tracemalloc.stop()
    return [
        Row(
            "5 000 satellites, 7 days, one site: seconds",
            f"{many_s:.2f} s",
            "5 s",
            many_s,
            5.0,
            is_at_least=False,
        ),
        Row(
            "the same against 5 times 1 000 of them",
            f"{many_s:.2f} s",
            f"{5.0 * some_s:.2f} s",
            many_s / (5.0 * some_s),
            1.3,
            is_at_least=False,
        ),
        Row(
            "memory of the search for 1 000 of them, MiB",
            f"{peak / 2**20:.0f} MiB",
            "300 MiB",
            peak / 2**20,
            300.0,
            is_at_least=False,
        ),
    ]


def _search(satellites: Sequence[Satellite]) -> object:
    return find_passes_of_many(satellites, *WINDOW, ABOVE_DEG)


def _skyfield(satellites: Sequence[Satellite]) -> None:
    timescale = load.timescale(builtin=True)
    begin, end = (timescale.utc(1970, 1, 1, 0, 0, each) for each in WINDOW)
    station = wgs84.latlon(NORTH.latitude_deg, NORTH.longitude_deg, elevation_m=NORTH.height_m)
    for each in satellites:
        craft = EarthSatellite.from_satrec(each.propagator.satrec, timescale)
        craft.find_events(station, begin, end, ABOVE_DEG)


def _fastest_s(
    ours: Callable[[], object], theirs: Callable[[], object], rounds: int
) -> tuple[float, float]:
    """Seconds of each, the best of rounds that take turns."""
    best = [float("inf"), float("inf")]
    for _ in range(rounds):
        best = [min(best[0], _seconds(ours)), min(best[1], _seconds(theirs))]
    return best[0], best[1]


def _seconds(run: Callable[[], object]) -> float:
    begin = time.perf_counter()
    run()
    return time.perf_counter() - begin


def _milliseconds(seconds: float) -> str:
    return f"{1e3 * seconds:.1f} ms"
