"""The link without a thread: for virtual time, where everything happens in turn."""

from trunnion.mount.joints import Reading
from trunnion.safety.verdict import Order
from trunnion.service.clock import Clock
from trunnion.service.link.outbox import Outbox
from trunnion.service.link.status import LinkStatus
from trunnion.service.link.wire import Wire
from trunnion_drivers.interface.driver import Driver


class DirectLink:
    """Calls the driver in the caller's own thread, at most one reading an instant."""

    def __init__(self, driver: Driver, clock: Clock) -> None:
        self._clock = clock
        self._outbox = Outbox()
        self._wire = Wire(driver, clock, self._outbox)
        self._looked_s: float | None = None
        self._seen_connection = 0

    def newest(self) -> Reading | None:
        """Read the mount now; the last reading that came where this fails."""
        now_s = self._clock.monotonic_s()
        if now_s != self._looked_s:
            self._looked_s = now_s
            self._wire.look()
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
        """Send this order now."""
        self._outbox.put(order, self._seen_connection)
        self._wire.send()

    def emergency_halt(self) -> None:
        """Halt now, and send nothing but halts until released."""
        self._outbox.bar()
        self._wire.send()

    def cut_power(self) -> None:
        """Take the power from the motors where the mount can, until released."""
        self._outbox.cut_power()
        self._wire.send()

    def release(self) -> None:
        """Let motion pass again; sends nothing."""
        self._outbox.release()

    def close(self) -> None:
        """Halt the mount and let go of it; idempotent."""
        self._wire.close()
