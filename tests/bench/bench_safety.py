"""What one judgement of the gate costs."""

from statistics import median
from time import perf_counter

from tests.bench.row import Row
from trunnion.mount.clearance import Clearance, Sector
from trunnion.mount.hinges import Hinges
from trunnion.mount.horizon import HorizonMask
from trunnion.mount.joints import Joints, Motion, Reading
from trunnion.mount.mount import JointLimits, Mount
from trunnion.safety.gate import Gate
from trunnion.safety.limits import SafetyLimits
from trunnion.safety.verdict import Move
from trunnion.safety.world import World

MOST_US = 20.0
TURNS = 20_000
TURN_S = 0.1

LIMITS = SafetyLimits(
    Mount(
        Hinges.azimuth_elevation(),
        JointLimits(-271.0, 268.0, 6.3, 2.9),
        JointLimits(1.5, 91.0, 4.7, 2.1),
        Joints(12.7, 88.3),
    ),
    Clearance(
        5.3,
        HorizonMask(((17.3, 4.1), (93.1, 11.7), (93.1, 2.3), (271.9, 8.9))),
        (Sector("the mast", 141.3, 146.9, 1.1, 27.9),),
    ),
    transmit_floor_deg=10.7,
)


def rows() -> list[Row]:
    """Tracking low, where mask and keep-outs have to be looked at in every turn."""
    cost_us = 1e6 * median(_judgements_s())
    return [
        Row("gate, one judgement", f"{cost_us:.1f} µs", "1 µs", cost_us, MOST_US, is_at_least=False)
    ]


def _judgements_s() -> list[float]:
    gate, costs_s = Gate(LIMITS), []
    for turn in range(TURNS):
        mono_s = 1000.0 + TURN_S * turn
        first_deg = 150.0 + 0.002 * turn
        reading = Reading(mono_s - 0.03, first_deg - 0.0006, 13.9)
        world = World(None, is_link_up=True, lateness_s=0.001, utc_s=1.8e9 + mono_s)
        demand = Motion(first_deg, 13.9, 0.02, 0.0) if turn > 5 else None
        begin_s = perf_counter()
        verdict = gate.judge(mono_s, demand, reading, world)
        costs_s.append(perf_counter() - begin_s)
    if not isinstance(verdict.order, Move):
        raise TypeError(f"expected the gate to let the demands through, got {verdict}")
    return costs_s
