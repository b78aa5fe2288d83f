"""The mount on trial, and who stands beside it."""

from dataclasses import dataclass

from trunnion_drivers.commission.mover import Mover
from trunnion_drivers.commission.operator import Operator
from trunnion_drivers.interface.driver import Driver
from trunnion_drivers.interface.values import Clock, JointFacts, MountFacts

JOINT_NAMES = ("first", "second")


@dataclass(frozen=True, slots=True)
class Bay:
    """Everything a step needs; `floor_deg` is as low as the second joint may go."""

    driver: Driver
    facts: MountFacts
    clock: Clock
    operator: Operator
    mover: Mover
    floor_deg: float

    def joint(self, number: int) -> JointFacts:
        """What the station file says of this joint (0 or 1)."""
        return (self.facts.first, self.facts.second)[number]

    def room_deg(self, number: int, at_deg: float, wanted_deg: float) -> float:
        """Up to this far in the positive sense if there is room, else in the other."""
        joint = self.joint(number)
        lowest = max(joint.lower_deg, self.floor_deg) if number else joint.lower_deg
        upward, downward = joint.upper_deg - at_deg, at_deg - lowest
        if upward >= min(wanted_deg, downward):
            return min(wanted_deg, upward)
        return -min(wanted_deg, downward)
