"""Described controllers over real pseudo-terminals and sockets, held to the whole contract."""

from collections.abc import Callable, Iterator
from pathlib import Path

import pytest

from tests.drivers.benches import DIALECTS, SystemClock, dialect_bench, machine, on_pty, on_tcp
from tests.drivers.mounts import HOME, QUICK
from trunnion_drivers.bench.endpoint import Endpoint
from trunnion_drivers.conformance.kit import DriverConformance
from trunnion_drivers.conformance.rig import Rig
from trunnion_drivers.dialect.driver import DialectDriver
from trunnion_drivers.simulator.faults import HEALTHY, Faults

BRAKE = {"settle_s": 0.3, "still_s": 0.5, "still_deg": 0.05}
WIRES: dict[str, Callable[[Path], Callable[[], Endpoint]]] = {
    "pty": on_pty,
    "tcp": lambda _folder: on_tcp(),
}


class TestConformance(DriverConformance):
    @pytest.fixture(params=[("reedmace", "pty"), ("plover", "tcp")])
    def rig(self, request: pytest.FixtureRequest, tmp_path: Path) -> Iterator[Rig]:
        name, wire = request.param
        dialect = tmp_path / f"{name}.yaml"
        text = (DIALECTS / dialect.name).read_text()
        for verb, send in (("engage", "B1"), ("release", "B0")):
            said = f'[{{send: "{send}*{{checksum}}", reply: "b*{{checksum}}"}}]'
            text = text.replace(f"{verb}_brake: []", f"{verb}_brake: {said}")
        dialect.write_text(text)
        steel, clock = machine(QUICK), SystemClock()
        with dialect_bench(dialect, steel, WIRES[wire](tmp_path)) as bench:
            driver = DialectDriver.from_settings(
                {"url": bench.url, "dialect": str(dialect), "parity": "none", "brake": BRAKE},
                QUICK,
                clock,
            )
            has_brake = driver.capabilities.has_brake
            assert has_brake == (name == "reedmace")
            can_cut = driver.capabilities.cuts_power
            pressed = Faults(stop_pressed=True)
            yield Rig(
                driver=driver,
                facts=QUICK,
                clock=clock,
                home=HOME,
                accuracy_deg=0.05,
                lag_s=0.1,
                pull=bench.pull,
                plug=bench.plug,
                stop_input=lambda on: steel.suffer(clock.monotonic_s(), pressed if on else HEALTHY),
                is_powered=(lambda: steel.is_powered) if can_cut else None,
                is_braked=(lambda: steel.is_braked) if has_brake else None,
            )
            driver.close()
