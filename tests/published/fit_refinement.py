"""Makes daemon/trunnion/sky/refinement.csv anew: `python -m tests.published.fit_refinement`.

The remainder of ERFA's plan94 and moon98 against the JPL ephemeris DE421, at random instants of
1900 to 2050, is fitted by a line in time and by sines of multiples of the fundamental
arguments. Greedy: each next sine is the one that fits most of what is left (orthogonal matching
pursuit: Pati, Rezaiifar and Krishnaprasad 1993). Takes two minutes and 1.5 GiB. What it prints are
the largest remainders in arcseconds, before and after.
"""

import csv
from collections.abc import Iterator
from itertools import product
from pathlib import Path
from typing import NamedTuple

import numpy as np

from tests.published.reference_sky import EPHEMERIS
from trunnion.sky import refinement
from trunnion.sky.bodies import PLAN94, series_au
from trunnion.sky.look import FloatArray
from trunnion.sky.naming import Body
from trunnion.sky.refinement import ARCSEC, ARGUMENTS, DAYS_A_CENTURY, DIRECTIONS, axes
from trunnion.sky.spk import NAIF_CODES, SpkFile

FIRST_DAY, LAST_DAY = -36_500.0, 18_400.0
INSTANTS = 8_000
POWERS = (0, 1)
SINES = {"along": 24, "across": 8, "outward": 16}
MOON_SINES = {"along": 60, "across": 20, "outward": 0}
LONGEST_PERIOD_DAYS = 250 * 365.25
"""Slower ones are the line's: 150 years cannot tell them apart."""

Multiples = tuple[int, ...]


class Fit(NamedTuple):
    """Of one body in one direction: powers of time, then sines, with what they leave."""

    rows: list[tuple[int, Multiples, float, float]]
    remainder_rad: FloatArray


def remainder(body: Body, tt_days: FloatArray) -> FloatArray:
    """Ephemeris less series, along, across and outward, as parts of the distance, shape (3, n)."""
    ephemeris = SpkFile(str(EPHEMERIS))
    parts = []
    for day in tt_days.tolist():
        series = series_au(body, day)
        off_au = ephemeris_au(ephemeris, body, day) - series
        parts.append(axes(series) @ off_au / np.linalg.norm(series))
    return np.array(parts).T


def ephemeris_au(ephemeris: SpkFile, body: Body, tt_days: float) -> FloatArray:
    """From the Sun, the Moon from the Earth."""
    if body is Body.MOON:
        return ephemeris.geocentric_au(301, tt_days)
    planet = ephemeris.geocentric_au(ephemeris.code(NAIF_CODES[body]), tt_days)
    return planet - ephemeris.geocentric_au(10, tt_days)


def candidates(body: Body) -> Iterator[Multiples]:
    """Multiples of the arguments that may matter: two planets, or the Moon's with one planet."""
    if body is not Body.MOON:
        yield from planet_candidates(PLAN94[body] - 1)
        return
    for delaunay in product(range(-6, 7), range(-3, 4), range(5), range(-3, 4)):
        if any(delaunay):
            yield (*delaunay, *[0] * 8)
    for elongation, anomaly in product(range(-2, 3), range(-2, 3)):
        for planet, multiple, earths in product((0, 1, 3, 4, 5, 6, 7), range(1, 8), range(-4, 5)):
            planets = [0] * 8
            planets[planet], planets[2] = multiple, earths
            yield (elongation, 0, anomaly, 0, *planets)


def planet_candidates(own: int) -> Iterator[Multiples]:
    """Multiples of its own mean longitude and of that of another planet."""
    for other, of_own, of_other in product(range(1, 8), range(-9, 10), range(10)):
        if other != own and (of_other > 0 or of_own > 0):
            planets = [0] * 8
            planets[own], planets[other] = of_own, of_other
            yield (0, 0, 0, 0, *planets)


def arguments(tt_days: FloatArray) -> FloatArray:
    """The fundamental arguments (rad), shape (12, n)."""
    return np.array([argument(tt_days / DAYS_A_CENTURY) for argument in ARGUMENTS])


def fast_enough(multiples: FloatArray) -> FloatArray:
    """Those whose period is not too long."""
    a_day = np.diff(arguments(np.array([0.0, 1.0])), axis=1)[:, 0]
    rates = np.abs(multiples @ ((a_day + np.pi) % (2.0 * np.pi) - np.pi))
    return multiples[rates > 2.0 * np.pi / LONGEST_PERIOD_DAYS]


def fit(wanted_rad: FloatArray, tt_days: FloatArray, multiples: FloatArray, sines: int) -> Fit:
    """One direction of one body."""
    centuries, angles = tt_days / DAYS_A_CENTURY, arguments(tt_days)
    waves = np.exp(1j * (multiples @ angles)).astype(np.complex64) if sines else None
    columns = [centuries**power for power in POWERS]
    chosen: list[int] = []
    while True:
        matrix = np.array(columns).T
        weights = np.linalg.lstsq(matrix, wanted_rad, rcond=None)[0]
        left = wanted_rad - matrix @ weights
        if waves is None or len(chosen) == sines:
            break
        strength = np.abs(waves @ (left / ARCSEC).astype(np.float32))
        strength[chosen] = 0.0
        chosen.append(int(strength.argmax()))
        angle = multiples[chosen[-1]] @ angles
        columns += [np.cos(angle), np.sin(angle)]
    flat = [(power, (0,) * 12, weights[power], 0.0) for power in POWERS]
    pairs = weights[len(POWERS) :].reshape(-1, 2)
    waving = [
        (0, tuple(int(each) for each in multiples[index]), cos, sin)
        for index, (cos, sin) in zip(chosen, pairs.tolist(), strict=True)
    ]
    return Fit(flat + waving, left)


def fit_body(body: Body, instants: np.random.Generator) -> Iterator[tuple[object, ...]]:
    """The table's rows for one body, with a line printed for each direction."""
    tt_days = np.sort(instants.uniform(FIRST_DAY, LAST_DAY, INSTANTS))
    wanted = remainder(body, tt_days)
    multiples = fast_enough(np.array(sorted(set(candidates(body)))))
    for direction, wanted_rad in zip(DIRECTIONS, wanted, strict=True):
        sines = (MOON_SINES if body is Body.MOON else SINES)[direction]
        found = fit(wanted_rad, tt_days, multiples, sines)
        before, after = (np.abs(each).max() / ARCSEC for each in (wanted_rad, found.remainder_rad))
        print(f"{body.value:8} {direction:8} {before:6.2f}″ → {after:5.2f}″")
        for power, of_arguments, cos_rad, sin_rad in found.rows:
            weights = (f"{each / ARCSEC:.4f}" for each in (cos_rad, sin_rad))
            yield (body.value, direction, power, *of_arguments, *weights)


def main() -> None:
    """Fit all, write the table."""
    instants = np.random.default_rng(20_261)
    names = ("D", "l'", "l", "F", "Me", "Ve", "E", "Ma", "J", "Sa", "U", "N")
    target = Path(refinement.__file__).with_suffix(".csv")
    with target.open("w", encoding="ascii", newline="") as text:
        table = csv.writer(text, lineterminator="\n")
        table.writerow(("body", "direction", "power", *names, "cos_arcsec", "sin_arcsec"))
        for body in (Body.MOON, *PLAN94):
            table.writerows(fit_body(body, instants))


if __name__ == "__main__":
    main()
