"""Which kind of port a URL asks for."""

from typing import Protocol

from trunnion_drivers.interface.values import Clock
from trunnion_drivers.serial_port.port import SerialPort
from trunnion_drivers.serial_port.settings import PortSettings
from trunnion_drivers.serial_port.tcp_port import TcpPort


class AnyPort(Protocol):
    """A port, whatever carries it. Every method but `close` raises LinkLost."""

    def open(self) -> None:
        """Open it."""
        ...

    def close(self) -> None:
        """Close it; raises nothing."""
        ...

    def send(self, message: bytes) -> None:
        """Write the whole message."""
        ...

    def drop_unsent(self) -> None:
        """Forget what still waits to be sent, where that can be done."""
        ...

    def receive(self, until_s: float) -> bytes:
        """Whatever has come, waiting until this second at most."""
        ...

    @property
    def stop_pressed(self) -> bool:
        """Whether the stop input says stop."""
        ...

    def set_power(self, *, is_on: bool) -> None:
        """Hold up the power output, or drop it."""
        ...


def port_for(settings: PortSettings, clock: Clock) -> AnyPort:
    """The port that these settings describe, not open yet."""
    if settings.url.startswith("socket://"):
        return TcpPort(settings.url, clock)
    return SerialPort(settings, clock)
