"""Daemon and command over real sockets."""

import os
import resource
import socket
import stat
import subprocess
import sys
import threading
from collections.abc import Iterator, Mapping
from contextlib import suppress
from pathlib import Path

import pytest

from trunnion.service.clock import SystemClock, VirtualClock
from trunnion.service.control.client import ControlClient
from trunnion.service.control.endpoint import stop_path
from trunnion.service.control.errors import (
    ControlError,
    DaemonSilent,
    NoDaemon,
    RequestFailed,
    SocketInUse,
    SocketUnusable,
)
from trunnion.service.control.lane import LONGEST_SILENCE_S, MOST_CONNECTIONS
from trunnion.service.control.protocol import BadArguments, ErrorKind
from trunnion.service.control.server import ControlServer


class Desk:
    """Handlers that remember; `dawdle` waits until it is let go."""

    def __init__(self) -> None:
        self.causes: list[str] = []
        self.let_go = threading.Event()

    def stop(self, cause: str) -> None:
        self.causes.append(cause)

    def echo(self, arguments: Mapping[str, object]) -> Mapping[str, object]:
        if "bad" in arguments:
            raise BadArguments("expected nothing bad")
        return arguments

    def dawdle(self, arguments: Mapping[str, object]) -> Mapping[str, object]:
        self.let_go.wait(30.0)
        return {}


@pytest.fixture
def desk() -> Desk:
    return Desk()


@pytest.fixture
def path(tmp_path: Path) -> Path:
    return tmp_path / "run" / "control.sock"


def serve(path: Path, desk: Desk) -> ControlServer:
    handlers = {"echo": desk.echo, "dawdle": desk.dawdle}
    return ControlServer(path, handlers, desk.stop, SystemClock())


@pytest.fixture
def server(path: Path, desk: Desk) -> Iterator[ControlServer]:
    served = serve(path, desk)
    yield served
    desk.let_go.set()
    served.close()


def connected(path: Path) -> socket.socket:
    connection = socket.socket(socket.AF_UNIX)
    connection.settimeout(10.0)
    connection.connect(str(path))
    return connection


def ask(
    path: Path, command: str, *, timeout_s: float = 10.0, **arguments: object
) -> dict[str, object]:
    with ControlClient(path, timeout_s) as client:
        return client.request(command, **arguments)


@pytest.mark.usefixtures("server")
def test_a_command_is_fulfilled_or_refused_by_type(path: Path) -> None:
    with ControlClient(path) as client:
        assert client.request("echo", azimuth_deg=123.4) == {"azimuth_deg": 123.4}
        with pytest.raises(RequestFailed, match="expected nothing bad") as failed:
            client.request("echo", bad=1)
        assert failed.value.kind is ErrorKind.BAD_ARGUMENTS
        assert client.request("echo", again=True)["again"] is True


@pytest.mark.usefixtures("server")
def test_a_stop_does_not_wait_behind_a_slow_command(path: Path, desk: Desk) -> None:
    slow = connected(path)
    slow.sendall(b'{"v":1,"command":"dawdle"}\n')
    assert ControlClient(path).emergency_stop("smoke\nfrom the drive") == "stopped"
    assert desk.causes == [
        f"asked for by user {os.getuid()}, process {os.getpid()}: smoke from the drive"
    ]
    slow.close()


@pytest.mark.usefixtures("server")
def test_only_the_owner_and_the_group_may_talk(path: Path) -> None:
    for each in (path, stop_path(path)):
        assert stat.S_IMODE(each.stat().st_mode) == 0o660
    assert stat.S_IMODE(path.parent.stat().st_mode) & stat.S_IRWXO == 0


def test_nothing_is_left_after_a_close(path: Path, desk: Desk) -> None:
    served = serve(path, desk)
    with ControlClient(path) as client:
        client.request("echo")
        served.close()
        served.close()
        with pytest.raises(DaemonSilent):
            client.request("echo")
        with pytest.raises(NoDaemon, match=r"no daemon is listening at .*control\.sock"):
            client.request("echo")
    assert [each.name for each in path.parent.iterdir()] == ["control.sock.lock"]


@pytest.mark.usefixtures("server")
def test_a_living_daemon_keeps_its_path(path: Path, desk: Desk) -> None:
    with pytest.raises(SocketInUse, match="another daemon is listening"):
        serve(path, desk)
    assert ask(path, "echo", still=1)["still"] == 1


def test_the_path_of_a_killed_daemon_is_taken_over(path: Path, desk: Desk) -> None:
    script = (
        "import os, signal, sys; from pathlib import Path\n"
        "from trunnion.service.clock import SystemClock\n"
        "from trunnion.service.control.server import ControlServer\n"
        "server = ControlServer(Path(sys.argv[1]), {}, print, SystemClock())\n"
        "os.kill(os.getpid(), signal.SIGKILL)\n"
    )
    killed = subprocess.run([sys.executable, "-c", script, str(path)], check=False, timeout=60)
    assert killed.returncode < 0
    assert path.is_socket()
    served = serve(path, desk)
    assert ask(path, "echo", alive=1)["alive"] == 1
    served.close()


