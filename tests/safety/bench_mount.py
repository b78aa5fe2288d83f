"""A station for the gate's tests, and a mount that obeys it exactly."""

from dataclasses import dataclass, field
from typing import Self

from tests.mount.mounts import MOUNT
from trunnion.mount.clearance import Clearance, Sector
from trunnion.mount.horizon import HorizonMask
from trunnion.mount.joints import Joints, Motion, Reading
from trunnion.safety.gate import Gate
from trunnion.safety.limits import SafetyLimits
from trunnion.safety.verdict import Move, Rule, Verdict
from trunnion.safety.world import World

MASK = HorizonMask(((17.3, 4.1), (93.1, 11.7), (93.1, 2.3), (271.9, 8.9)))
MAST = Sector("the mast", 141.3, 146.9, 1.1, 27.9)
LIMITS = SafetyLimits(MOUNT, Clearance(5.3, MASK, (MAST,)), transmit_floor_deg=10.7)
CALM = World(emergency=None, is_link_up=True, lateness_s=0.013)


@dataclass
class Bench:
    """A gate and a mount that does what leaves it, turn by turn."""

    place: Joints = field(default_factory=lambda: Joints(201.7, 41.3))
    gate: Gate = field(default_factory=lambda: Gate(LIMITS))
    mono_s: float = 1234.7

    def settle(self) -> Self:
        """Let the gate see for a moment that the mount stands still."""
        for _ in range(4):
            self.turn(None)
        return self

    def turn(
        self, demand: Motion | None, world: World = CALM, dt_s: float = 0.1, age_s: float = 0.031
    ) -> Verdict:
        """One turn with a fresh reading of where the mount is."""
        self.mono_s += dt_s
        reading = Reading(self.mono_s - age_s, *self.place)
        verdict = self.gate.judge(self.mono_s, demand, reading, world)
        if isinstance(verdict.order, Move):
            self.place = verdict.order.motion.joints
        return verdict


def rules(verdict: Verdict) -> set[Rule]:
    """The rules that acted."""
    return {each.rule for each in verdict.interventions}
