"""The simulated mount, which tells a socket of every order when it is handed over.

A driver like any other, announced by an entry point, so that the daemon under test is the real one.
"""

import socket
import struct
import time
from collections.abc import Mapping
from contextlib import suppress
from pathlib import Path
from typing import Self

from trunnion_drivers.interface.values import Clock, DriverMotion, MountFacts
from trunnion_drivers.simulator.driver import SimulatorDriver

KIND = "telling-mount"
WIRE = struct.Struct("<?d")
"""Whether it is a halt, and the monotonic second, which all processes share."""


class TellingMount(SimulatorDriver):
    """Says when it was told to halt or to move, before it does so."""

    ear: str
    mouth: socket.socket

    @classmethod
    def from_settings(cls, settings: Mapping[str, object], facts: MountFacts, clock: Clock) -> Self:
        """The simulated mount's settings, and `ear`: the path of the socket that is told."""
        others = dict(settings)
        ear = str(others.pop("ear"))
        mount = super().from_settings(others, facts, clock)
        mount.ear = ear
        mount.mouth = socket.socket(socket.AF_UNIX, socket.SOCK_DGRAM)
        mount.mouth.setblocking(False)
        return mount

    def _move(self, motion: DriverMotion) -> None:
        self._tell_of(is_halt=False)
        super()._move(motion)

    def _halt(self) -> None:
        self._tell_of(is_halt=True)
        super()._halt()

    def _tell_of(self, *, is_halt: bool) -> None:
        told = WIRE.pack(is_halt, time.monotonic())
        with suppress(OSError):  # nobody listens any more
            self.mouth.sendto(told, self.ear)


class Ear:
    """The other end: hears of the orders, in order."""

    def __init__(self, path: Path) -> None:
        self._socket = socket.socket(socket.AF_UNIX, socket.SOCK_DGRAM)
        self._socket.bind(str(path))

    def next_s(self, *, is_halt: bool, after_s: float, patience_s: float = 30.0) -> float:
        """When the first order of this kind after that second came; raises TimeoutError."""
        self._socket.settimeout(patience_s)
        while True:
            was_halt, told_s = WIRE.unpack(self._socket.recv(WIRE.size))
            if was_halt == is_halt and told_s >= after_s:
                return float(told_s)

    def close(self) -> None:
        """Listen no more."""
        self._socket.close()


def announce(folder: Path) -> None:
    """Make this driver known to a Python that has the folder on its path."""
    info = folder / "telling_mount-1.0.dist-info"
    info.mkdir()
    (info / "METADATA").write_text("Metadata-Version: 2.1\nName: telling-mount\nVersion: 1.0\n")
    (info / "entry_points.txt").write_text(
        f"[trunnion.drivers]\n{KIND} = tests.bench.telling_mount:TellingMount\n"
    )
