"""The verification output of SGP4, regenerated through our own propagation.

Source: Vallado, Crawford, Hujsak, Kelso, "Revisiting Spacetrack Report #3", AIAA 2006-6753; its
test cases and their output come with the sgp4 package (`SGP4-VER.TLE`, `tcppver.out`).
"""

import re
from importlib.resources import files
from typing import NamedTuple

import pytest
from sgp4.api import Satrec

from trunnion.sky.elements import ElementSet, Propagator
from trunnion.sky.errors import NoPosition

TOLERANCE_KM = 2e-7
"""What the package's own test allows, for kilometres and kilometres per second."""

MINUTES_A_DAY = 1440.0
UNREADABLE = "33334"
"""Fails at its epoch; the published output repeats the case before it."""


class Case(NamedTuple):
    """One element set, the span of minutes it is tested over, and the published states."""

    element_set: ElementSet
    span_min: tuple[float, float, float]
    states: list[list[float]]


def _cases() -> list[Case]:
    text = (files("sgp4") / "SGP4-VER.TLE").read_text()
    lines = [line for line in text.splitlines() if line.strip() and not line.startswith("#")]
    output = (files("sgp4") / "tcppver.out").read_text()
    blocks = re.split(r"^\S+ xx\s*$", output, flags=re.MULTILINE)[1:]
    return [
        Case(_element_set(first, second), _span(second), _states(block))
        for first, second, block in zip(lines[::2], lines[1::2], blocks, strict=True)
    ]


def _element_set(first: str, second: str) -> ElementSet:
    number = first[2:7].strip()
    return ElementSet(number, int(number), 0.0, first[:69], second[:69])


def _span(second: str) -> tuple[float, float, float]:
    begin, end, step = map(float, second[69:].split())
    return begin, end, step


def _states(block: str) -> list[list[float]]:
    return [[float(each) for each in row.split()[:7]] for row in block.strip().splitlines()]


CASES = _cases()


def test_nothing_of_the_published_output_is_missing() -> None:
    assert len(CASES) == 33
    assert sum(len(case.states) for case in CASES) == 667


@pytest.mark.parametrize("case", CASES, ids=lambda case: case.element_set.name)
def test_every_published_state_is_regenerated(case: Case) -> None:
    if case.element_set.name == UNREADABLE:
        with pytest.raises(NoPosition):
            state(case, 0.0)
        return
    for minutes, *published in case.states:
        assert state(case, minutes) == pytest.approx(published, rel=0, abs=TOLERANCE_KM)


def test_the_published_failures_are_failures_by_their_code() -> None:
    """Decay (error 6) leaves numbers that look like any others: only the code tells."""
    failures = []
    for case in CASES:
        begin, end, step = case.span_min
        minutes = begin
        while minutes < end + step:
            try:
                state(case, min(minutes, end))
            except NoPosition as error:
                failures.append((case.element_set.name, min(minutes, end), str(error)))
                break
            minutes += step
    assert [(name, minutes) for name, minutes, _ in failures] == [
        ("22312", pytest.approx(494.2028672)),
        ("28350", 1560.0),
        ("28872", 55.0),
        ("29141", 440.0),
        ("33333", 25.0),
        ("33334", 0.0),
        ("20413", 1844345.0),
    ]


def state(case: Case, minutes: float) -> list[float]:
    """TEME state this many minutes after the epoch of the elements."""
    satrec = Satrec.twoline2rv(case.element_set.line_1, case.element_set.line_2)
    propagator = Propagator(case.element_set)
    position_km, velocity_km_s = propagator.at(
        satrec.jdsatepoch, satrec.jdsatepochF + minutes / MINUTES_A_DAY
    )
    return [*position_km, *velocity_km_s]
