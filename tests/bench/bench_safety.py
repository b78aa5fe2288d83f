"""What one judgement of the gate costs, against the time it is allowed."""

from statistics import median
from time import perf_counter_ns

from tests.bench.row import Row
from tests.safety.bench_mount import CALM, LIMITS
from trunnion.mount.joints import Joints, Motion, Reading
from trunnion.safety.gate import Gate
from trunnion.safety.verdict import Move

ALLOWED_US = 20.0
TURNS, WARM_UP = 6000, 500
DT_S = 0.1
BEGIN = Joints(201.7, 21.3)
RATES_DEG_S = (0.031, 0.017)


def rows() -> list[Row]:
    """The median judgement while a contact is followed, demand and reading new in every turn."""
    ours_us = _median_us()
    figure = "gate, one judgement, median"
    ratio = ours_us / ALLOWED_US
    return [Row(figure, f"{ours_us:.1f} µs", f"{ALLOWED_US:g} µs allowed", ratio, 1.0, False)]


def _median_us() -> float:
    gate, begin_s, taken_ns = Gate(LIMITS), 1234.7, []
    for turn in range(TURNS):
        mono_s = begin_s + turn * DT_S
        reading = Reading(mono_s - 0.031, *_place(turn - 0.31))
        demand = Motion(*_place(turn), *RATES_DEG_S)
        before_ns = perf_counter_ns()
        verdict = gate.judge(mono_s, demand, reading, CALM)
        taken_ns.append(perf_counter_ns() - before_ns)
        if turn and not isinstance(verdict.order, Move):
            raise ValueError(f"expected a contact that is let through, got {verdict}")
    return median(taken_ns[WARM_UP:]) / 1000.0


def _place(turn: float) -> Joints:
    return Joints(
        BEGIN.first_deg + turn * DT_S * RATES_DEG_S[0],
        BEGIN.second_deg + turn * DT_S * RATES_DEG_S[1],
    )
