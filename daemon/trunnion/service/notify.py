"""What the service manager is told: ready, alive, stopping, how it goes (sd_notify(3))."""

import os
import socket
from collections.abc import Mapping
from contextlib import suppress
from typing import Protocol, Self

from trunnion.mount.joints import Reading

_FEEDS_A_TIMEOUT = 4


class Notifier:
    """Sends a datagram to the socket in `$NOTIFY_SOCKET`; does nothing where there is none.

    Never raises and never waits: a service manager that does not listen stops no antenna.
    """

    def __init__(self, address: str | None) -> None:
        self._socket: socket.socket | None = None
        if address:
            self._socket = socket.socket(socket.AF_UNIX, socket.SOCK_DGRAM | socket.SOCK_CLOEXEC)
            self._socket.settimeout(0.0)
            self._address = "\0" + address[1:] if address.startswith("@") else address

    @classmethod
    def from_environment(cls, environment: Mapping[str, str] = os.environ) -> Self:
        """Build with the address that the service manager left for us."""
        return cls(environment.get("NOTIFY_SOCKET"))

    def ready(self) -> None:
        """The daemon does its work from now on."""
        self._send("READY=1")

    def stopping(self) -> None:
        """The daemon has begun to end."""
        self._send("STOPPING=1")

    def status(self, sentence: str) -> None:
        """One line for `systemctl status`."""
        self._send("STATUS=" + sentence.replace("\n", " "))

    def alive(self) -> None:
        """Feed the service manager's watchdog."""
        self._send("WATCHDOG=1")

    def close(self) -> None:
        """Say nothing from now on."""
        if self._socket is not None:
            self._socket.close()
            self._socket = None

    def _send(self, message: str) -> None:
        if self._socket is not None:
            with suppress(OSError):
                self._socket.sendto(message.encode(), self._address)


class Alive(Protocol):
    """The part of the notifier that the watchdog needs."""

    def alive(self) -> None:
        """Feed the service manager's watchdog."""
        ...


class Watchdog:
    """Fed by control turns that were completed with a fresh reading, and by nothing else.

    A daemon whose turn hangs, or that has lost its mount, is started anew by the service manager.
    """

    def __init__(self, notifier: Alive, longest_age_s: float, timeout_s: float | None) -> None:
        self._notifier = notifier
        self._longest_age_s = longest_age_s
        self._interval_s = (timeout_s or 0.0) / _FEEDS_A_TIMEOUT
        self._fed_s: float | None = None

    def turn_completed(self, mono_s: float, reading: Reading | None) -> None:
        """Take in a turn; feed when it is time and the reading is young enough."""
        if reading is None or mono_s - reading.taken_s > self._longest_age_s:
            return
        if self._fed_s is None or mono_s - self._fed_s >= self._interval_s:
            self._fed_s = mono_s
            self._notifier.alive()


def watchdog_timeout_s(environment: Mapping[str, str] = os.environ) -> float | None:
    """Seconds after which the service manager acts, where it watches this very process."""
    try:
        timeout_s = int(environment["WATCHDOG_USEC"]) / 1e6
        watched = int(environment.get("WATCHDOG_PID", os.getpid()))
    except (KeyError, ValueError):
        return None
    return timeout_s if timeout_s > 0.0 and watched == os.getpid() else None
