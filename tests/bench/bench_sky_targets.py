"""What one look at each kind of target costs, against the raw call below it."""

import time
from collections.abc import Callable
from pathlib import Path

import erfa

from tests.bench.row import Row
from tests.files.oem_text import kvn
from tests.sky.stations import EARTH, EPOCH_S, NORTH
from trunnion.files.oem import read_oem
from trunnion.sky.atmosphere import standard_air
from trunnion.sky.bodies import SeriesBody
from trunnion.sky.celestial import Celestial
from trunnion.sky.direction import IcrsDirection
from trunnion.sky.ephemeris import EphemerisCraft
from trunnion.sky.instants import parse_utc
from trunnion.sky.naming import Body
from trunnion.sky.place import J2000_JD
from trunnion.sky.refraction import TracedRefraction
from trunnion.sky.viewpoint import Viewpoint

CALLS, ROUNDS, LIMIT = 400, 60, 4.5
STEP_S = 0.1
AIR = TracedRefraction.radio(standard_air(NORTH.height_m), NORTH.height_m)
VIEW = Viewpoint(NORTH, EARTH, AIR, is_apparent=True)
OEM_S = parse_utc("2026-03-01T12:01:00Z")


def rows() -> list[Row]:
    """Each with rates, light time, aberration and refraction."""
    craft = EphemerisCraft(read_oem(Path("bench.oem"), kvn()), VIEW)
    star = Celestial(IcrsDirection(83.633, 22.014), VIEW)
    sun, moon = (Celestial(SeriesBody(body), VIEW) for body in (Body.SUN, Body.MOON))
    return [
        _row("the Sun against ERFA's epv00", sun.look, EPOCH_S, _epv00),
        _row("the Moon against ERFA's moon98", moon.look, EPOCH_S, _moon98),
        _row("a star against ERFA's epv00", star.look, EPOCH_S, _epv00),
        _row("an ephemeris against its polynomial alone", craft.look, OEM_S, _curve(craft)),
    ]


def _row(
    figure: str, look: Callable[[float], object], from_s: float, bare: Callable[[float], object]
) -> Row:
    ours_s = bare_s = float("inf")
    for _ in range(ROUNDS):
        ours_s = min(ours_s, _seconds_a_call(look, from_s))
        bare_s = min(bare_s, _seconds_a_call(bare, from_s))
    times = f"{1e6 * ours_s:.2f} µs", f"{1e6 * bare_s:.2f} µs"
    return Row(f"one look at {figure}", *times, ours_s / bare_s, LIMIT, is_at_least=False)


def _seconds_a_call(run: Callable[[float], object], from_s: float) -> float:
    begin = time.perf_counter()
    for call in range(CALLS):
        run(from_s + STEP_S * call)
    return (time.perf_counter() - begin) / CALLS


def _epv00(utc_s: float) -> object:
    return erfa.epv00(J2000_JD, utc_s / 86400.0 - 10957.5)


def _moon98(utc_s: float) -> object:
    return erfa.moon98(J2000_JD, utc_s / 86400.0 - 10957.5)


def _curve(craft: EphemerisCraft) -> Callable[[float], object]:
    """The polynomial alone."""
    (segment,) = craft.ephemeris.segments
    return lambda utc_s: segment.curve.at(utc_s - OEM_S + 60.0)
