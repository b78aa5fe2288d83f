"""Real ports with simulated mounts behind them."""

import time
from collections.abc import Callable
from pathlib import Path
from typing import Any

from tests.drivers.mounts import FACTS
from trunnion_drivers.bench.bench import Bench, Tap, no_tap
from trunnion_drivers.bench.dialect_peer import DialectPeer
from trunnion_drivers.bench.endpoint import Endpoint, PtyEndpoint, TcpEndpoint
from trunnion_drivers.dialect.load import load_dialect
from trunnion_drivers.interface.values import MountFacts
from trunnion_drivers.simulator.machine import SimulatedMachine
from trunnion_drivers.simulator.settings import MachineSettings

DIALECTS = Path(__file__).parents[2] / "config" / "dialects"


class SystemClock:
    def monotonic_s(self) -> float:
        return time.monotonic()

    def sleep(self, seconds: float) -> None:
        time.sleep(max(0.0, seconds))


def machine(facts: MountFacts = FACTS, **settings: Any) -> SimulatedMachine:
    return SimulatedMachine(MachineSettings(**settings), facts, SystemClock().monotonic_s())


def dialect_bench(
    dialect: Path,
    steel: SimulatedMachine,
    plug_in: Callable[[], Endpoint],
    tap: Tap = no_tap,
    baud_rate: int | None = None,
) -> Bench:
    return Bench(DialectPeer(load_dialect(dialect), steel), plug_in, SystemClock(), tap, baud_rate)


def on_pty(folder: Path) -> Callable[[], Endpoint]:
    return lambda: PtyEndpoint(folder / "adapter")


def on_tcp() -> Callable[[], Endpoint]:
    """Always the same port, as a terminal server has."""
    first = TcpEndpoint()
    port = first.port
    first.close()
    return lambda: TcpEndpoint(port)
