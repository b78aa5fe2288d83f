"""The daemon: puts the rooms together, beats, and answers.

The control turn runs in the thread that calls `run`; see DEVELOPERS.md for the others.
"""

import logging
from collections.abc import Mapping
from contextlib import ExitStack
from pathlib import Path
from threading import Event
from typing import NamedTuple

from trunnion.files.station import StationFile, load_station
from trunnion.mount.joints import Reading
from trunnion.pilot.departure import Facts
from trunnion.pilot.phase import Phase, Wish
from trunnion.pilot.pilot import Pilot
from trunnion.safety.gate import Gate
from trunnion.safety.power import PowerJudge
from trunnion.safety.world import World
from trunnion.service.antenna import beam_of, flown_mount_of, mount_of
from trunnion.service.cadence import Beat, Cadence
from trunnion.service.clearance import clearance_of
from trunnion.service.clock import Clock
from trunnion.service.commands import Commands, Surroundings
from trunnion.service.contact_log import ContactLog
from trunnion.service.control.server import ControlServer
from trunnion.service.correction_request import told
from trunnion.service.corrections import Corrections
from trunnion.service.departure_watch import DepartureWatch
from trunnion.service.drivers import build_driver
from trunnion.service.emergency_desk import EmergencyDesk
from trunnion.service.file_watch import FileWatch
from trunnion.service.latch import EmergencyLatch
from trunnion.service.limits import safety_limits_of
from trunnion.service.link.threaded import ThreadedLink
from trunnion.service.notify import Notifier, Watchdog, watchdog_timeout_s
from trunnion.service.plan_keeper import PlanKeeper
from trunnion.service.power_cut import PowerCut
from trunnion.service.recorder import Recorder
from trunnion.service.records.retention import retention_of
from trunnion.service.records.values import EventKind
from trunnion.service.records.writer import RecordWriter
from trunnion.service.recovery_leave import RecoveryLeave
from trunnion.service.senses import senses_of
from trunnion.service.sole_daemon import sole_daemon
from trunnion.service.standing_correction import StandingCorrection
from trunnion.service.standing_wish import StandingWish
from trunnion.service.status import Health, describe
from trunnion.service.stop_file import StopFile
from trunnion.service.surroundings import HARDWARE_STOP, world_of
from trunnion.service.transmission import transmission_of
from trunnion.service.turn import ControlTurn, Orders, Turn

_log = logging.getLogger(__name__)

LONGEST_STOWING_S = 300.0
"""A mount that has not reached stow by then, at the end, is halted where it is."""


class _Heartbeat:
    """Observes the turns for the service manager."""

    def __init__(self, station: StationFile, notifier: Notifier) -> None:
        self._watchdog = Watchdog(notifier, station.safety.reading_max_age_s, watchdog_timeout_s())
        self._notifier = notifier
        self._told: str | None = None

    def note(self, turn: Turn) -> None:
        self._watchdog.turn_completed(turn.mono_s, turn.reading)
        assignment = turn.decision.assignment
        status = turn.decision.phase.value + (f" {assignment.contact}" if assignment else "")
        if status != self._told:
            self._told = status
            self._notifier.status(status)


class Paths(NamedTuple):
    """The files a daemon is started with; the plan replaces the station's own where given."""

    station: Path
    plan: Path | None


