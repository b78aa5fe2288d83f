"""Controllers with habits: they echo, report unasked, are switched, fall silent, refuse."""

import time
from collections.abc import Iterator
from contextlib import ExitStack
from enum import Enum
from pathlib import Path
from typing import Any, NamedTuple

import pytest

from tests.drivers.benches import DIALECTS, SystemClock, machine, on_pty
from tests.drivers.mounts import HOME, QUICK
from trunnion_drivers.bench.bench import Bench
from trunnion_drivers.bench.dialect_peer import DialectPeer
from trunnion_drivers.dialect.driver import DialectDriver
from trunnion_drivers.dialect.load import load_dialect
from trunnion_drivers.interface.driver import Driver
from trunnion_drivers.interface.errors import Garbled, LinkLost, NoReply, Refused
from trunnion_drivers.interface.values import DriverMotion, JointFacts, MountFacts
from trunnion_drivers.simulator.faults import Faults, JointFault
from trunnion_drivers.simulator.machine import SimulatedMachine

ECHOING = """\
format: 1
name: Two messages a move, each of which comes back
coding: text
end: "\\r"
echo: true
follows_rate: false
commands:
  read:
    - {send: "a", reply: "a={first:.3f}"}
    - {send: "e", reply: "e={second:.3f}"}
  move:
    - {send: "a{first:+08.3f}", reply: "ok"}
    - {send: "e{second:+08.3f}", reply: "ok"}
  halt: [{send: "halt", reply: "ok"}]
refusals: ["no"]
"""
SWITCHED = """\
format: 1
name: Switched motors, and reports that nobody asked for
coding: text
begin: "<"
end: ">"
command: on-off
commands:
  halt: [{send: "00"}]
  first_up: [{send: "1+"}]
  first_down: [{send: "1-"}]
  first_off: [{send: "10"}]
  second_up: [{send: "2+"}]
  second_down: [{send: "2-"}]
  second_off: [{send: "20"}]
reports: ["{first:+07.2f} {second:+07.2f} {flags:02X}"]
flags: {at_limit: 1, stop_pressed: 2}
"""
REEDMACE = (DIALECTS / "reedmace.yaml").read_text()
BRISK = MountFacts(
    JointFacts(-263.7, 271.3, 4.0, 40.0), JointFacts(1.7, 91.9, 4.0, 40.0), 17.3, 61.9
)


class Mood(Enum):
    FINE = "fine"
    SILENT = "silent"
    LATE = "late"


class MoodyPeer:
    """A controller that hears everything, and answers as its mood is."""

    def __init__(self, peer: DialectPeer) -> None:
        self._peer = peer
        self.mood = Mood.FINE

    def hear(self, mono_s: float, come: bytes) -> bytes:
        said = self._peer.hear(mono_s, come)
        if self.mood is Mood.LATE:
            time.sleep(0.32)
        return b"" if self.mood is Mood.SILENT else said

    def says_unasked(self, mono_s: float) -> bytes:
        return self._peer.says_unasked(mono_s)


class Far(NamedTuple):
    """A driver not opened yet, and what is at the far end of its wire."""

    driver: DialectDriver
    steel: SimulatedMachine
    peer: MoodyPeer


class Bays:
    """Builds both ends of a wire; they may read different files."""

    def __init__(self, folder: Path, stack: ExitStack) -> None:
        self._folder = folder
        self._stack = stack

    def build(
        self, text: str, facts: MountFacts, near_text: str | None = None, **settings: Any
    ) -> Far:
        far, near = self._folder / "far.yaml", self._folder / "near.yaml"
        far.write_text(text)
        near.write_text(near_text or text)
        steel = machine(facts)
        peer = MoodyPeer(DialectPeer(load_dialect(far), steel))
        bench = self._stack.enter_context(Bench(peer, on_pty(self._folder), SystemClock()))
        driver = DialectDriver.from_settings(
            {"url": bench.url, "dialect": str(near), **settings}, facts, SystemClock()
        )
        self._stack.callback(driver.close)
        return Far(driver, steel, peer)


@pytest.fixture
def bays(tmp_path: Path) -> Iterator[Bays]:
    with ExitStack() as stack:
        yield Bays(tmp_path, stack)


def go(driver: Driver, goal: DriverMotion, lasts_s: float) -> None:
    until_s = time.monotonic() + lasts_s
    while time.monotonic() < until_s:
        driver.move(goal)
        driver.read()
        time.sleep(0.05)


def test_one_that_echoes(bays: Bays) -> None:
    driver = bays.build(ECHOING, QUICK).driver
    driver.open()
    go(driver, HOME._replace(first_deg=21.1, second_deg=59.3), 1.2)
    assert driver.read()[1:3] == pytest.approx((21.1, 59.3), abs=0.05)
    driver.halt()


def test_one_that_echoes_although_nobody_said_so(bays: Bays) -> None:
    driver = bays.build(ECHOING, QUICK, ECHOING.replace("echo: true\n", "")).driver
    driver.open()
    assert driver.read()[1:3] == pytest.approx((17.3, 61.9), abs=0.01)


