"""Real ports: what goes over them, what is wrong with them, and their modem-control lines."""

import stat
import time
from collections.abc import Callable, Iterator
from pathlib import Path
from typing import Any

import pytest
import serial
from serial.rs485 import RS485Settings

from tests.drivers.benches import SystemClock
from tests.drivers.mounts import HandClock
from tests.drivers.rfc2217_server import HandHeldAdapter, Rfc2217Server
from tests.drivers.scripted_port import Scripted
from trunnion_drivers.bench.endpoint import PtyEndpoint, TcpEndpoint
from trunnion_drivers.interface.errors import BadSettings, Garbled, LinkLost, NoReply
from trunnion_drivers.serial_port.any_port import AnyPort, port_for
from trunnion_drivers.serial_port.exchange import Exchanges
from trunnion_drivers.serial_port.port import SerialPort
from trunnion_drivers.serial_port.settings import PortSettings
from trunnion_drivers.settings import checked


def port(url: str, **settings: Any) -> AnyPort:
    return port_for(checked(PortSettings, {"url": url, **settings}), SystemClock())


def soon() -> float:
    return time.monotonic() + 1.0


class Parrot:
    """Says back what it hears."""

    def hear(self, _mono_s: float, come: bytes) -> bytes:
        return come

    def says_unasked(self, _mono_s: float) -> bytes:
        return b""


@pytest.mark.parametrize("kind", [PtyEndpoint, TcpEndpoint])
def test_bytes_pass_both_ways(kind: type[PtyEndpoint | TcpEndpoint]) -> None:
    endpoint = kind()
    near = port(endpoint.url)
    near.open()
    near.send(b"\x00\xffquestion\r\n")
    until_s, come = soon(), b""
    while b"\n" not in come and time.monotonic() < until_s:
        come += endpoint.receive()
    assert come == b"\x00\xffquestion\r\n"
    endpoint.send(b"\x11\x13answer\r")
    assert near.receive(soon()) == b"\x11\x13answer\r"
    assert near.receive(time.monotonic()) == b""
    near.close()
    endpoint.close()


@pytest.mark.parametrize("kind", [PtyEndpoint, TcpEndpoint])
def test_a_pulled_wire_is_lost(kind: type[PtyEndpoint | TcpEndpoint]) -> None:
    endpoint = kind()
    near = port(endpoint.url)
    near.open()
    near.send(b"x")
    while not endpoint.receive():
        pass
    endpoint.close()
    with pytest.raises(LinkLost):
        near.receive(soon())
    near.close()
    with pytest.raises(LinkLost, match="not"):
        near.send(b"x")


def test_a_port_is_used_by_one_alone() -> None:
    endpoint = PtyEndpoint()
    first, second = port(endpoint.url), port(endpoint.url)
    first.open()
    with pytest.raises(LinkLost, match="another program"):
        second.open()
    first.close()
    second.open()
    second.close()
    endpoint.close()


def test_a_missing_port_is_told() -> None:
    with pytest.raises(LinkLost, match="is the adapter plugged in"):
        port("/dev/serial/by-id/nothing").open()
    with pytest.raises(LinkLost, match="expected a connection"):
        port("socket://127.0.0.1:1").open()


def test_what_is_no_port_is_told(tmp_path: Path) -> None:
    path = tmp_path / "text"
    path.write_text("hello")
    with pytest.raises(LinkLost, match="cannot be used"):
        port(str(path)).open()


def test_a_port_that_cannot_switch_its_direction_is_told() -> None:
    endpoint = PtyEndpoint()
    with pytest.raises(LinkLost, match="RS485"):
        port(endpoint.url, rs485=True).open()
    endpoint.close()


