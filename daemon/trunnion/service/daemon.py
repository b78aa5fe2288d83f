"""The daemon: beats, until it is told to end. Its parts come from `assembly.py`.

The control turn runs in the thread that calls `run`; see DEVELOPERS.md for the others.
"""

import logging
from contextlib import ExitStack
from threading import Event

from trunnion.pilot.phase import Phase, Wish
from trunnion.safety.world import World
from trunnion.service.assembly import Paths, assemble
from trunnion.service.cadence import Cadence
from trunnion.service.clock import Clock
from trunnion.service.correction_request import told
from trunnion.service.notify import Notifier
from trunnion.service.surroundings import HARDWARE_STOP, world_of
from trunnion.service.turn import Orders, Turn

_log = logging.getLogger(__name__)

LONGEST_STOWING_S = 300.0
"""A mount that has not reached stow by then, at the end, is halted where it is."""


class Daemon:
    """One antenna, from construction until `run` returns.

    Construction takes the control socket and the mount, so that two daemons never have one, and
    opens the link. Raises FileProblems, SocketInUse, SocketUnusable and MountInUse before anything
    moves.
    """

    def __init__(self, paths: Paths, clock: Clock, notifier: Notifier) -> None:
        self._clock = clock
        self._notifier = notifier
        self._is_ending = Event()
        self._was_coming_back = False
        with ExitStack() as held:
            self._parts = assemble(paths, clock, notifier, held)
            self._held = held.pop_all()

    # -- the beat -------------------------------------------------------------------------------

    def run(self) -> None:
        """Beat until told to end; then stow if the station wants it, halt, and let go."""
        station = self._parts.station
        with self._held:
            self._tell_of_a_correction()
            cadence = Cadence(self._clock, 1.0 / station.cadence.tick_hz)
            self._beat(cadence)
            self._notifier.ready()
            while not self._is_ending.is_set():
                self._see_to_the_plan()
                self._beat(cadence)
            self._notifier.stopping()
            if station.safety.stow_on_exit:
                self._stow_at_the_end(cadence)
            self._parts.turning.contacts.close(self._clock.utc_s())
        _log.info("ended")

    def _beat(self, cadence: Cadence, wish: Wish | None = None) -> Turn:
        keeping, plans, turning = (
            self._parts.keeping,
            self._parts.planning.plans,
            self._parts.turning,
        )
        pulse = turning.pulse
        pulse.beat, pulse.missed = cadence.wait(), cadence.missed_in_all
        way_back = self._parts.leave.way_back(pulse.reading())
        if self._was_coming_back and way_back is None:
            plans.plan_anew()  # from outside nothing could be planned
        self._was_coming_back = way_back is not None
        orders = Orders(plans.assignments, wish or keeping.wish.wish, way_back)
        turn = turning.control.run(orders, self._look_around)
        if turn.verdict.latch is not None:
            self.emergency_stop(turn.verdict.latch)
        turning.power.see_to_it(turn, is_stopped=keeping.desk.latched is not None)
        pulse.turn = turn
        return turn

    def _see_to_the_plan(self) -> None:
        """Plan from where the mount stands: at the start, and when anything has changed since.

        That is a file that was replaced, a correction, or a mount that is off its path.
        Between the turns: starting the child takes some milliseconds.
        """
        teller = self._parts.keeping.teller
        plans, corrections, watch, departures = self._parts.planning
        reading = self._parts.turning.link.newest()
        if watch.take_change():
            plans.plan_anew()
        if over := corrections.end_with_the_contact():
            teller.state(f"the correction ends with contact {over}")
        if not plans.is_planning and departures.is_due(self._clock.monotonic_s()):
            teller.state("the mount is off its path: the rest is planned anew")
            plans.plan_anew()
        if reading is not None:
            plans.see_to_it(reading.joints, corrections.in_force)

    def _look_around(self) -> World:
        turning, desk = self._parts.turning, self._parts.keeping.desk
        status = turning.link.status
        if status.stop_pressed:
            self.emergency_stop(HARDWARE_STOP)
        return world_of(desk.latched, status, turning.pulse.beat.lateness_s, turning.senses.now())

    def _stow_at_the_end(self, cadence: Cadence) -> None:
        until_s = self._clock.monotonic_s() + LONGEST_STOWING_S
        desk = self._parts.keeping.desk
        if self._parts.keeping.wish.wish is Wish.STAND:
            return
        while self._clock.monotonic_s() < until_s and desk.latched is None:
            if self._beat(cadence, Wish.STOW).decision.phase is Phase.STOWED:
                return

    def _tell_of_a_correction(self) -> None:
        if given := self._parts.planning.corrections.in_force:
            self._parts.keeping.teller.state(f"corrected since before this start: {told(given)}")

    # -- what others ask for; from any thread ---------------------------------------------------

    def end(self) -> None:
        """Have `run` return, in good order."""
        self._is_ending.set()

    def reload(self) -> None:
        """Read plan and elements again."""
        self._parts.planning.plans.plan_anew()

    def emergency_stop(self, cause: str) -> None:
        """Halt, and stay halted until reset."""
        self._parts.stop(cause)
