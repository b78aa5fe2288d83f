"""A scenario flown in virtual time: what truly happened, instant by instant."""

from collections.abc import Callable, Iterator, Mapping, Sequence
from math import nan
from pathlib import Path
from tempfile import TemporaryDirectory
from typing import NamedTuple

from trunnion.mount.joints import Joints, Motion
from trunnion.pilot.phase import Wish
from trunnion.safety.gate import Gate
from trunnion.safety.limits import SafetyLimits
from trunnion.service.clock import VirtualClock
from trunnion.service.torture.contact import Arc
from trunnion.service.torture.disk import TroubledLatch
from trunnion.service.torture.mishap import Mishap, MishapKind
from trunnion.service.torture.process import TICK_S, Process, Weather
from trunnion.service.torture.records import TroubledBook, cannot_open
from trunnion.service.torture.scenario import START_UTC_S, Scenario
from trunnion.service.torture.steel import Steel
from trunnion.track.path import Assignment

TRANSMIT_FLOOR_DEG = 10.0
WIND_LIMIT_M_S = 17.0

GateOf = Callable[[SafetyLimits], Gate]


class Instant(NamedTuple):
    """What was true, and what the operator was told, in the middle between two turns."""

    since_s: float
    utc_s: float
    true: Motion
    stopped: str | None
    wish: Wish
    may_transmit: bool
    is_alive: bool
    interventions: tuple[str, ...]
    records_trouble: str | None = None


class Flight:
    """Flies one scenario; the same scenario and gate give the same instants, bit for bit."""

    def __init__(self, scenario: Scenario, gate_of: GateOf = Gate) -> None:
        self._scenario = scenario
        self._gate_of = gate_of
        self._clock = VirtualClock(START_UTC_S, monotonic_s=1000.0)
        self._start_s = self._clock.monotonic_s()
        self._steel = Steel(scenario, self._clock)
        self._limits = SafetyLimits(
            scenario.mount,
            scenario.clearance,
            TRANSMIT_FLOOR_DEG,
            clock_max_error_s=0.3,
            wind_stow_gust_m_s=WIND_LIMIT_M_S,
            heartbeat_max_age_s=5.0,
            sun_keep_out_deg=scenario.sun.keep_out_deg if scenario.sun else None,
        )
        self.records_defect: str | None = None
        self._todo = [each for each in scenario.mishaps if each.kind in _AT_ONCE]
        self._assignments: Sequence[Assignment] | None = _assignments(scenario.contacts)

    def instants(self) -> Iterator[Instant]:
        """Every instant, in order."""
        with TemporaryDirectory(prefix="trunnion-") as folder:
            self._latch = TroubledLatch(Path(folder) / "latch")
            self._wish_file = Path(folder) / "wish"
            self._records_file = Path(folder) / "records"
            process = self._start()
            while self._since_s() < self._scenario.end_s:
                process = self._suffer(process)
                turn, permit = process.beat(self._assignments, self._weather())
                self._book.turn_over(is_full=self._is_on(MishapKind.DISK_FULL))
                self._clock.sleep(0.5 * TICK_S)
                stop = process.desk.latched
                yield Instant(
                    self._since_s(),
                    self._clock.utc_s(),
                    self._steel.true_motion(),
                    stop.cause if stop else None,
                    process.wish.wish,
                    permit.is_good_at(self._clock.monotonic_s()),
                    is_alive=True,
                    interventions=tuple(each.sentence for each in turn.verdict.interventions),
                    records_trouble=self._book.trouble,
                )
            process.die(is_torn=False)
            self.records_defect = cannot_open(self._records_file)

    def _start(self) -> Process:
        gate, limits, clock = self._gate_of(self._limits), self._limits, self._clock
        self._book = book = TroubledBook(self._records_file, clock)
        return Process(gate, limits, self._steel, clock, self._latch, self._wish_file, book)

    def _since_s(self) -> float:
        return self._clock.monotonic_s() - self._start_s

    def _is_on(self, kind: MishapKind) -> bool:
        since_s = self._since_s()
        return any(each.kind is kind and each.is_on(since_s) for each in self._scenario.mishaps)

    def _weather(self) -> Weather:
        wind_m_s = WIND_LIMIT_M_S + 4.0 if self._is_on(MishapKind.WIND) else 3.7
        return Weather(
            None if self._is_on(MishapKind.WIND_UNKNOWN) else wind_m_s,
            None if self._is_on(MishapKind.HEARTBEAT_LOST) else 0.4,
            None if self._is_on(MishapKind.CLOCK_UNTRUSTED) else 0.02,
            self._sun(),
        )

    def _sun(self) -> tuple[float, float] | None:
        sun = self._scenario.sun
        if sun is None or self._is_on(MishapKind.SUN_UNKNOWN):
            return None
        return sun.azimuth_deg, sun.elevation_deg

    def _suffer(self, process: Process) -> Process:
        """Let happen what is due; the process may be another one afterwards."""
        self._latch.is_full = self._is_on(MishapKind.DISK_FULL)
        while self._todo and self._todo[0].at_s <= self._since_s():
            process = self._let_happen(self._todo.pop(0), process)
        return process

    def _let_happen(self, mishap: Mishap, process: Process) -> Process:
        kind = mishap.kind
        if kind in _BUTTONS:
            process.press(_BUTTONS[kind])
        elif kind is MishapKind.CLOCK_STEP:
            self._clock.step_utc(mishap.amount)
        elif kind is MishapKind.STALL:
            self._clock.sleep(mishap.lasts_s)
        elif kind in _PLANS:
            self._assignments = _PLANS[kind](self._scenario)
        else:
            is_torn = kind is MishapKind.TORN_LATCH
            process.die(is_torn=is_torn)
            if is_torn:
                self._latch.tear()
            self._clock.sleep(min(mishap.lasts_s, 3.0))
            return self._start()
        return process


def _assignments(contacts: Sequence[Arc]) -> tuple[Assignment, ...]:
    return tuple(arc.assignment() for arc in contacts)


def _astray(scenario: Scenario) -> tuple[Assignment, ...]:
    """Contacts that lead through the floor, out of the travel, and nowhere."""
    mount = scenario.mount
    ends = (
        Joints(mount.first.lower_deg - 50.0, mount.second.lower_deg - 50.0),
        Joints(mount.first.upper_deg + 50.0, mount.second.lower_deg - 20.0),
        Joints(nan, nan),
    )
    astray = [
        arc._replace(goal=ends[number % len(ends)]) for number, arc in enumerate(scenario.contacts)
    ]
    return _assignments(astray)


_BUTTONS = {
    MishapKind.STOP: "stop",
    MishapKind.RESET: "reset",
    MishapKind.RESUME: "resume",
    MishapKind.STOW: "stow",
    MishapKind.HOLD: "hold",
    MishapKind.RECOVER: "recover",
}
_PLANS: Mapping[MishapKind, Callable[[Scenario], Sequence[Assignment] | None]] = {
    MishapKind.NEW_PLAN: lambda scenario: _assignments(scenario.contacts),
    MishapKind.BAD_PLAN: _astray,
    MishapKind.NO_PLAN: lambda _: None,
}
_AT_ONCE = frozenset(
    {
        *_BUTTONS,
        *_PLANS,
        MishapKind.CLOCK_STEP,
        MishapKind.STALL,
        MishapKind.DEATH,
        MishapKind.TORN_LATCH,
    }
)
