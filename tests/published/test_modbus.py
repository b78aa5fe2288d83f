"""Modbus against the standard's examples, and against libraries that are not ours.

Example frames: MODBUS Application Protocol Specification V1.1b3, sections 6.5 (write single coil)
and 6.12 (write multiple registers), from memory. Our driver speaks through pymodbus; here it meets
pyModbusTCP's server, and our bench meets minimalmodbus' client over a pseudo-terminal.
"""

import socket
from pathlib import Path

import minimalmodbus
import pytest
from pyModbusTCP.server import ModbusServer

from tests.drivers.benches import SystemClock, machine, on_pty
from tests.drivers.mounts import FACTS
from trunnion_drivers.bench.bench import Bench
from trunnion_drivers.bench.modbus_frames import Rtu, Tcp
from trunnion_drivers.bench.modbus_peer import ModbusPeer
from trunnion_drivers.interface.values import DriverMotion
from trunnion_drivers.modbus.driver import ModbusDriver
from trunnion_drivers.modbus.registers import RegisterType, WordOrder, decode
from trunnion_drivers.modbus.settings import ModbusSettings
from trunnion_drivers.settings import checked

MAP = {
    "url": "somewhere",
    "unit": 1,
    "first": {"read": 0, "write": 40, "units_per_deg": 1000.0},
    "second": {"read": 2, "write": 42, "units_per_deg": 1000.0},
    "halt": {"coil": 172, "value": 1},
}


@pytest.mark.parametrize(
    ("asked", "answered"),
    [
        ("05 00 AC FF 00", "05 00 AC FF 00"),
        ("10 00 01 00 02 04 00 0A 01 02", "10 00 01 00 02"),
        ("2B 0E 01 00", "AB 01"),
    ],
)
def test_the_bench_answers_as_the_standard_shows(asked: str, answered: str) -> None:
    peer = ModbusPeer(checked(ModbusSettings, MAP), machine(), Tcp())
    pdu, expected = bytes.fromhex(asked), bytes.fromhex(answered)
    header = b"\x15\x01\x00\x00" + (len(pdu) + 1).to_bytes(2, "big") + b"\x01"
    said = peer.hear(SystemClock().monotonic_s(), header + pdu)
    assert said == b"\x15\x01\x00\x00" + (len(expected) + 1).to_bytes(2, "big") + b"\x01" + expected


def free_port() -> int:
    with socket.create_server(("127.0.0.1", 0)) as probe:
        return int(probe.getsockname()[1])


def test_the_driver_drives_an_independent_server() -> None:
    port = free_port()
    server = ModbusServer("127.0.0.1", port, no_block=True)
    server.start()
    try:
        bank = server.data_bank
        bank.set_input_registers(0, [0x0000, 0x3039, 0xFFFF, 0xCFC7])
        settings = {**MAP, "url": f"tcp://127.0.0.1:{port}"}
        driver = ModbusDriver.from_settings(settings, FACTS, SystemClock())
        driver.open()
        reading = driver.read()
        assert (reading.first_deg, reading.second_deg) == pytest.approx((12.345, -12.345))
        driver.move(DriverMotion(-77.125, 33.5, 0.0, 0.0))
        words = bank.get_holding_registers(40, 4)
        first, second = (
            decode(pair, RegisterType.I32, WordOrder.HIGH_FIRST) for pair in (words[:2], words[2:])
        )
        assert (first, second) == (-77125, 33500)
        driver.halt()
        assert bank.get_coils(172, 1) == [True]
        driver.close()
    finally:
        server.stop()


def test_an_independent_client_drives_the_bench(tmp_path: Path) -> None:
    steel = machine(start_deg=(12.345, 67.891), encoder_noise_deg=0.0)
    peer = ModbusPeer(checked(ModbusSettings, MAP), steel, Rtu())
    with Bench(peer, on_pty(tmp_path), SystemClock()) as bench:
        client = minimalmodbus.Instrument(bench.url, 1)
        try:
            client.serial.baudrate, client.serial.timeout = 115200, 1.0
            assert client.read_long(0, functioncode=4, signed=True) == 12345
            assert client.read_long(2, functioncode=4, signed=True) == 67891
            client.write_long(40, 13345, signed=True)
            client.write_bit(172, 1)
        finally:
            client.serial.close()
