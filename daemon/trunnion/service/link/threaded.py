"""The link with a thread of its own, so that a slow mount never makes a control turn late."""

import logging
from contextlib import suppress
from queue import Empty, SimpleQueue
from threading import Thread

from trunnion.mount.joints import Reading
from trunnion.safety.verdict import Order
from trunnion.service.clock import Clock
from trunnion.service.link.outbox import Outbox
from trunnion.service.link.status import LinkState, LinkStatus
from trunnion.service.link.wire import Wire
from trunnion_drivers.interface.driver import Driver

_log = logging.getLogger(__name__)

LONGEST_GOODBYE_S = 3.0
"""How long closing waits for a driver that hangs in a call."""


class ThreadedLink:
    """Opens the driver and begins to read at once; lives until closed.

    After each order, and every `poll_s` seconds without one, the mount is read.
    """

    def __init__(self, driver: Driver, clock: Clock, poll_s: float) -> None:
        self._poll_s = poll_s
        self._outbox = Outbox()
        self._wire = Wire(driver, clock, self._outbox)
        self._seen_connection = 0
        self._news: SimpleQueue[None] = SimpleQueue()  # may be put to by a signal in mid-put
        self._logged = LinkState.CLOSED
        self._is_closing = False
        self._thread = Thread(target=self._run, name="link", daemon=True)
        self._thread.start()

    def newest(self) -> Reading | None:
        """The newest reading; None before the first one. It may be old: see `taken_s`."""
        sighting = self._wire.sighting
        if sighting is None:
            return None
        self._seen_connection = sighting.connection
        return sighting.reading

    @property
    def status(self) -> LinkStatus:
        """How the link fares, and what the mount says beside its angles."""
        return self._wire.status

    def submit(self, order: Order) -> None:
        """Send this order next; an older one that has not left yet is forgotten."""
        self._outbox.put(order, self._seen_connection)
        self._wake()

    def emergency_halt(self) -> None:
        """Halt before anything else, and send nothing but halts until released.

        Where the driver can, the stop overtakes the call that is under way.
        """
        self._outbox.bar()
        self._wake()
        self._wire.halt_at_once()

    def cut_power(self) -> None:
        """Take the power from the motors where the mount can, until released."""
        self._outbox.cut_power()
        self._wake()

    def release(self) -> None:
        """Let motion pass again; sends nothing, and nothing submitted before counts."""
        self._outbox.release()

    def close(self) -> None:
        """Halt the mount and let go of it; idempotent.

        A driver that hangs in a call is left behind after `LONGEST_GOODBYE_S`.
        """
        self._is_closing = True
        self._wake()
        self._thread.join(LONGEST_GOODBYE_S)

    def _run(self) -> None:
        try:
            while not self._is_closing:
                self._wire.send()
                self._wire.look()
                self._log_a_change()
                with suppress(Empty):
                    self._news.get(timeout=self._poll_s)
        finally:
            self._wire.close()

    def _log_a_change(self) -> None:
        status = self._wire.status
        if status.state is self._logged:
            return
        self._logged = status.state
        if status.state is LinkState.UP:
            _log.info("%s", status.state.value)
        else:
            _log.warning("%s: %s", status.state.value, status.last_error)

    def _wake(self) -> None:
        if self._news.empty():
            self._news.put(None)