class SwitchedPty(serial.Serial):
    """A terminal whose kernel's driver switches the direction; it notes what it was asked for."""

    def __init__(self, *args: Any, do_not_open: bool, **settings: Any) -> None:
        assert do_not_open
        self.asked: list[tuple[bool, RS485Settings]] = []
        self.rts_levels: list[bool] = []
        super().__init__(None, *args, **settings)

    def _set_rs485_mode(self, asked: RS485Settings) -> None:
        self.asked.append((self.fd is not None, asked))

    def _update_rts_state(self) -> None:
        self.rts_levels.append(self.rts)

    def _update_dtr_state(self) -> None:
        pass


def test_the_kernel_switches_the_direction_from_the_first_byte_on() -> None:
    endpoint, made = PtyEndpoint(), []

    def make(url: str, **settings: Any) -> SwitchedPty:
        made.append(SwitchedPty(**settings))
        made[0].port = url
        return made[0]

    timed = {"rs485": True, "rs485_before_s": 0.002, "rs485_after_s": 0.003}
    near = SerialPort(checked(PortSettings, {"url": endpoint.url, **timed}), SystemClock(), make)
    near.open()
    (is_open, asked), *_ = made[0].asked
    assert is_open, "the direction is set on the open port, before anything is sent"
    assert (asked.rts_level_for_tx, asked.rts_level_for_rx) == (True, False)
    assert not asked.loopback, "what is sent must not come back"
    assert (asked.delay_before_tx, asked.delay_before_rx) == (0.002, 0.003)
    near.set_power(is_on=True)
    near.send(b"x")
    assert True not in made[0].rts_levels, "only the kernel's driver may switch the sender on"
    near.close()
    endpoint.close()


class Held:
    """What stands where pyserial's port does; its inputs are held up but for one."""

    def __init__(self, url: str, **settings: Any) -> None:
        self.url, self.settings = url, settings
        self.cts = self.dsr = self.cd = self.ri = True
        self.rts = self.dtr = False

    def open(self) -> None:
        """Nothing is behind it."""


@pytest.mark.parametrize(("line", "name"), [("cts",) * 2, ("dsr",) * 2, ("dcd", "cd"), ("ri",) * 2])
def test_each_line_can_be_the_stop(line: str, name: str) -> None:
    made: list[Held] = []

    def make(url: str, **settings: Any) -> Held:
        made.append(Held(url, **settings))
        return made[0]

    settings = {"url": "rfc2217://127.0.0.1:4001", "stop_input": line, "power_output": "rts"}
    near = SerialPort(checked(PortSettings, settings), SystemClock(), make)
    near.open()
    for each in ("cts", "dsr", "cd", "ri"):
        setattr(made[0], each, False)
        assert near.stop_pressed is (each == name)
        setattr(made[0], each, True)
    near.set_power(is_on=True)
    assert (made[0].rts, made[0].dtr) == (True, False)


def test_a_port_is_opened_as_the_settings_say_and_for_one_alone() -> None:
    made: list[Held] = []

    def make(url: str, **settings: Any) -> Held:
        made.append(Held(url, **settings))
        return made[0]

    wanted = {"baud_rate": 2400, "data_bits": 7, "parity": "odd", "stop_bits": 2}
    settings = {"url": "rfc2217://127.0.0.1:4001", **wanted}
    SerialPort(checked(PortSettings, settings), SystemClock(), make).open()
    given = made[0].settings
    assert (given["baudrate"], given["bytesize"], given["parity"]) == (2400, 7, "O")
    assert (given["stopbits"], given["exclusive"]) == (2, True)


def test_a_port_server_switches_its_own_direction() -> None:
    for url in ("socket://127.0.0.1:4001", "rfc2217://127.0.0.1:4001"):
        with pytest.raises(BadSettings, match="rs485 needs a port of this computer"):
            port(url, rs485=True)


def test_a_line_cannot_do_two_things() -> None:
    with pytest.raises(BadSettings, match="rts"):
        port("/dev/null", rs485=True, power_output="rts")


