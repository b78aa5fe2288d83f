"""Against socat's pseudo-terminals, where it is installed: what passes, and how long it takes."""

import os
import shutil
import subprocess
import time
from collections.abc import Iterator
from dataclasses import dataclass
from pathlib import Path
from statistics import median

import pytest

from tests.drivers.benches import DIALECTS, SystemClock, machine
from tests.drivers.mounts import HOME, QUICK
from trunnion_drivers.bench.bench import Bench
from trunnion_drivers.bench.dialect_peer import DialectPeer
from trunnion_drivers.bench.endpoint import PtyEndpoint
from trunnion_drivers.dialect.driver import DialectDriver
from trunnion_drivers.dialect.load import load_dialect
from trunnion_drivers.serial_port.any_port import AnyPort, port_for
from trunnion_drivers.serial_port.settings import PortSettings
from trunnion_drivers.settings import checked

SOCAT = shutil.which("socat")
ROUNDS = 200
LONGEST_ADDED_S = 0.005

pytestmark = pytest.mark.skipif(SOCAT is None, reason="socat is not installed here")


@dataclass
class Cable:
    """A wire of socat's: where its near end is found, and its far end, which is open here."""

    url: str
    far: int

    def fileno(self) -> int:
        return self.far

    def receive(self) -> bytes:
        try:
            return os.read(self.far, 4096)
        except BlockingIOError:
            return b""

    def send(self, data: bytes) -> None:
        os.write(self.far, data)

    def close(self) -> None:
        os.close(self.far)


@pytest.fixture
def cable(tmp_path: Path) -> Iterator[Cable]:
    near, far = tmp_path / "near", tmp_path / "far"
    ends = [f"pty,raw,echo=0,link={end}" for end in (near, far)]
    assert SOCAT is not None
    with subprocess.Popen([SOCAT, *ends]) as socat:
        until_s = time.monotonic() + 5.0
        while not (near.exists() and far.exists()) and time.monotonic() < until_s:
            time.sleep(0.01)
        yield Cable(str(near), os.open(far, os.O_RDWR | os.O_NOCTTY | os.O_NONBLOCK))
        socat.terminate()


def port(url: str) -> AnyPort:
    near = port_for(checked(PortSettings, {"url": url}), SystemClock())
    near.open()
    return near


def there_s(near: AnyPort, far: Cable | PtyEndpoint) -> float:
    """The median time of a question to the far end and of its answer back."""
    taken = []
    for number in range(ROUNDS):
        question = b"%03d?" % number
        begin_s = time.monotonic()
        near.send(question)
        come = b""
        while len(come) < len(question):
            come += far.receive()
        far.send(come)
        answer = b""
        while len(answer) < len(come) and time.monotonic() < begin_s + 1.0:
            answer += near.receive(begin_s + 1.0)
        taken.append(time.monotonic() - begin_s)
        assert answer == question
    return median(taken)


def test_the_bench_s_terminal_is_as_quick_as_a_wire_of_socat(cable: Cable) -> None:
    own = PtyEndpoint()
    near, theirs = port(own.url), port(cable.url)
    try:
        assert there_s(near, own) <= there_s(theirs, cable) + LONGEST_ADDED_S
        assert there_s(theirs, cable) <= there_s(near, own) + LONGEST_ADDED_S
    finally:
        near.close()
        theirs.close()
        own.close()


def test_a_mount_is_driven_over_a_wire_of_socat(cable: Cable) -> None:
    dialect = DIALECTS / "reedmace.yaml"
    peer = DialectPeer(load_dialect(dialect), machine(QUICK))
    settings = {"url": cable.url, "dialect": str(dialect)}
    driver = DialectDriver.from_settings(settings, QUICK, SystemClock())
    with Bench(peer, lambda: cable, SystemClock()):
        driver.open()
        until_s = time.monotonic() + 1.5
        while time.monotonic() < until_s:
            driver.move(HOME._replace(first_deg=21.7))
            driver.read()
            time.sleep(0.05)
        asked_s = time.monotonic()
        taken_s = driver.read().taken_s
        answered_s = time.monotonic()
        assert asked_s <= taken_s <= answered_s
        assert driver.read().first_deg == pytest.approx(21.7, abs=0.01)
        driver.halt()
        driver.close()
