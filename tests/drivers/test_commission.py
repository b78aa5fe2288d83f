"""Commissioning on the bench: right numbers are found right, wrong signs and scales are found."""

import os
import pty
import time
from collections.abc import Callable, Iterator
from pathlib import Path

import pytest

from tests.drivers.benches import DIALECTS, SystemClock, dialect_bench, machine, on_pty
from trunnion_drivers.bench.bench import Bench
from trunnion_drivers.commission.__main__ import main
from trunnion_drivers.commission.operator import AtTerminal
from trunnion_drivers.interface.values import JointFacts, MountFacts
from trunnion_drivers.simulator.faults import HEALTHY, Faults
from trunnion_drivers.simulator.machine import SimulatedMachine

QUICK = MountFacts(
    JointFacts(-263.0, 271.0, 19.5, 31.0), JointFacts(1.5, 91.5, 17.5, 29.0), 17.5, 61.5
)
BRISKLY = ("--creep", "9")

STATION = """\
mount:
  first: {travel_deg: [-263, 271], rate_deg_s: 19.5, acceleration_deg_s2: 31}
  second: {travel_deg: [1.5, 91.5], rate_deg_s: 17.5, acceleration_deg_s2: 29}
  stow_deg: [17.5, 61.5]
safety: {elevation_floor_deg: 5.5}
driver: {kind: dialect, dialect: DIALECT, url: FOLDER/adapter}
"""


class Beside:
    """Somebody who does what they are asked, and looks at the true antenna."""

    def __init__(self, steel: SimulatedMachine) -> None:
        self._steel = steel
        self._before = self._look()
        self.refuses = ""
        self.stops_after = 10**9
        self.looks = 0
        self.heard: list[str] = []

    def tell(self, words: str) -> None:
        self.heard.append(words)

    def agrees(self, question: str) -> bool:
        now_s = SystemClock().monotonic_s()
        self._before = self._look()
        if "Press" in question:
            self._steel.suffer(now_s, Faults(stop_pressed=True))
        elif "stop go" in question:
            self._steel.suffer(now_s, HEALTHY)
        return not (self.refuses and self.refuses in question)

    def number(self, question: str) -> float | None:
        first, second = (b - a for a, b in zip(self._before, self._look(), strict=True))
        return round(first if abs(first) > abs(second) else second, 2)

    def wants_stop(self) -> bool:
        self.looks += 1
        return self.looks > self.stops_after

    def _look(self) -> tuple[float, float]:
        first, second, _, _ = self._steel.true_motion(SystemClock().monotonic_s())
        return first, second


@pytest.fixture
def steel() -> SimulatedMachine:
    return machine(QUICK, encoder_noise_deg=0.0)


@pytest.fixture
def bench(steel: SimulatedMachine, tmp_path: Path) -> Iterator[Bench]:
    with dialect_bench(DIALECTS / "reedmace.yaml", steel, on_pty(tmp_path)) as bench:
        yield bench


@pytest.fixture
def station(bench: Bench, tmp_path: Path) -> Callable[..., Path]:
    def written(*changes: tuple[str, str]) -> Path:
        dialect = (DIALECTS / "reedmace.yaml").read_text()
        for old, new in changes:
            assert old in dialect
            dialect = dialect.replace(old, new, 1)
        (tmp_path / "mine.yaml").write_text(dialect)
        path = tmp_path / "station.yaml"
        path.write_text(STATION.replace("DIALECT", "mine.yaml").replace("FOLDER", str(tmp_path)))
        return path

    return written


def report_in(folder: Path) -> str:
    (path,) = folder.glob("commissioning-*Z.txt")
    return path.read_text()


def test_a_mount_as_described_passes(
    station: Callable[..., Path], steel: SimulatedMachine, tmp_path: Path
) -> None:
    operator = Beside(steel)
    operator.refuses = "limit switch"
    assert main([str(station()), *BRISKLY], operator) == 1
    report = report_in(tmp_path)
    assert report.count("BAD") == 1
    assert "passed over: Hold a limit switch" in report
    assert "CAUTION" in operator.heard[0]
    assert "mount.first.rate_deg_s: 19" in report
    assert "driver.control.latency_s" in report
    assert steel.true_motion(SystemClock().monotonic_s())[:2] == pytest.approx(
        (17.5, 61.5), abs=0.1
    )


def test_a_wrong_sign_and_a_wrong_scale_are_found(
    station: Callable[..., Path], steel: SimulatedMachine, tmp_path: Path
) -> None:
    """In the station's dialect the first joint has twice the units, and the second is reversed."""
    path = station(
        ("  units_per_deg: 1            # Default: 1", "  units_per_deg: 2"),
        (
            "second:\n  units_per_deg: 1",
            "second:\n  units_per_deg: 1\n  reversed: true\n  zero_deg: 93",
        ),
    )
    operator = Beside(steel)
    operator.refuses = "FULL SPEED"
    assert main([str(path), *BRISKLY], operator) == 1
    report = report_in(tmp_path)
    assert "first.units_per_deg: 0.5 times what it is" in report
    assert "wrong scale" in report
    assert "second.reversed: the other value" in report


def test_any_key_halts_the_mount(
    station: Callable[..., Path], steel: SimulatedMachine, tmp_path: Path
) -> None:
    operator = Beside(steel)
    operator.stops_after = 24
    assert main([str(station()), *BRISKLY], operator) == 1
    assert "stopped by a key" in report_in(tmp_path)
    time.sleep(0.7)
    assert steel.true_motion(SystemClock().monotonic_s())[2:] == (0.0, 0.0)


def test_without_the_cautions_nothing_is_done(
    station: Callable[..., Path], steel: SimulatedMachine, tmp_path: Path
) -> None:
    operator = Beside(steel)
    operator.refuses = "All of this"
    before = steel.true_motion(SystemClock().monotonic_s())
    assert main([str(station()), *BRISKLY], operator) == 1
    assert steel.true_motion(SystemClock().monotonic_s()) == before


def test_a_lost_link_ends_it_with_a_report(
    station: Callable[..., Path], bench: Bench, steel: SimulatedMachine, tmp_path: Path
) -> None:
    bench.pull()
    assert main([str(station()), *BRISKLY], Beside(steel)) == 1
    assert "ended early" in report_in(tmp_path)


def test_an_unknown_driver_is_told(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    path = tmp_path / "station.yaml"
    path.write_text(STATION.replace("kind: dialect", "kind: dialekt"))
    assert main([str(path)]) == 1
    assert "'dialekt'" in capsys.readouterr().err


def test_a_key_at_a_terminal_is_seen_without_return(monkeypatch: pytest.MonkeyPatch) -> None:
    near, far = pty.openpty()
    with os.fdopen(far, "r") as terminal:
        monkeypatch.setattr("sys.stdin", terminal)
        operator = AtTerminal()
        assert not operator.wants_stop()
        os.write(near, b"x")
        time.sleep(0.05)
        assert operator.wants_stop()
    os.close(near)


@pytest.mark.parametrize("creep", ["0", "-1.3", "10.1", "nan", "inf"])
def test_a_slow_motion_is_slow(creep: str, capsys: pytest.CaptureFixture[str]) -> None:
    with pytest.raises(SystemExit):
        main(["station.yaml", f"--creep={creep}"])
    assert f"expected more than 0 and at most 10, got {creep}" in capsys.readouterr().err