def test_a_missing_permission_names_the_group(tmp_path: Path) -> None:
    from trunnion_drivers.serial_port.trouble import in_words

    path = tmp_path / "port"
    path.touch()
    path.chmod(stat.S_IRUSR)
    words = in_words(str(path), PermissionError(13, "Permission denied"))
    assert "no permission" in words
    assert "must be in the group" in words
    assert repr(path.group()) in words


@pytest.mark.filterwarnings(r"ignore:set(Daemon|Name)\(\) is deprecated")  # pyserial calls them
class TestModemLines:
    @pytest.fixture
    def adapter(self) -> HandHeldAdapter:
        return HandHeldAdapter()

    @pytest.fixture
    def near(self, adapter: HandHeldAdapter) -> Iterator[AnyPort]:
        with Rfc2217Server(adapter, Parrot()) as server:
            near = port(server.url, stop_input="cts", power_output="dtr")
            near.open()
            yield near
            near.close()

    def test_bytes_pass_over_rfc_2217(self, near: AnyPort) -> None:
        near.send(b"\x00\xff\x13question\r\n")
        until_s, come = soon(), b""
        while len(come) < 13 and time.monotonic() < until_s:
            come += near.receive(until_s)
        assert come == b"\x00\xff\x13question\r\n"

    def test_a_stop_that_is_not_held_up_is_pressed(
        self, near: AnyPort, adapter: HandHeldAdapter
    ) -> None:
        assert eventually(lambda: not near.stop_pressed)
        adapter.cts = False
        assert eventually(lambda: near.stop_pressed)
        adapter.cts = True
        assert eventually(lambda: not near.stop_pressed)

    def test_power_is_held_up_and_dropped(self, near: AnyPort, adapter: HandHeldAdapter) -> None:
        near.set_power(is_on=True)
        assert eventually(lambda: adapter.dtr)
        near.set_power(is_on=False)
        assert eventually(lambda: not adapter.dtr)


def eventually(is_so: Callable[[], bool]) -> bool:
    until_s = soon()
    while not is_so() and time.monotonic() < until_s:
        time.sleep(0.01)
    return is_so()


def line(come: bytes) -> bytes | None:
    return come if come.endswith(b"\n") else None


def test_an_answer_in_pieces_is_put_together() -> None:
    clock = HandClock()
    near = Scripted(clock, [(0.01, b"a"), (0.02, b"b"), (0.03, b"\n")])
    assert Exchanges(near, clock, 0.3, 0.0).ask(b"?", line) == b"ab\n"


def test_silence_and_nonsense_are_told_apart() -> None:
    clock = HandClock()
    exchanges = Exchanges(Scripted(clock, [], [(0.1, b"zzz")]), clock, 0.3, 0.0)
    with pytest.raises(NoReply, match=r"0\.3 s"):
        exchanges.ask(b"?", line)
    with pytest.raises(Garbled, match="zzz"):
        exchanges.ask(b"?", line)


def test_a_late_answer_is_not_taken_for_the_next_one() -> None:
    clock = HandClock()
    near = Scripted(clock, [(0.33, b"late\n")], [(0.05, b"right\n")])
    exchanges = Exchanges(near, clock, 0.3, 0.0)
    with pytest.raises(NoReply):
        exchanges.ask(b"1", line)
    assert exchanges.ask(b"2", line) == b"right\n"


def test_what_came_unasked_is_thrown_away() -> None:
    clock = HandClock()
    near = Scripted(clock, [(0.0, b"one\n"), (0.01, b"doubled\n")], [(0.05, b"two\n")])
    exchanges = Exchanges(near, clock, 0.3, 0.0)
    assert exchanges.ask(b"1", line) == b"one\n"
    clock.sleep(0.1)
    assert exchanges.ask(b"2", line) == b"two\n"


def test_messages_keep_their_distance() -> None:
    clock = HandClock()
    exchanges = Exchanges(Scripted(clock), clock, 0.3, pause_s=0.25)
    begin_s = clock.monotonic_s()
    for _ in range(4):
        exchanges.tell(b"x")
    assert clock.monotonic_s() - begin_s == pytest.approx(0.75)
