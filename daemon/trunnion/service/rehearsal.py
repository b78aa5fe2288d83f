"""The whole daemon through a plan, in virtual time: the same pilot, gate and turn, on a simulator.

Between contacts, while the mount rests, the turns are further apart; whenever it moves they come at
the station's own cadence. Nothing of the safety is switched off.
"""

from collections.abc import Iterator
from pathlib import Path
from typing import NamedTuple

from trunnion.files.plan import load_plan
from trunnion.files.station import load_station
from trunnion.pilot.departure import Facts
from trunnion.pilot.phase import Phase, Wish
from trunnion.pilot.pilot import Pilot
from trunnion.safety.emergency import EmergencyStop
from trunnion.safety.gate import Gate
from trunnion.safety.power import PowerJudge
from trunnion.safety.world import World
from trunnion.service.antenna import beam_of, flown_mount_of, mount_of
from trunnion.service.briefing import Briefing, brief
from trunnion.service.briefing_order import BriefingOrder
from trunnion.service.clearance import clearance_of
from trunnion.service.clock import VirtualClock
from trunnion.service.contact_log import ContactLog, Flown
from trunnion.service.drivers import build_simulator
from trunnion.service.limits import safety_limits_of
from trunnion.service.link.direct import DirectLink
from trunnion.service.power_cut import PowerCut
from trunnion.service.score import Score, combined
from trunnion.service.senses import FAIR
from trunnion.service.sun_watch import sun_watch_of
from trunnion.service.surroundings import HARDWARE_STOP, world_of
from trunnion.service.turn import ControlTurn, Observer, Orders, Turn
from trunnion.track.path import Assignment

LEAD_S = 600.0
"""A rehearsal begins this long before the first contact, with the mount where the plan finds it."""

RESTING_STEP_S = 1.0
"""Time from turn to turn while the mount is at rest."""

RESTING = frozenset({Phase.STOWED, Phase.WAITING, Phase.HOLDING})

LONGEST_RETURN_S = 600.0
"""After the last contact the mount gets this long to reach stow."""


class Rehearsed(NamedTuple):
    """What became of one contact: its score over all assignments, and the last one's phase."""

    score: Score
    last_phase: Phase


class Rehearsal:
    """Flies a briefing turn by turn; `results` tells of each contact flown so far, by its id."""

    def __init__(self, briefing: Briefing, begin_s: float) -> None:
        station = briefing.station
        self.begin_s = begin_s
        self._latched: EmergencyStop | None = None
        self._period_s = 1.0 / station.cadence.tick_hz
        self._assignments = briefing.assignments
        self._clock = VirtualClock(begin_s)
        self._link = DirectLink(build_simulator(station, self._clock), self._clock)
        self._contacts = ContactLog(beam_of(station), self)
        self.mount, self.clearance = mount_of(station), clearance_of(station)
        tolerance_deg = beam_of(station).tolerance_deg
        facts = Facts(
            flown_mount_of(station),
            self.clearance,
            tolerance_deg,
            sun_keep_out_deg=station.safety.sun_keep_out_deg,
        )
        self._sun = sun_watch_of(station, self._clock)
        pilot = Pilot(facts)
        limits = safety_limits_of(station, self.mount, self.clearance)
        gate = Gate(limits)
        self._power = PowerCut(PowerJudge(limits), self._link, _tell_nobody)
        observers: tuple[Observer, ...] = (self._contacts,)
        self._control = ControlTurn(self._clock, self._link, pilot, gate, observers)
        self.results: dict[str, Rehearsed] = {}

    @property
    def end_s(self) -> float:
        """When the last contact ends (UTC)."""
        return max((each.end_s for each in self._assignments), default=self._clock.utc_s())

    def turns(self) -> Iterator[Turn]:
        """Every turn as it is flown, until all contacts are over and the mount is home."""
        orders = Orders(self._assignments, Wish.FOLLOW_PLAN)
        end_s = self.end_s
        while True:
            turn = self._control.run(orders, self._look_around)
            if turn.verdict.latch is not None:
                self._stop(turn.verdict.latch)
            self._power.see_to_it(turn, is_stopped=self._latched is not None)
            yield turn
            is_home = turn.decision.phase is Phase.STOWED
            if turn.utc_s >= end_s and (is_home or turn.utc_s >= end_s + LONGEST_RETURN_S):
                break
            self._clock.sleep(self._step_s(turn))
        self._contacts.close(self._clock.utc_s())
        self._link.close()

    def contact_begins(self, utc_s: float, assignment: Assignment) -> None:
        """Nothing to keep before the end."""

    def contact_ends(self, flown: Flown) -> None:
        """Keep the score, together with that of the contact's earlier assignments."""
        name, score = flown.assignment.contact, flown.score
        if name in self.results:
            score = combined(self.results[name].score, score)
        self.results[name] = Rehearsed(score, flown.last_phase)

    def _look_around(self) -> World:
        status = self._link.status
        if status.stop_pressed:
            self._stop(HARDWARE_STOP)
        sun = self._sun.direction(clock_error_s=0.0) if self._sun is not None else None
        return world_of(self._latched, status, lateness_s=0.0, sensed=FAIR._replace(sun=sun))

    def _stop(self, cause: str) -> None:
        """Latch, as the daemon does; nobody resets it in a rehearsal."""
        self._link.emergency_halt()
        self._latched = self._latched or EmergencyStop(cause, self._clock.utc_s())

    def _step_s(self, turn: Turn) -> float:
        """One beat while the mount moves; longer while it rests, but never past a departure."""
        decision = turn.decision
        if decision.phase not in RESTING:
            return self._period_s
        begin_s = decision.assignment.begin_s if decision.assignment else None
        ahead_s = [
            moment_s - turn.utc_s
            for moment_s in (decision.departure_s, begin_s)
            if moment_s is not None and moment_s > turn.utc_s
        ]
        return max(self._period_s, min(RESTING_STEP_S, *ahead_s, RESTING_STEP_S))


def _tell_nobody(_: str) -> None:
    """A rehearsal keeps its results and no log."""


def rehearsal_of(station: Path, plan: Path | None) -> tuple[Briefing, Rehearsal]:
    """Prepare a plan and its rehearsal; raises FileProblems."""
    contacts = load_plan(plan or load_station(station).files.plan).contacts
    first_s = min((each.from_s for each in contacts), default=0.0)
    briefing = brief(BriefingOrder(station, plan, first_s - LEAD_S))
    return briefing, Rehearsal(briefing, first_s - LEAD_S)
