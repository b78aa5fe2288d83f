"""The parts of a running daemon, by name."""

from collections.abc import Callable
from typing import NamedTuple

from trunnion.files.station import StationFile
from trunnion.service.clock import Clock
from trunnion.service.contact_log import ContactLog
from trunnion.service.corrections import Corrections
from trunnion.service.departure_watch import DepartureWatch
from trunnion.service.emergency_desk import EmergencyDesk
from trunnion.service.file_watch import FileWatch
from trunnion.service.link.threaded import ThreadedLink
from trunnion.service.plan_keeper import PlanKeeper
from trunnion.service.power_cut import PowerCut
from trunnion.service.pulse import Pulse
from trunnion.service.records.writer import RecordWriter
from trunnion.service.recovery_leave import RecoveryLeave
from trunnion.service.senses import Senses
from trunnion.service.standing_wish import StandingWish
from trunnion.service.teller import Teller
from trunnion.service.transmission import Transmission
from trunnion.service.turn import ControlTurn


class Keeping(NamedTuple):
    """What is kept on disk, and who tells of it: emergency stop, wish, records."""

    desk: EmergencyDesk
    wish: StandingWish
    records: RecordWriter
    teller: Teller


class Planning(NamedTuple):
    """Where the plan comes from, and what has it made anew."""

    plans: PlanKeeper
    corrections: Corrections
    watch: FileWatch
    departures: DepartureWatch


class Turning(NamedTuple):
    """The control turn, what it needs, and what it leaves behind."""

    link: ThreadedLink
    senses: Senses
    power: PowerCut
    pulse: Pulse
    contacts: ContactLog
    transmission: Transmission
    control: ControlTurn


class Parts(NamedTuple):
    """All of them; who may be called from which thread is told where each is at home.

    `stop` takes in an emergency stop with its cause, from any thread.
    """

    station: StationFile
    clock: Clock
    keeping: Keeping
    planning: Planning
    turning: Turning
    leave: RecoveryLeave
    stop: Callable[[str], None]