def test_a_file_of_the_user_s_is_not_removed(path: Path, desk: Desk) -> None:
    path.parent.mkdir()
    path.write_text("precious")
    with pytest.raises(SocketUnusable, match="expected a socket or nothing, got a file"):
        serve(path, desk)
    assert path.read_text() == "precious"


def test_another_program_s_socket_is_not_taken(path: Path, desk: Desk) -> None:
    path.parent.mkdir()
    with socket.socket(socket.AF_UNIX) as other:
        other.bind(str(path))
        other.listen()
        with pytest.raises(SocketInUse, match="another program"):
            serve(path, desk)
    assert path.exists()


def test_a_folder_open_to_everybody_is_refused(path: Path, desk: Desk) -> None:
    path.parent.mkdir()
    path.parent.chmod(0o777)
    with pytest.raises(SocketUnusable, match="not everybody may write"):
        serve(path, desk)


def test_a_path_too_long_for_a_socket_is_refused(tmp_path: Path, desk: Desk) -> None:
    with pytest.raises(SocketUnusable, match="at most 107 bytes"):
        serve(tmp_path / ("long" * 30), desk)


@pytest.mark.usefixtures("server")
@pytest.mark.parametrize("garbage", [b"\x00\xff" * 40 + b"\n", b"z" * 100_000, b"{}" * 3000])
def test_garbage_is_answered_closed_and_harms_nobody(path: Path, garbage: bytes) -> None:
    with connected(path) as vandal:
        with suppress(OSError):  # hung up on in mid-sentence, as it should be
            vandal.sendall(garbage)
        answer = vandal.recv(65536)
    assert b'"error"' in answer
    assert ask(path, "echo", fine=1)["fine"] == 1


@pytest.mark.usefixtures("server")
def test_a_flood_of_connections_keeps_neither_commands_nor_stops_out(
    path: Path, desk: Desk
) -> None:
    flood = [
        connected(each) for _ in range(2 * MOST_CONNECTIONS) for each in (path, stop_path(path))
    ]
    assert ask(path, "echo", through=1)["through"] == 1
    assert ControlClient(path).emergency_stop() == "stopped"
    assert len(desk.causes) == 1
    for each in flood:
        each.close()


@pytest.mark.usefixtures("server")
def test_a_daemon_that_does_not_answer_is_told_apart_from_none(path: Path) -> None:
    with pytest.raises(DaemonSilent, match=r"did not answer within 0\.2 s"):
        ask(path, "dawdle", timeout_s=0.2)


def test_a_daemon_too_busy_to_take_anybody_is_told_apart_from_none(tmp_path: Path) -> None:
    path = tmp_path / "busy.sock"
    with socket.socket(socket.AF_UNIX) as listener:
        listener.bind(str(path))
        listener.listen(0)
        with connected(path), pytest.raises(DaemonSilent, match="too busy"):
            ask(path, "echo", timeout_s=0.2)


def test_an_answer_that_is_none_is_told(tmp_path: Path) -> None:
    path = tmp_path / "odd.sock"
    with socket.socket(socket.AF_UNIX) as listener:
        listener.bind(str(path))
        listener.listen()
        client = ControlClient(path)
        answering = threading.Thread(target=answer_oddly, args=(listener,))
        answering.start()
        with pytest.raises(ControlError, match="expected an answer of this program's daemon"):
            client.request("status")
        answering.join()


def answer_oddly(listener: socket.socket) -> None:
    connection, _ = listener.accept()
    connection.recv(4096)
    connection.sendall(b"220 hello\n")
    connection.close()


def test_a_connection_that_says_nothing_is_closed_in_time(path: Path, desk: Desk) -> None:
    clock = VirtualClock(1_893_456_123.75)
    served = ControlServer(path, {"echo": desk.echo}, desk.stop, clock)
    silent = connected(path)
    ask(path, "echo")
    clock.sleep(LONGEST_SILENCE_S + 1.0)
    ask(path, "echo")
    assert silent.recv(4096) == b""
    silent.close()
    served.close()


@pytest.mark.usefixtures("server")
def test_who_asks_and_does_not_listen_keeps_nobody_waiting(path: Path) -> None:
    deaf = connected(path)
    deaf.settimeout(0.5)
    request = b'{"v":1,"command":"echo","arguments":{"x":"' + b"y" * 3000 + b'"}}\n'
    with pytest.raises(TimeoutError):
        deaf.sendall(1000 * request)
    assert ask(path, "echo", fine=1)["fine"] == 1
    deaf.close()


@pytest.mark.usefixtures("server")
def test_stops_get_through_when_the_process_has_no_file_descriptor_left(
    path: Path, desk: Desk
) -> None:
    waiting = [socket.socket(socket.AF_UNIX) for _ in range(5)]
    limits = resource.getrlimit(resource.RLIMIT_NOFILE)
    resource.setrlimit(resource.RLIMIT_NOFILE, (waiting[-1].fileno() + 1, limits[1]))
    try:
        for number, each in enumerate(waiting):
            each.settimeout(10.0)
            each.connect(str(stop_path(path)))
            if number >= 2:
                each.sendall(b"stop")
                assert each.recv(100) == b"stopped\n"
    finally:
        resource.setrlimit(resource.RLIMIT_NOFILE, limits)
        for each in waiting:
            each.close()
    assert len(desk.causes) == 3