class Daemon:
    """One antenna, from construction until `run` returns.

    Construction takes the control socket, so that two daemons never have one mount, and opens the
    link. Raises FileProblems, SocketInUse, SocketUnusable and MountInUse before anything moves.
    """

    def __init__(self, paths: Paths, clock: Clock, notifier: Notifier) -> None:
        station = load_station(paths.station)
        self._station = station
        self._clock = clock
        self._notifier = notifier
        self._is_ending = Event()
        self._last_turn: Turn | None = None
        self._last_beat = Beat(0, 0.0, 0)
        self._missed = 0
        self._was_coming_back = False
        self._records: RecordWriter | None = None  # a stop may come before it is there
        self._stop_file: StopFile | None = None
        driver = build_driver(station, clock)
        clearance = clearance_of(station)
        pilot = Pilot(Facts(flown_mount_of(station), clearance, beam_of(station).tolerance_deg))
        limits = safety_limits_of(station, mount_of(station), clearance)
        gate = Gate(limits)
        with ExitStack() as held:
            self._wish = StandingWish(station.files.latch.with_name(WISH_FILE))
            self._desk = EmergencyDesk(EmergencyLatch(station.files.latch), clock, self._tell_stop)
            around = Surroundings(
                self._status,
                self.reload,
                lambda: self._link.status,
                self._record,
                lambda: self._stop_file.asked() if self._stop_file is not None else None,
            )
            self._leave = RecoveryLeave(limits, clock, self._last_reading)
            self._plans = PlanKeeper(paths.station, paths.plan, clock, self._tell_trouble)
            held.callback(self._plans.close)
            self._corrections = Corrections(
                clock,
                lambda: self._plans.assignments,
                self._plans.plan_anew,
                StandingCorrection(station.files.latch.with_name(CORRECTION_FILE)),
                lambda: self._plans.is_whole,
            )
            commands = Commands(self._wish, self._desk, around, self._leave, self._corrections)
            handlers = commands.handlers()
            server = ControlServer(
                station.files.control_socket, handlers, self.emergency_stop, clock
            )
            held.callback(server.close)
            held.enter_context(sole_daemon(station.files.latch))
            self._senses = senses_of(station, clock)
            held.callback(self._senses.close)
            records = self._records = RecordWriter(
                station.files.records, clock, retention_of(station)
            )
            held.callback(records.close)
            if still := self._corrections.in_force:
                self._record(EventKind.STATE, f"corrected since before this start: {told(still)}")
            self._link = ThreadedLink(driver, clock, poll_s=0.5 / station.cadence.tick_hz)
            held.callback(self._link.close)
            self._desk.attach(self._link)
            if station.files.stop_request is not None:
                self._stop_file = StopFile(station.files.stop_request, self.emergency_stop)
                held.callback(self._stop_file.close)
            self._power = PowerCut(PowerJudge(limits), self._link, self._tell_trouble)
            self._watch = FileWatch(_watched(paths, station))
            held.callback(self._watch.close)
            recorder = Recorder(records)
            self._contacts = ContactLog(beam_of(station), recorder)
            self._transmission = transmission_of(
                station, limits, beam_of(station).tolerance_deg, self._tell_permission
            )
            held.callback(self._transmission.end)
            heartbeat = _Heartbeat(station, notifier)
            self._departures = DepartureWatch(beam_of(station).tolerance_deg)
            observers = (
                self._transmission,
                self._contacts,
                recorder,
                heartbeat,
                self._departures,
            )
            self._control = ControlTurn(clock, self._link, pilot, gate, observers)
            self._held = held.pop_all()

    # -- the beat -------------------------------------------------------------------------------

    def run(self) -> None:
        """Beat until told to end; then stow if the station wants it, halt, and let go."""
        with self._held:
            cadence = Cadence(self._clock, 1.0 / self._station.cadence.tick_hz)
            self._beat(cadence)
            self._notifier.ready()
            while not self._is_ending.is_set():
                self._see_to_the_plan()
                self._beat(cadence)
            self._notifier.stopping()
            if self._station.safety.stow_on_exit:
                self._stow_at_the_end(cadence)
            self._contacts.close(self._clock.utc_s())
        _log.info("ended")

    def _beat(self, cadence: Cadence, wish: Wish | None = None) -> Turn:
        self._last_beat = cadence.wait()
        self._missed = cadence.missed_in_all
        way_back = self._leave.way_back(self._last_reading())
        if self._was_coming_back and way_back is None:
            self._plans.plan_anew()  # from outside nothing could be planned
        self._was_coming_back = way_back is not None
        orders = Orders(self._plans.assignments, wish or self._wish.wish, way_back)
        turn = self._control.run(orders, self._look_around)
        if turn.verdict.latch is not None:
            self.emergency_stop(turn.verdict.latch)
        self._power.see_to_it(turn, is_stopped=self._desk.latched is not None)
        self._last_turn = turn
        return turn

    def _see_to_the_plan(self) -> None:
        """Plan from where the mount stands: at the start, and when anything has changed since.

        That is a file that was replaced, a correction, or a mount that is off its path.
        Between the turns: starting the child takes some milliseconds.
        """
        reading = self._link.newest()
        if self._watch.take_change():
            self._plans.plan_anew()
        if over := self._corrections.end_with_the_contact():
            self._record(EventKind.STATE, f"the correction ends with contact {over}")
        is_idle = not self._plans.is_planning
        if is_idle and self._departures.is_due(self._clock.monotonic_s()):
            self._record(EventKind.STATE, "the mount is off its path: the rest is planned anew")
            self._plans.plan_anew()
        if reading is not None:
            self._plans.see_to_it(reading.joints, self._corrections.in_force)

    def _look_around(self) -> World:
        status = self._link.status
        if status.stop_pressed:
            self.emergency_stop(HARDWARE_STOP)
        lateness_s = self._last_beat.lateness_s
        return world_of(self._desk.latched, status, lateness_s, self._senses.now())

    def _last_reading(self) -> Reading | None:
        return self._last_turn.reading if self._last_turn is not None else None

    def _stow_at_the_end(self, cadence: Cadence) -> None:
        until_s = self._clock.monotonic_s() + LONGEST_STOWING_S
        while self._clock.monotonic_s() < until_s and self._desk.latched is None:
            if self._beat(cadence, Wish.STOW).decision.phase is Phase.STOWED:
                return

    # -- what others ask for; from any thread ---------------------------------------------------

    def end(self) -> None:
        """Have `run` return, in good order."""
        self._is_ending.set()

    def reload(self) -> None:
        """Read plan and elements again."""
        self._plans.plan_anew()

    def emergency_stop(self, cause: str) -> None:
        """Halt, and stay halted until reset."""
        self._leave.withdraw()
        self._desk.stop(cause)

    def _status(self) -> Mapping[str, object]:
        return describe(self._station, self._last_turn, self._contacts.score, self._health())

    def _health(self) -> Health:
        return Health(
            self._clock.utc_s(),
            self._wish.wish,
            self._desk.latched,
            self._link.status,
            self._last_beat,
            self._missed,
            self._records.trouble if self._records is not None else None,
            self._plans.trouble,
            self._plans.is_planning,
            self._transmission.permit_at(self._clock.monotonic_s()),
            self._transmission.trouble,
            self._senses.trouble,
            self._corrections.in_force,
        )

    # -- what is told ---------------------------------------------------------------------------

    def _tell_stop(self, sentence: str) -> None:
        _log.critical("%s", sentence)
        self._record(EventKind.STOP, sentence)

    def _tell_permission(self, sentence: str) -> None:
        _log.info("%s", sentence)
        self._record(EventKind.TRANSMIT, sentence)

    def _tell_trouble(self, sentence: str) -> None:
        _log.warning("%s", sentence)
        self._record(EventKind.TROUBLE, sentence)

    def _record(self, kind: EventKind, sentence: str) -> None:
        if self._records is not None:
            self._records.event(self._clock.utc_s(), kind, sentence)


WISH_FILE = "standing-wish"
CORRECTION_FILE = "standing-correction"


def _watched(paths: Paths, station: StationFile) -> tuple[Path, ...]:
    """What a plan is made from; the station file itself is read at the start only."""
    return (paths.plan or station.files.plan, *station.files.elements)
