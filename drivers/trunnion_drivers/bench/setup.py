"""From a station file to its bench: who speaks at the far end, and over which kind of wire."""

from collections.abc import Callable
from pathlib import Path
from urllib.parse import urlsplit

from trunnion_drivers.bench.bench import Bench, Tap
from trunnion_drivers.bench.dialect_peer import DialectPeer
from trunnion_drivers.bench.endpoint import Endpoint, PtyEndpoint, TcpEndpoint
from trunnion_drivers.bench.modbus_frames import Rtu, Tcp
from trunnion_drivers.bench.modbus_peer import ModbusPeer
from trunnion_drivers.bench.peer import Peer
from trunnion_drivers.bench.station import BenchStation
from trunnion_drivers.dialect.load import load_dialect
from trunnion_drivers.dialect.settings import DialectSettings
from trunnion_drivers.interface.errors import BadSettings, SettingProblem
from trunnion_drivers.interface.values import Clock
from trunnion_drivers.modbus.settings import ModbusSettings
from trunnion_drivers.settings import checked
from trunnion_drivers.simulator.machine import SimulatedMachine

_DIALECT, _MODBUS = "dialect", "modbus"


def bench_for(station: BenchStation, machine: SimulatedMachine, clock: Clock, tap: Tap) -> Bench:
    """A bench at the very URL that the station's driver opens. Raises BadSettings, OSError."""
    if station.kind == _DIALECT:
        dialect_settings = checked(DialectSettings, station.settings)
        dialect = load_dialect(station.facts.folder / dialect_settings.dialect)
        baud_rate = dialect_settings.port(dialect.line).baud_rate
        peer: Peer = DialectPeer(dialect, machine)
        url = dialect_settings.url
    elif station.kind == _MODBUS:
        settings = checked(ModbusSettings, station.settings)
        peer = ModbusPeer(settings, machine, Tcp() if settings.is_tcp else Rtu())
        baud_rate, url = settings.baud_rate, settings.url
    else:
        reason = f"expected {_DIALECT} or {_MODBUS} on the bench, got {station.kind!r}"
        raise BadSettings((SettingProblem("driver.kind", reason),))
    is_network = "://" in url
    return Bench(peer, _plug(url), clock, tap, None if is_network else baud_rate)


def _plug(url: str) -> Callable[[], Endpoint]:
    parts = urlsplit(url)
    if parts.scheme in ("socket", "tcp"):
        if parts.hostname not in ("127.0.0.1", "localhost"):
            reason = f"expected 127.0.0.1 as host on the bench, got {parts.hostname!r}"
            raise BadSettings((SettingProblem("driver.url", reason),))
        port = parts.port or 0
        return lambda: TcpEndpoint(port)
    link = Path(url)
    if parts.scheme or (link.exists() and not link.is_symlink()) or url.startswith("/dev/"):
        reason = f"expected a free path such as /tmp/bench-port on the bench, got {url!r}"
        raise BadSettings((SettingProblem("driver.url", reason),))
    return lambda: PtyEndpoint(link)
