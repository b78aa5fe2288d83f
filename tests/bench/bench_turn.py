"""What a whole control turn costs, and how fast a day is rehearsed."""

import time
from collections.abc import Iterator
from pathlib import Path
from tempfile import TemporaryDirectory

from tests.bench.row import Row
from tests.service.stations import write_plan, write_station
from trunnion.mount.joints import Reading
from trunnion.pilot.departure import Facts
from trunnion.pilot.phase import Wish
from trunnion.pilot.pilot import Pilot
from trunnion.safety.gate import Gate
from trunnion.safety.verdict import Halt, Move, Order
from trunnion.safety.world import World
from trunnion.service.antenna import beam_of, flown_mount_of, mount_of
from trunnion.service.briefing import Briefing, brief
from trunnion.service.briefing_order import BriefingOrder
from trunnion.service.clearance import clearance_of
from trunnion.service.clock import VirtualClock
from trunnion.service.limits import safety_limits_of
from trunnion.service.link.status import LinkStatus
from trunnion.service.rehearsal import rehearsal_of
from trunnion.service.turn import ControlTurn, Orders
from trunnion.sky.instants import format_utc, parse_utc
from trunnion.sky.look import Target

TURNS = 250
ROUNDS = 40
PASS = ("2026-12-01T00:36:54Z", "2026-12-01T00:49:18Z")
DAY_S = 86400.0


def rows() -> Iterator[Row]:
    """A turn that tracks a satellite, the mount excluded; and a day with fourteen contacts."""
    yield turn_row()
    yield rehearsal_row()


def turn_row() -> Row:
    """Target, pilot, gate and hand-over, against one look angle of the same target, in turn."""
    with TemporaryDirectory() as folder:
        station = write_station(Path(folder))
        plan = "{{target: BRINDLE-4, from: {}, until: {}}}".format(*PASS)
        write_plan(Path(folder), plan)
        briefing = brief(BriefingOrder(station, None, parse_utc(PASS[0]) - 60.0))
        bench = _Bench(briefing)
    turns_s, looks_s = [], []
    for _ in range(ROUNDS):
        turns_s.append(bench.turns(TURNS))
        looks_s.append(bench.looks(TURNS))
    ours_s, bare_s = min(turns_s) / TURNS, min(looks_s) / TURNS
    return Row(
        "a whole control turn, tracking, against one look angle",
        f"{1e6 * ours_s:.1f} µs",
        f"{1e6 * bare_s:.1f} µs",
        ours_s / bare_s,
        15.0,
        is_at_least=False,
    )


class _Bench:
    """The control turn in mid-pass on a link that answers at once with what it was told."""

    def __init__(self, briefing: Briefing) -> None:
        station = briefing.station
        mount, clearance = mount_of(station), clearance_of(station)
        (self._assignment,) = briefing.assignments
        self._clock = VirtualClock(self._assignment.begin_s + 97.3)
        self._link = _EchoLink(self._clock, self._assignment.path.at(self._clock.utc_s()).joints)
        pilot = Pilot(Facts(flown_mount_of(station), clearance, beam_of(station).tolerance_deg))
        gate = Gate(safety_limits_of(station, mount, clearance))
        self._control = ControlTurn(self._clock, self._link, pilot, gate, ())
        self._orders = Orders(briefing.assignments, Wish.FOLLOW_PLAN)
        self._world = World(emergency=None, is_link_up=True, lateness_s=0.0)

    def turns(self, number: int) -> float:
        """Seconds for so many turns, a tenth of a second apart in virtual time."""
        orders, control, clock = self._orders, self._control, self._clock
        begin_s = time.perf_counter()
        for _ in range(number):
            control.run(orders, self._look_around)
            clock.sleep(0.01)
        return time.perf_counter() - begin_s

    def looks(self, number: int) -> float:
        """Seconds for so many look angles of the same target."""
        target: Target = self._assignment.target
        utc_s = self._clock.utc_s()
        begin_s = time.perf_counter()
        for step in range(number):
            target.look(utc_s + 0.01 * step)
        return time.perf_counter() - begin_s

    def _look_around(self) -> World:
        return self._world


class _EchoLink:
    """Reads what was ordered last."""

    def __init__(self, clock: VirtualClock, place: tuple[float, float]) -> None:
        self._clock = clock
        self._place = place

    @property
    def status(self) -> LinkStatus:
        return LinkStatus()

    def newest(self) -> Reading:
        return Reading(self._clock.monotonic_s(), *self._place)

    def submit(self, order: Order) -> None:
        if isinstance(order, Move):
            self._place = order.motion.joints

    def emergency_halt(self) -> None:
        self.submit(Halt())

    def cut_power(self) -> None:
        pass

    def release(self) -> None:
        pass

    def close(self) -> None:
        pass


def rehearsal_row() -> Row:
    """Fourteen contacts of ten minutes over a day, at 10 Hz while the mount moves."""
    with TemporaryDirectory() as folder:
        station = write_station(Path(folder))
        first_s = parse_utc("2026-12-01T00:30:00Z")
        begins = [first_s + index * DAY_S / 14.0 for index in range(14)]
        contacts = [
            f"{{id: c{index}, target: 'fixed:{20 + 11 * index},{31 + 3 * index}', "
            f"from: {format_utc(begin_s)}, until: {format_utc(begin_s + 600.0)}}}"
            for index, begin_s in enumerate(begins)
        ]
        write_plan(Path(folder), *contacts)
        begin_s = time.perf_counter()
        _, rehearsal = rehearsal_of(station, None)
        for turn in rehearsal.turns():
            end_s = turn.utc_s
        took_s = time.perf_counter() - begin_s
    flown_s = end_s - rehearsal.begin_s
    return Row(
        "rehearsal of a day with 14 contacts, times real time",
        f"{took_s:.1f} s",
        f"{flown_s:.0f} s",
        flown_s / took_s,
        2000.0,
        is_at_least=True,
    )
