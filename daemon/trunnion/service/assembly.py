"""Puts the daemon's parts together, in the order in which they may begin.

First whatever may be refused: files, sockets, the mount itself; the link, which touches hardware,
comes after. Requests are taken in once all is there, and until the link is closed.
"""

from collections.abc import Mapping
from contextlib import ExitStack, closing
from pathlib import Path
from typing import NamedTuple

from trunnion.files.station import StationFile, load_station
from trunnion.pilot.departure import Facts
from trunnion.pilot.pilot import Pilot
from trunnion.safety.gate import Gate
from trunnion.safety.limits import SafetyLimits
from trunnion.safety.power import PowerJudge
from trunnion.service.antenna import beam_of, flown_mount_of, mount_of
from trunnion.service.clearance import clearance_of
from trunnion.service.clock import Clock
from trunnion.service.commands import Commands, Surroundings
from trunnion.service.contact_log import ContactLog
from trunnion.service.control.conversation import Handler
from trunnion.service.control.endpoint import listening
from trunnion.service.control.server import serving
from trunnion.service.corrections import Corrections
from trunnion.service.departure_watch import DepartureWatch
from trunnion.service.drivers import build_driver
from trunnion.service.emergency_desk import EmergencyDesk
from trunnion.service.file_watch import FileWatch
from trunnion.service.health import status_of
from trunnion.service.latch import EmergencyLatch
from trunnion.service.limits import safety_limits_of
from trunnion.service.link.threaded import ThreadedLink
from trunnion.service.notify import Notifier
from trunnion.service.parts import Keeping, Parts, Planning, Turning
from trunnion.service.plan_keeper import PlanKeeper
from trunnion.service.power_cut import PowerCut
from trunnion.service.pulse import Pulse
from trunnion.service.recorder import Recorder
from trunnion.service.records.retention import retention_of
from trunnion.service.records.writer import RecordWriter
from trunnion.service.recovery_leave import RecoveryLeave
from trunnion.service.senses import senses_of
from trunnion.service.service_manager import ServiceManagerReport
from trunnion.service.sole_daemon import sole_daemon
from trunnion.service.standing_correction import StandingCorrection
from trunnion.service.standing_wish import StandingWish
from trunnion.service.stop_file import StopFile
from trunnion.service.teller import Teller
from trunnion.service.transmission import transmission_of
from trunnion.service.turn import ControlTurn
from trunnion_drivers.interface.driver import Driver

WISH_FILE = "standing-wish"
CORRECTION_FILE = "standing-correction"


class Paths(NamedTuple):
    """The files a daemon is started with; the plan replaces the station's own where given."""

    station: Path
    plan: Path | None


class _Ground(NamedTuple):
    """What all parts stand on; what must be closed in the end is left with `held`."""

    paths: Paths
    station: StationFile
    limits: SafetyLimits
    driver: Driver
    clock: Clock
    notifier: Notifier
    held: ExitStack


def assemble(paths: Paths, clock: Clock, notifier: Notifier, held: ExitStack) -> Parts:
    """Build all parts; what must be closed in the end is left with `held`.

    Raises FileProblems, SocketInUse, SocketUnusable and MountInUse before anything moves.
    """
    station = load_station(paths.station)
    driver = build_driver(station, clock)
    limits = safety_limits_of(station, mount_of(station), clearance_of(station))
    front = held.enter_context(ExitStack())  # closed after the link, as it was opened before
    listeners = front.enter_context(listening(station.files.control_socket))
    front.enter_context(sole_daemon(station.files.latch))
    ground = _Ground(paths, station, limits, driver, clock, notifier, held)
    keeping = _keeping(ground)
    planning = _planning(ground, keeping.teller)
    turning = _turning(ground, keeping, planning)
    leave = RecoveryLeave(limits, clock, turning.pulse.reading)

    def stop(cause: str) -> None:
        leave.withdraw()
        keeping.desk.stop(cause)

    parts = Parts(station, clock, keeping, planning, turning, leave, stop)
    front.enter_context(serving(listeners, _handlers(parts, _stop_file(parts, held)), stop, clock))
    return parts


def _keeping(ground: _Ground) -> Keeping:
    files, clock = ground.station.files, ground.clock
    records = RecordWriter(files.records, clock, retention_of(ground.station))
    teller = Teller(ground.held.enter_context(closing(records)), clock)
    desk = EmergencyDesk(EmergencyLatch(files.latch), clock, teller.stop)
    return Keeping(desk, StandingWish(files.latch.with_name(WISH_FILE)), records, teller)


def _planning(ground: _Ground, teller: Teller) -> Planning:
    paths, files, clock = ground.paths, ground.station.files, ground.clock
    plans = PlanKeeper(paths.station, paths.plan, clock, teller.trouble)
    standing = StandingCorrection(files.latch.with_name(CORRECTION_FILE))
    corrections = Corrections(
        clock, lambda: plans.assignments, plans.plan_anew, standing, lambda: plans.is_whole
    )
    watch = FileWatch((paths.plan or files.plan, *files.elements))
    ground.held.callback(plans.close)
    ground.held.callback(watch.close)
    return Planning(
        plans, corrections, watch, DepartureWatch(beam_of(ground.station).tolerance_deg)
    )


def _turning(ground: _Ground, keeping: Keeping, planning: Planning) -> Turning:
    station, clock, held, teller = ground.station, ground.clock, ground.held, keeping.teller
    beam = beam_of(station)
    senses = held.enter_context(closing(senses_of(station, clock)))
    link = ThreadedLink(ground.driver, clock, poll_s=0.5 / station.cadence.tick_hz)
    held.callback(link.close)
    keeping.desk.attach(link)
    transmission = transmission_of(station, ground.limits, beam.tolerance_deg, teller.permission)
    held.callback(transmission.end)
    recorder = Recorder(keeping.records)
    contacts = ContactLog(beam, recorder)
    manager = ServiceManagerReport(ground.notifier, station.safety.reading_max_age_s)
    observers = (transmission, contacts, recorder, manager, planning.departures)
    facts = Facts(
        flown_mount_of(station),
        ground.limits.clearance,
        beam.tolerance_deg,
        sun_keep_out_deg=ground.limits.sun_keep_out_deg,
    )
    pilot = Pilot(facts)
    control = ControlTurn(clock, link, pilot, Gate(ground.limits), observers)
    power = PowerCut(PowerJudge(ground.limits), link, teller.trouble)
    return Turning(link, senses, power, Pulse(), contacts, transmission, control)


def _stop_file(parts: Parts, held: ExitStack) -> StopFile | None:
    path = parts.station.files.stop_request
    return None if path is None else held.enter_context(closing(StopFile(path, parts.stop)))


def _handlers(parts: Parts, stop_file: StopFile | None) -> Mapping[str, Handler]:
    keeping, planning, link = parts.keeping, parts.planning, parts.turning.link
    around = Surroundings(
        lambda: status_of(parts),
        planning.plans.plan_anew,
        lambda: link.status,
        keeping.teller.record,
        (lambda: None) if stop_file is None else stop_file.asked,
    )
    commands = Commands(keeping.wish, keeping.desk, around, parts.leave, planning.corrections)
    return commands.handlers()
