"""Switched motors behind Modbus: coils out, and what a server of the same map makes of them."""

from tests.drivers.mounts import QUICK
from trunnion_drivers.bench.modbus_frames import Rtu
from trunnion_drivers.bench.modbus_peer import ModbusPeer
from trunnion_drivers.control.command import Switches, Turn
from trunnion_drivers.dialect.checksum import ChecksumKind
from trunnion_drivers.modbus.orders import writes_for, writes_for_halt
from trunnion_drivers.modbus.settings import ModbusSettings
from trunnion_drivers.settings import checked
from trunnion_drivers.simulator.machine import SimulatedMachine
from trunnion_drivers.simulator.settings import MachineSettings

MAP = checked(
    ModbusSettings,
    {
        "url": "somewhere",
        "command": "on-off",
        "first": {"read": 0, "up": 10, "down": 11},
        "second": {"read": 2, "up": 12, "down": 13, "reversed": True},
        "halt": {"register": 30, "value": 77},
    },
)


def steel_at_rest() -> SimulatedMachine:
    return SimulatedMachine(MachineSettings(), QUICK, 99.0)


def frame(body: str) -> bytes:
    data = bytes.fromhex(body)
    return data + ChecksumKind.CRC16_MODBUS.of(data).to_bytes(2, "little")


def test_the_coil_that_goes_off_is_written_first() -> None:
    up = writes_for(MAP, Switches(Turn.UP, Turn.OFF)).coils
    assert list(up.items())[:2] == [(11, False), (10, True)]
    down = writes_for(MAP, Switches(Turn.DOWN, Turn.OFF)).coils
    assert list(down.items())[:2] == [(10, False), (11, True)]


def test_a_reversed_joint_has_its_coils_changed_over() -> None:
    assert writes_for(MAP, Switches(Turn.OFF, Turn.UP)).coils[13] is True


def test_a_halt_is_a_register() -> None:
    assert writes_for_halt(MAP).registers == {30: 77}


def rates_after(steel: SimulatedMachine, said: list[str]) -> tuple[float, float]:
    peer = ModbusPeer(MAP, steel, Rtu())
    now_s = 100.0
    for body in said:
        assert peer.hear(now_s, frame(body))
    motion = steel.true_motion(now_s + 1.0)
    return motion.first_rate_deg_s, motion.second_rate_deg_s


def test_one_coil_turns_one_motor() -> None:
    steel = steel_at_rest()
    first, second = rates_after(steel, ["01 05 00 0B FF 00"])
    assert (first, second) == (-QUICK.first.rate_deg_s, 0.0)


def test_many_coils_at_once_turn_both_motors_and_a_register_halts_them() -> None:
    steel = steel_at_rest()
    first, second = rates_after(steel, ["01 0F 00 0A 00 04 01 09"])
    assert (first, second) == (QUICK.first.rate_deg_s, QUICK.second.rate_deg_s)
    steel = steel_at_rest()
    assert rates_after(steel, ["01 0F 00 0A 00 04 01 09", "01 06 00 1E 00 4D"]) == (0.0, 0.0)


def test_a_server_answers_what_it_was_written() -> None:
    peer = ModbusPeer(MAP, steel_at_rest(), Rtu())
    peer.hear(100.0, frame("01 05 00 0B FF 00"))
    assert peer.hear(100.1, frame("01 01 00 0A 00 04")) == frame("01 01 01 02")
    assert peer.hear(100.2, frame("01 02 00 63 00 01")) == frame("01 82 02")
    assert peer.hear(100.3, frame("02 01 00 0A 00 04")) == b""


def test_noise_between_frames_is_passed_over() -> None:
    peer = ModbusPeer(MAP, steel_at_rest(), Rtu())
    asked = frame("01 01 00 0A 00 04")
    assert peer.hear(100.0, b"\x00\xff\x13" + asked[:3]) == b""
    assert peer.hear(100.1, asked[3:]) == frame("01 01 01 00")
