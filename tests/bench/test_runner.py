"""The benchmark's own bookkeeping; `python -m tests.bench` measures the figures themselves."""

import math

import pytest

from tests.bench.__main__ import cells, measured, modules
from tests.bench.row import Row


@pytest.mark.parametrize(
    ("ratio", "is_at_least", "holds"),
    [(1.4, False, True), (1.6, False, False), (1.4, True, False), (1.6, True, True)],
)
def test_a_limit_is_held_from_its_own_side(ratio: float, is_at_least: bool, holds: bool) -> None:
    row = Row("lateness", "3 ms", "2 ms", ratio, 1.5, is_at_least)
    assert row.holds is holds
    assert cells(row)[-1] == ("met" if holds else "MISSED")


def test_words_choose_modules() -> None:
    assert "bench_service" in modules([])
    assert modules(["service_run"]) == ["bench_service_run"]
    assert modules(["no such"]) == []


def test_what_takes_half_an_hour_runs_by_its_own_word_alone() -> None:
    assert "bench_drivers_long" not in {*modules([]), *modules(["drivers"])}
    assert modules(["drivers_long"]) == ["bench_drivers_long"]


def test_a_module_that_fails_is_a_figure_missed() -> None:
    (row,) = measured("bench_that_is_not_there")
    assert not row.holds
    assert math.isnan(row.ratio)
    assert "ModuleNotFoundError" in row.figure
