"""The driver as both links use it: it never raises, and it comes back by itself."""

from collections.abc import Callable
from contextlib import suppress
from typing import NamedTuple, TypeVar

from trunnion.mount.joints import Reading
from trunnion.safety.verdict import Move
from trunnion.service.clock import Clock
from trunnion.service.link.backoff import Backoff
from trunnion.service.link.outbox import Outbox
from trunnion.service.link.status import LinkState, LinkStatus, sentence, state_after
from trunnion_drivers.interface.driver import Driver
from trunnion_drivers.interface.values import DriverMotion, DriverReading

Answer = TypeVar("Answer")

REOPEN_AFTER = {
    LinkState.DOWN: 1,
    LinkState.BROKEN: 1,
    LinkState.SILENT: 5,
    LinkState.GARBLED: 5,
}
"""So many failures in a row make the link close and open anew; a refusal never does."""


class Sighting(NamedTuple):
    """A reading, and the number of the connection it came over."""

    reading: Reading
    connection: int


class Wire:
    """One driver, opened and reopened; but for `halt_at_once`, used by one thread at a time."""

    def __init__(self, driver: Driver, clock: Clock, outbox: Outbox) -> None:
        self._driver = driver
        self._clock = clock
        self._outbox = outbox
        self._backoff = Backoff()
        self._order_trouble: LinkState | None = None
        self.sighting: Sighting | None = None
        self.status = LinkStatus()

    def send(self) -> None:
        """Send what waits in the outbox; after a reconnect a halt comes before everything."""
        self._give_power_back()
        if not self._is_ready():
            return
        order = self._outbox.take(self.status.connections)
        if isinstance(order, Move):
            motion = DriverMotion(*order.motion)
            self._order(lambda: self._driver.move(motion))
        elif order is not None:
            self._order(self._driver.halt)
        if self._outbox.must_cut_power:
            self._cut_power()

    def halt_at_once(self) -> None:
        """Send a halt past the call that is under way, where the driver can; from any thread.

        The halt that the outbox demands follows it in any case.
        """
        with suppress(Exception):  # other people's drivers: whoever stops must not stumble
            self._driver.halt_at_once()

    def look(self) -> None:
        """Read where the mount is."""
        if not self._is_ready():
            return
        taken = self._attempt(self._driver.read)
        if taken is not None:
            self._publish(taken)

    def close(self) -> None:
        """Halt the mount where it can be reached, and close."""
        if self._driver.is_open:
            self._attempt(self._driver.halt)
        self._attempt(self._driver.close)
        self.status = self.status._replace(state=LinkState.CLOSED)

    def _is_ready(self) -> bool:
        if self._driver.is_open:
            return True
        now_s = self._clock.monotonic_s()
        if not self._backoff.is_over(now_s):
            return False
        self._backoff.begin(now_s)
        self._attempt(self._driver.open)
        if not self._driver.is_open:
            return False
        self.status = self.status._replace(
            connections=self.status.connections + 1, is_power_cut=False
        )
        self._order(self._driver.halt)
        return self._driver.is_open

    def _cut_power(self) -> None:
        """Take the power from the motors, where the driver can."""
        if self.status.is_power_cut or not self._driver.capabilities.cuts_power:
            return
        failures = self.status.failures
        self._attempt(self._driver.cut_power)
        is_cut = self.status.failures == failures
        self.status = self.status._replace(is_power_cut=is_cut)

    def _give_power_back(self) -> None:
        """Opening a driver gives the motors power: so close it once the stop is reset."""
        if self.status.is_power_cut and not self._outbox.must_cut_power:
            self._attempt(self._driver.close)

    def _order(self, call: Callable[[], None]) -> None:
        failures = self.status.failures
        self._attempt(call)
        failed = self.status.failures > failures
        self._order_trouble = self.status.state if failed else None

    def _publish(self, taken: DriverReading) -> None:
        self._backoff.reset()
        reading = Reading(taken.taken_s, taken.first_deg, taken.second_deg)
        self.sighting = Sighting(reading, self.status.connections)
        self.status = self.status._replace(
            state=self._order_trouble or LinkState.UP,
            failures_in_row=self.status.failures_in_row if self._order_trouble else 0,
            stop_pressed=taken.stop_pressed,
            at_limit=taken.at_limit,
            fault=taken.fault,
        )

    def _attempt(self, call: Callable[[], Answer]) -> Answer | None:
        try:
            return call()
        except Exception as error:  # noqa: BLE001 - other people's drivers: the link must outlive any
            self._blame(error)
            return None

    def _blame(self, error: Exception) -> None:
        state, in_row = state_after(error), self.status.failures_in_row + 1
        self.status = self.status._replace(
            state=state,
            failures_in_row=in_row,
            failures=self.status.failures + 1,
            last_error=sentence(error),
        )
        if self.status.is_power_cut:
            return  # to open anew would give the motors power
        if self._driver.is_open and in_row >= REOPEN_AFTER.get(state, in_row + 1):
            self._attempt(self._driver.close)
