"""One life of the daemon: its parts put together anew, as after every start."""

from collections.abc import Sequence
from pathlib import Path
from typing import NamedTuple

from trunnion.pilot.departure import Facts
from trunnion.pilot.pilot import Pilot
from trunnion.safety.gate import Gate
from trunnion.safety.limits import SafetyLimits
from trunnion.safety.power import PowerJudge
from trunnion.safety.transmit import TransmitJudge, TransmitPermit
from trunnion.safety.world import World
from trunnion.service.cadence import Cadence
from trunnion.service.clock import VirtualClock
from trunnion.service.commands import Commands, Surroundings
from trunnion.service.contact_log import ContactLog
from trunnion.service.corrections import Corrections
from trunnion.service.emergency_desk import EmergencyDesk, Keeping
from trunnion.service.errors import ServiceError
from trunnion.service.link.direct import DirectLink
from trunnion.service.power_cut import PowerCut
from trunnion.service.recorder import Recorder
from trunnion.service.recovery_leave import RecoveryLeave
from trunnion.service.standing_wish import StandingWish
from trunnion.service.surroundings import HARDWARE_STOP, world_of
from trunnion.service.torture.records import TroubledBook
from trunnion.service.torture.steel import Steel
from trunnion.service.turn import ControlTurn, Orders, Turn
from trunnion.track.beam import Beam
from trunnion.track.path import Assignment

TICK_S = 0.1
TOLERANCE_DEG = 0.5


class Weather(NamedTuple):
    """What the sensors of the station say in this turn."""

    wind_m_s: float | None = 3.7
    heartbeat_age_s: float | None = 0.4
    clock_error_s: float | None = 0.02
    sun: tuple[float, float] | None = None


class Process:
    """A daemon without its sockets and threads: the same desk, link, pilot, gate and turn."""

    def __init__(
        self,
        gate: Gate,
        limits: SafetyLimits,
        steel: Steel,
        clock: VirtualClock,
        latch: Keeping,
        wish_file: Path,
        book: TroubledBook,
    ) -> None:
        self._steel = steel
        self._book = book
        self.troubles: list[str] = []
        self.desk = EmergencyDesk(latch, clock, self.troubles.append)
        self.wish = StandingWish(wish_file)
        self._link = DirectLink(steel.driver, clock)
        around = Surroundings(dict, lambda: None, lambda: self._link.status, lambda *_: None)
        self._power = PowerCut(PowerJudge(limits), self._link, self.troubles.append)
        self._leave = RecoveryLeave(limits, clock, self._link.newest)
        corrections = Corrections(clock, lambda: None, lambda: None)
        commands = Commands(self.wish, self.desk, around, self._leave, corrections)
        self._handlers = commands.handlers()
        self.desk.attach(self._link)
        mount = limits.mount.with_reserve(0.97, 0.7)
        sun_deg = limits.sun_keep_out_deg
        facts = Facts(mount, limits.clearance, TOLERANCE_DEG, sun_keep_out_deg=sun_deg)
        pilot = Pilot(facts)
        self._transmit = TransmitJudge(limits, TOLERANCE_DEG)
        recorder = Recorder(book)
        observers = (ContactLog(Beam(2.0 * TOLERANCE_DEG, TOLERANCE_DEG), recorder), recorder)
        self._turn = ControlTurn(clock, self._link, pilot, gate, observers)
        self._cadence = Cadence(clock, TICK_S)

    def beat(
        self, assignments: Sequence[Assignment] | None, weather: Weather
    ) -> tuple[Turn, TransmitPermit]:
        """Wait for the next turn, and do it."""
        late_s = self._cadence.wait().lateness_s
        way_back = self._leave.way_back(self._link.newest())
        orders = Orders(assignments, self.wish.wish, way_back)
        turn = self._turn.run(orders, lambda: self._look_around(late_s, weather))
        if turn.verdict.latch is not None:
            self._stop(turn.verdict.latch)
        self._power.see_to_it(turn, is_stopped=self.desk.latched is not None)
        permit = self._transmit.judge(
            turn.mono_s, turn.decision.error_deg, turn.reading, turn.verdict
        )
        return turn, permit

    def press(self, command: str) -> bool:
        """Press one of the operator's buttons; whether it was accepted."""
        if command == "stop":
            self._stop("somebody pressed stop")
            return True
        try:
            self._handlers[command]({})
        except ServiceError:
            return False
        return True

    def die(self, *, is_torn: bool) -> None:
        """Be killed: nothing is said to the mount any more, and the disk may lose what is new."""
        self._steel.driver.close()
        self._book.die(is_torn=is_torn)

    def _stop(self, cause: str) -> None:
        self._leave.withdraw()
        self.desk.stop(cause)

    def _look_around(self, late_s: float, weather: Weather) -> World:
        status = self._link.status
        if status.stop_pressed:
            self._stop(HARDWARE_STOP)
        return world_of(self.desk.latched, status, late_s)._replace(
            wind_gust_m_s=weather.wind_m_s,
            heartbeat_age_s=weather.heartbeat_age_s,
            clock_error_s=weather.clock_error_s,
            sun=weather.sun,
        )