def test_one_that_is_switched_and_reports_unasked(bays: Bays) -> None:
    driver = bays.build(SWITCHED, BRISK, control={"threshold_deg": 0.3}).driver
    driver.open()
    assert driver.capabilities.reports_stop_input
    go(driver, HOME._replace(first_deg=22.1, second_deg=59.3), 4.0)
    assert driver.read()[1:3] == pytest.approx((22.1, 59.3), abs=0.8)
    driver.move(HOME)
    driver.halt()
    time.sleep(0.5)
    resting = driver.read()
    time.sleep(0.3)
    assert driver.read()[1:3] == pytest.approx(resting[1:3], abs=0.02)


def test_one_that_falls_silent_and_comes_back(bays: Bays) -> None:
    driver, _, peer = bays.build(ECHOING, QUICK)
    driver.open()
    peer.mood = Mood.SILENT
    with pytest.raises(NoReply, match=r"within 0\.3 s|echo"):
        driver.read()
    peer.mood = Mood.FINE
    assert driver.read().first_deg == pytest.approx(17.3, abs=0.01)


def test_one_that_answers_late_to_the_last_question(bays: Bays) -> None:
    driver, steel, peer = bays.build(REEDMACE, QUICK)
    driver.open()
    peer.mood = Mood.LATE
    with pytest.raises(NoReply):
        driver.read()
    peer.mood = Mood.FINE
    steel.command(SystemClock().monotonic_s(), HOME._replace(first_deg=20.0))
    time.sleep(1.0)
    assert driver.read().first_deg == pytest.approx(20.0, abs=0.01)


def test_one_that_speaks_another_dialect_is_not_opened(bays: Bays) -> None:
    other = REEDMACE.replace("kind: xor8", "kind: sum8")
    driver, steel, _ = bays.build(REEDMACE, QUICK, other)
    with pytest.raises((Garbled, NoReply, Refused)):
        driver.open()
    assert not driver.is_open
    assert steel.true_motion(SystemClock().monotonic_s())[2:] == (0.0, 0.0)


def test_one_that_refuses(bays: Bays) -> None:
    driver = bays.build(REEDMACE, QUICK, REEDMACE.replace('"G{first', '"J{first')).driver
    driver.open()
    with pytest.raises(Refused, match=r"\?01"):
        go(driver, HOME, 1.0)
    driver.halt()


def test_one_that_reports_in_another_unit_is_not_believed_to_be_elsewhere(bays: Bays) -> None:
    """A text of another shape is no answer; one of the same shape only commissioning finds."""
    tenths = REEDMACE.replace(
        "{first:+09.3f}{second:+09.3f}{flags", "{first:+09.1f}{second:+09.1f}{flags"
    )
    driver = bays.build(tenths, QUICK, REEDMACE).driver
    driver.open()
    with pytest.raises(Garbled, match="understood"):
        driver.read()


def test_one_that_starts_again_with_its_encoder_at_zero_is_read_as_it_says(bays: Bays) -> None:
    """The driver hides no jump, so that the gate, which looks for them, sees it."""
    driver, steel, _ = bays.build(REEDMACE, QUICK)
    driver.open()
    before = driver.read()
    zeroed = Faults(offsets_deg=(-17.3, 0.0))
    steel.suffer(SystemClock().monotonic_s(), zeroed)
    driver.close()
    driver.open()
    after = driver.read()
    assert (before.first_deg, after.first_deg) == pytest.approx((17.3, 0.0), abs=0.01)
    assert after.second_deg == pytest.approx(before.second_deg, abs=0.01)
    assert steel.true_motion(SystemClock().monotonic_s())[2:] == (0.0, 0.0)


def test_one_that_runs_on_after_a_stop_is_read_while_it_does(bays: Bays) -> None:
    driver, steel, _ = bays.build(REEDMACE, QUICK)
    driver.open()
    away = Faults(joints=(JointFault.UNSTOPPABLE, JointFault.NONE))
    steel.suffer(SystemClock().monotonic_s(), away)
    driver.halt()
    first = driver.read()
    time.sleep(0.3)
    then = driver.read()
    assert then.first_deg > first.first_deg + 1.0
    driver.cut_power()
    time.sleep(0.5)
    assert not steel.is_powered
    assert steel.true_motion(SystemClock().monotonic_s())[2:] == (0.0, 0.0)


def test_a_wrong_device_on_the_port_is_no_mount(tmp_path: Path) -> None:
    (tmp_path / "file").write_text("not a port")
    settings = {"url": str(tmp_path / "file"), "dialect": str(DIALECTS / "reedmace.yaml")}
    driver = DialectDriver.from_settings(settings, QUICK, SystemClock())
    with pytest.raises(LinkLost):
        driver.open()


def test_each_example_is_named() -> None:
    names = {load_dialect(path).name for path in DIALECTS.glob("*.yaml")}
    assert names == {"Reedmace", "Plover"}
