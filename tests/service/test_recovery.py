"""A mount found outside its limits, brought back with leave: gate, pilot, turn and simulator."""

from dataclasses import dataclass, field
from pathlib import Path

import pytest

from tests.service.stations import station_with
from trunnion.mount.joints import Joints
from trunnion.pilot.departure import Facts
from trunnion.pilot.phase import Phase, Wish
from trunnion.pilot.pilot import Pilot
from trunnion.safety.gate import Gate
from trunnion.safety.places import find_at
from trunnion.service.antenna import flown_mount_of, mount_of
from trunnion.service.clearance import clearance_of
from trunnion.service.clock import VirtualClock
from trunnion.service.drivers import build_simulator
from trunnion.service.limits import safety_limits_of
from trunnion.service.link.direct import DirectLink
from trunnion.service.recovery_leave import LONGEST_S, NothingToRecover, RecoveryLeave
from trunnion.service.surroundings import world_of
from trunnion.service.turn import ControlTurn, Orders, Turn

TICK_S = 0.1


@dataclass
class Rig:
    """The example station with its mount standing somewhere, told to follow its empty plan."""

    folder: Path
    start: Joints
    clock: VirtualClock = field(default_factory=lambda: VirtualClock(1_893_456_123.75, 41.5))

    def __post_init__(self) -> None:
        start = f"kind: simulator\n  start_deg: {list(self.start)}\n  #"
        station = station_with(self.folder, {"kind: simulator": start})
        clearance = clearance_of(station)
        self.limits = safety_limits_of(station, mount_of(station), clearance)
        self.link = DirectLink(build_simulator(station, self.clock), self.clock)
        pilot = Pilot(Facts(flown_mount_of(station), clearance, 0.3))
        self.control = ControlTurn(self.clock, self.link, pilot, Gate(self.limits), ())
        self.leave = RecoveryLeave(self.limits, self.clock, self.link.newest)

    def turns(self, count: int, wish: Wish = Wish.HOLD) -> list[Turn]:
        """So many control turns."""
        return [self._turn(wish) for _ in range(count)]

    def _turn(self, wish: Wish) -> Turn:
        self.clock.sleep(TICK_S)
        way_back = self.leave.way_back(self.link.newest())
        world = world_of(None, self.link.status, lateness_s=0.0)
        return self.control.run(Orders((), wish, way_back), lambda: world)

    def place(self) -> Joints:
        """Where the mount says it is."""
        reading = self.link.newest()
        assert reading is not None
        return reading.joints


@pytest.mark.parametrize(
    "start",
    [Joints(13.7, 2.3), Joints(270.6, 41.3), Joints(-270.8, 90.7), Joints(144.3, 22.9)],
    ids=["below the floor", "beyond the travel", "beyond both", "in the keep-out"],
)
def test_it_comes_back_slowly_and_rests_at_the_first_place_inside(
    tmp_path: Path, start: Joints
) -> None:
    rig = Rig(tmp_path, start)
    rig.turns(10)
    goal = rig.leave.grant()
    before = rig.place()
    fastest_deg_s = 0.0
    for turn in rig.turns(600):
        assert turn.verdict.latch is None
        now = turn.reading.joints if turn.reading else before
        moved_deg = max(abs(now[0] - before[0]), abs(now[1] - before[1]))
        fastest_deg_s, before = max(fastest_deg_s, moved_deg / TICK_S), now
    place = rig.place()
    assert find_at(place, rig.limits) is None
    assert place == pytest.approx(goal, abs=0.4)
    assert fastest_deg_s <= rig.limits.recovery_rate_deg_s + 0.05
    assert rig.turns(1)[0].decision.phase is Phase.HOLDING


def test_without_leave_it_does_not_move_and_says_why(tmp_path: Path) -> None:
    rig = Rig(tmp_path, Joints(13.7, 2.3))
    turns = rig.turns(50, Wish.STOW)
    assert rig.place() == pytest.approx((13.7, 2.3), abs=0.01)
    assert turns[-1].decision.trouble is not None


def test_leave_that_was_withdrawn_or_is_over_moves_nothing(tmp_path: Path) -> None:
    rig = Rig(tmp_path, Joints(13.7, 2.3))
    rig.turns(10)
    rig.leave.grant()
    rig.leave.withdraw()
    rig.turns(20)
    rig.leave.grant()
    rig.clock.sleep(LONGEST_S)
    rig.turns(20)
    assert rig.place() == pytest.approx((13.7, 2.3), abs=0.01)


def test_inside_there_is_nothing_to_give_leave_for(tmp_path: Path) -> None:
    rig = Rig(tmp_path, Joints(13.7, 42.3))
    with pytest.raises(NothingToRecover, match="inside"):
        rig.leave.grant()


def test_nor_where_nobody_knows_where_the_mount_is(tmp_path: Path) -> None:
    rig = Rig(tmp_path, Joints(13.7, 42.3))
    with pytest.raises(NothingToRecover, match="nobody knows"):
        RecoveryLeave(rig.limits, rig.clock, lambda: None).grant()
