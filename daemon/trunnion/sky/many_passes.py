"""Passes of many satellites over many days, from one viewpoint."""

from collections.abc import Callable, Iterator, Sequence
from itertools import pairwise

import numpy as np

from trunnion.sky.candidates import LONGEST_MIN, MOST_ECCENTRIC
from trunnion.sky.elements import Satellite
from trunnion.sky.errors import NoPosition, SkyError
from trunnion.sky.high_passes import Profile, high_profile
from trunnion.sky.low_passes import Arcs, low_arcs
from trunnion.sky.passes import LONGEST_WINDOW_S, Pass

CHUNK = 200
"""Satellites at once: enough to share what each step costs, few enough for memory."""

MOST_SATELLITE_DAYS = 4000.0
"""Of a chunk; for long windows it holds fewer satellites."""

Found = tuple[Pass, ...] | NoPosition


def find_passes_of_many(
    satellites: Sequence[Satellite],
    from_s: float,
    until_s: float,
    above_deg: float,
    progress: Callable[[int], object] = lambda _: None,
) -> tuple[Found, ...]:
    """The passes of each satellite above an elevation, in the order of the satellites.

    In place of the passes of a satellite that has no position in the window (a decayed orbit)
    stands the NoPosition that says so. `progress` is told after each chunk how many satellites are
    done. Raises SkyError for satellites from several viewpoints, or a bad window.
    """
    if not 0.0 < until_s - from_s <= LONGEST_WINDOW_S:
        raise SkyError("expected a window of more than 0 and at most 366 days")
    if len({id(each.viewpoint) for each in satellites}) > 1:
        raise SkyError("expected satellites that are seen from one and the same viewpoint")
    size = max(1, min(CHUNK, int(MOST_SATELLITE_DAYS * 86400.0 / (until_s - from_s))))
    found: list[Found] = []
    for begin in range(0, len(satellites), size):
        found += _of_chunk(satellites[begin : begin + size], (from_s, until_s), above_deg)
        progress(len(found))
    return tuple(found)


def _of_chunk(
    satellites: Sequence[Satellite], window: tuple[float, float], above_deg: float
) -> list[Found]:
    """Together; one by one where one of them spoils it."""
    try:
        return list(_together(satellites, window, above_deg))
    except NoPosition as error:
        if len(satellites) == 1:
            return [error]
    halves = satellites[: len(satellites) // 2], satellites[len(satellites) // 2 :]
    return [found for half in halves for found in _of_chunk(half, window, above_deg)]


def _together(
    satellites: Sequence[Satellite], window: tuple[float, float], above_deg: float
) -> Iterator[tuple[Pass, ...]]:
    low = [each for each in satellites if is_low(each)]
    high = [each for each in satellites if not is_low(each)]
    view = satellites[0].viewpoint
    of_low = iter(_by_arcs(low_arcs(low, view, window, above_deg), low, window) if low else ())
    of_high = iter(
        _by_profile(high_profile(high, view, window, above_deg), high, window, above_deg)
        if high
        else ()
    )
    for each in satellites:
        yield next(of_low if is_low(each) else of_high)


def is_low(satellite: Satellite) -> bool:
    """Whether the orbit is low and round enough to tell its passes from its shape."""
    satrec = satellite.propagator.satrec
    return satellite.period_min < LONGEST_MIN and bool(satrec.ecco < MOST_ECCENTRIC)


def _by_arcs(
    arcs: Arcs, satellites: Sequence[Satellite], window: tuple[float, float]
) -> Iterator[tuple[Pass, ...]]:
    bounds = np.searchsorted(arcs.which, np.arange(len(satellites) + 1))
    instants = (arcs.rise_s.tolist(), arcs.culmination_s.tolist(), arcs.set_s.tolist())
    rows = list(zip(*instants, arcs.highest_deg.tolist(), strict=True))
    for satellite, (begin, end) in zip(satellites, pairwise(bounds.tolist()), strict=True):
        yield tuple(
            Pass(*each)
            if window[0] < each[0] and each[2] < window[1]
            else _cut(each, satellite, window)
            for each in rows[begin:end]
        )


def _cut(
    whole: tuple[float, float, float, float], satellite: Satellite, window: tuple[float, float]
) -> Pass:
    """The part of a pass that lies in the window."""
    rise_s, culmination_s, set_s, highest_deg = whole
    begin_s, end_s = window
    is_seen = begin_s < culmination_s < end_s
    if not is_seen:
        nearer_s = begin_s if culmination_s <= begin_s else end_s
        highest_deg = satellite.look(nearer_s).elevation_deg
    return Pass(
        rise_s if rise_s > begin_s else None,
        culmination_s if is_seen else None,
        set_s if set_s < end_s else None,
        highest_deg,
    )


def _by_profile(
    profile: Profile,
    satellites: Sequence[Satellite],
    window: tuple[float, float],
    above_deg: float,
) -> Iterator[tuple[Pass, ...]]:
    bounds = np.searchsorted(profile.which, np.arange(len(satellites) + 1))
    for begin, end in pairwise(bounds.tolist()):
        yield tuple(_from_profile(profile.part(slice(begin, end)), window, above_deg))


def _from_profile(
    profile: Profile, window: tuple[float, float], above_deg: float
) -> Iterator[Pass]:
    """The stretches between passages in which the elevation is above the threshold."""
    edges = [0, *np.flatnonzero(profile.is_passage).tolist(), len(profile.utc_s) - 1]
    for first, last in pairwise(edges):
        inside = slice(first, last + 1)
        place = first + int(np.argmax(profile.elevation_deg[inside]))
        if last <= first or not profile.elevation_deg[first + 1 : last].size:
            is_up = profile.elevation_deg[place] > above_deg
        else:
            is_up = bool(profile.elevation_deg[first + 1 : last].max() >= above_deg)
        if is_up:
            begin_s, end_s, top_s = (float(profile.utc_s[each]) for each in (first, last, place))
            yield Pass(
                begin_s if begin_s > window[0] else None,
                top_s if window[0] < top_s < window[1] else None,
                end_s if end_s < window[1] else None,
                float(profile.elevation_deg[place]),
            )
