"""One control turn: read, decide, judge, hand over, tell."""

from collections.abc import Sequence
from dataclasses import dataclass, field

import pytest

from tests.mount.mounts import MOUNT
from tests.pilot.flight import CLEARANCE, START_UTC_S
from tests.service.turns import ASSIGNMENT
from trunnion.mount.joints import Reading
from trunnion.pilot.departure import Facts
from trunnion.pilot.phase import Phase, Wish
from trunnion.pilot.pilot import Pilot
from trunnion.safety.emergency import EmergencyStop
from trunnion.safety.gate import Gate
from trunnion.safety.limits import SafetyLimits
from trunnion.safety.verdict import Halt, Move, Order
from trunnion.safety.world import World
from trunnion.service.clock import VirtualClock
from trunnion.service.link.status import LinkStatus
from trunnion.service.turn import ControlTurn, Orders, Turn
from trunnion.track.path import Assignment

CALM = World(emergency=None, is_link_up=True, lateness_s=0.0, wind_gust_m_s=3.1)
STOPPED = CALM._replace(emergency=EmergencyStop("button", START_UTC_S))
PLAN = Orders((ASSIGNMENT,), Wish.FOLLOW_PLAN)


@dataclass
class Rig:
    """A control turn on a link that stands still and keeps what it was ordered."""

    clock: VirtualClock = field(default_factory=lambda: VirtualClock(START_UTC_S + 20.0))
    orders: list[Order] = field(default_factory=list)
    told: list[Turn] = field(default_factory=list)
    status: LinkStatus = field(default_factory=LinkStatus)

    def __post_init__(self) -> None:
        limits = SafetyLimits(MOUNT, CLEARANCE, transmit_floor_deg=10.3, wind_stow_gust_m_s=19.3)
        pilot = Pilot(Facts(MOUNT, CLEARANCE, tolerance_deg=0.23))
        self.control = ControlTurn(self.clock, self, pilot, Gate(limits), (self, self))

    def newest(self) -> Reading:
        return Reading(self.clock.monotonic_s(), 167.6, 44.8)

    def submit(self, order: Order) -> None:
        self.orders.append(order)

    def emergency_halt(self) -> None:
        self.orders.append(Halt())

    def cut_power(self) -> None:
        pass

    def release(self) -> None:
        pass

    def close(self) -> None:
        pass

    def note(self, turn: Turn) -> None:
        self.told.append(turn)

    def settle(self) -> None:
        """Let the gate see for a moment that the mount stands still."""
        for _ in range(3):
            self.run(Orders((), Wish.HOLD))
        self.orders.clear()
        self.told.clear()

    def run(self, orders: Orders = PLAN, world: World = CALM) -> Turn:
        self.clock.sleep(0.1)
        return self.control.run(orders, lambda: world)


def test_what_the_gate_says_is_what_the_link_gets_and_everybody_is_told() -> None:
    rig = Rig()
    rig.settle()
    turns = [rig.run() for _ in range(3)]
    assert rig.orders == [turn.verdict.order for turn in turns]
    assert rig.told == [each for turn in turns for each in (turn, turn)]
    assert all(isinstance(order, Move) for order in rig.orders)


def test_a_turn_moves_on_from_what_really_left() -> None:
    rig = Rig()
    rig.settle()
    for _ in range(4):
        rig.run()
    rates = [o.motion.first_rate_deg_s for o in rig.orders if isinstance(o, Move)]
    assert len(rates) == 4
    assert abs(rates[-1]) > abs(rates[1])
    rig.run(world=CALM._replace(lateness_s=9.0))
    assert rig.orders[-1] == Halt()
    rig.settle()
    after = rig.run().verdict.order
    assert isinstance(after, Move)
    assert abs(after.motion.first_rate_deg_s) < abs(rates[-1])


def test_without_a_plan_the_mount_holds_still() -> None:
    rig = Rig()
    turn = rig.run(Orders(None, Wish.FOLLOW_PLAN))
    assert (turn.decision.phase, turn.verdict.order) == (Phase.HOLDING, Halt())


@pytest.mark.parametrize("assignments", [None, PLAN.assignments])
def test_after_a_reset_no_wind_starts_the_mount(
    assignments: Sequence[Assignment] | None,
) -> None:
    windy = CALM._replace(wind_gust_m_s=23.7)
    held, standing = Rig(), Rig()
    for _ in range(9):
        moving = held.run(Orders(assignments, Wish.HOLD), windy)
        resting = standing.run(Orders(assignments, Wish.STAND), windy)
    assert moving.verdict.wants_stow
    assert isinstance(moving.verdict.order, Move)
    assert resting.verdict.wants_stow
    assert set(standing.orders) == {Halt()}


def test_stopped_nothing_but_a_halt_leaves() -> None:
    rig = Rig()
    rig.run()
    turn = rig.run(world=STOPPED)
    assert (turn.decision.phase, turn.verdict.order) == (Phase.HALTED, Halt())
