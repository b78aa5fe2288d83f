"""Mounts behind Modbus RTU over a pseudo-terminal and Modbus TCP, held to the whole contract."""

from collections.abc import Iterator
from pathlib import Path
from textwrap import dedent
from typing import Any

import pytest

from tests.drivers.benches import SystemClock, machine, on_pty, on_tcp
from tests.drivers.mounts import FACTS, HOME, QUICK, HandClock
from trunnion_drivers.bench.bench import Bench
from trunnion_drivers.bench.endpoint import PtyEndpoint
from trunnion_drivers.bench.modbus_frames import Rtu, Tcp
from trunnion_drivers.bench.modbus_peer import ModbusPeer
from trunnion_drivers.conformance.kit import DriverConformance
from trunnion_drivers.conformance.rig import Rig
from trunnion_drivers.dialect.yaml_lines import read_lined_yaml
from trunnion_drivers.interface.errors import BadSettings, LinkLost
from trunnion_drivers.modbus.driver import ModbusDriver
from trunnion_drivers.modbus.settings import ModbusSettings
from trunnion_drivers.settings import checked
from trunnion_drivers.simulator.faults import HEALTHY, Faults

POSITION: dict[str, Any] = {
    "unit": 17,
    "baud_rate": 115200,
    "follows_rate": True,
    "word_order": "low-first",
    "first": {"read": 100, "write": 200, "write_rate": 204, "units_per_deg": 1000.0,
              "rate_units_per_deg_s": 500.0, "zero_deg": -180.0},
    "second": {"read": 102, "write": 202, "write_rate": 205, "units_per_deg": 1000.0,
               "rate_units_per_deg_s": 500.0, "reversed": True},
    "halt": {"coil": 3},
    "go": 4,
    "power": 5,
    "brake": {"coil": 6, "engaged_when": True, "settle_s": 0.3, "still_s": 0.5, "still_deg": 0.05},
    "watchdog": 230,
    "stop_input": {"input": 7},
    "limits": (8, 9),
}  # fmt: skip
RATE: dict[str, Any] = {
    "command": "rate",
    "table": "holding",
    "first": {"read": 10, "type": "f32", "write_rate": 20, "rate_type": "f32"},
    "second": {"read": 14, "type": "f32", "write_rate": 22, "rate_type": "f32"},
    "halt": {"register": 30, "value": 1234},
}


class TestConformance(DriverConformance):
    @pytest.fixture(params=[("rtu", POSITION), ("tcp", RATE)], ids=["rtu", "tcp"])
    def rig(self, request: pytest.FixtureRequest, tmp_path: Path) -> Iterator[Rig]:
        wire, settings = request.param
        steel, clock = machine(QUICK), SystemClock()
        known = checked(ModbusSettings, {"url": "somewhere", **settings})
        plug_in = on_pty(tmp_path) if wire == "rtu" else on_tcp()
        peer = ModbusPeer(known, steel, Rtu() if wire == "rtu" else Tcp())
        with Bench(peer, plug_in, clock) as bench:
            url = bench.url.replace("socket://", "tcp://")
            driver = ModbusDriver.from_settings({"url": url, **settings}, QUICK, clock)
            capable, pressed = driver.capabilities, Faults(stop_pressed=True)

            def press(is_pressed: bool) -> None:
                steel.suffer(clock.monotonic_s(), pressed if is_pressed else HEALTHY)

            yield Rig(
                driver=driver,
                facts=QUICK,
                clock=clock,
                home=HOME,
                accuracy_deg=0.05,
                lag_s=0.1,
                pull=bench.pull,
                plug=bench.plug,
                stop_input=press if capable.reports_stop_input else None,
                is_powered=(lambda: steel.is_powered) if capable.cuts_power else None,
                is_braked=(lambda: steel.is_braked) if capable.has_brake else None,
            )
            driver.close()


@pytest.mark.parametrize(
    ("change", "reason"),
    [
        ({"halt": None}, "halt"),
        ({"halt": {}}, "either a coil or a register"),
        ({"first": {"read": 100}}, "expected write for command position"),
        ({"command": "on-off"}, "expected up and down"),
        ({"url": "tcp://127.0.0.1:1502", "rs485": True}, "needs a serial device"),
        ({"url": "udp://x"}, "tcp://host:port"),
        ({"hlat": 3}, "did you mean 'halt'"),
        ({"first": {"read": 100, "write": 1, "type": "i16", "units_per_deg": 200.0}}, "too narrow"),
        ({"second": {"read": 300, "write": 1}}, "within 120 registers"),
    ],
)
def test_what_is_wrong_with_a_map_is_told(change: dict[str, Any], reason: str) -> None:
    with pytest.raises(BadSettings, match=reason):
        ModbusDriver.from_settings({"url": "/dev/null", **POSITION, **change}, FACTS, HandClock())


def test_a_device_that_cannot_switch_its_direction_is_told() -> None:
    endpoint = PtyEndpoint()
    settings = {"url": endpoint.url, "rs485": True, **POSITION}
    driver = ModbusDriver.from_settings(settings, FACTS, HandClock())
    with pytest.raises(LinkLost, match="RS485"):
        driver.open()
    assert not driver.is_open
    endpoint.close()


def test_the_map_in_the_handbook_is_one(tmp_path: Path) -> None:
    handbook = (Path(__file__).parents[2] / "drivers" / "README.md").read_text()
    block = handbook[handbook.index("    driver:\n      kind: modbus") :].partition("\n\n")[0]
    path = tmp_path / "driver.yaml"
    path.write_text(dedent(block))
    section = read_lined_yaml(path, "driver").value
    assert isinstance(section, dict)
    settings = dict(section["driver"])
    assert settings.pop("kind") == "modbus"
    driver = ModbusDriver.from_settings(settings, FACTS, HandClock())
    assert driver.capabilities.reports_stop_input
