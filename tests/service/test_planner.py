"""Planning in a child process."""

import subprocess
import sys
import time
from collections.abc import Callable
from pathlib import Path

import pytest

from tests.service.planner_work import dawdle, die, double, refuse
from trunnion.service.planner import Outcome, Planner, PlannerDied


def outcome_of(planner: Planner[float, float]) -> Outcome[float]:
    """Wait for a real child process; no virtual clock reaches it."""
    until_s = time.monotonic() + 60.0
    while time.monotonic() < until_s:
        if outcome := planner.collect():
            return outcome
        time.sleep(0.01)
    raise AssertionError("expected an outcome within 60 s")


def test_the_child_answers() -> None:
    planner = Planner(double)
    planner.ask(20.7)
    assert outcome_of(planner) == Outcome(41.4, None)
    assert planner.collect() is None
    assert not planner.is_busy


@pytest.mark.parametrize(("work", "error"), [(refuse, ValueError), (die, PlannerDied)])
def test_what_went_wrong_in_the_child_is_told(
    work: Callable[[float], float], error: type[Exception]
) -> None:
    planner = Planner(work)
    planner.ask(7.3)
    outcome = outcome_of(planner)
    assert outcome.result is None
    assert isinstance(outcome.error, error)


def test_the_newest_order_counts() -> None:
    planner = Planner(dawdle)
    planner.ask(50.3)
    planner.ask(0.13)
    assert outcome_of(planner) == Outcome(0.13, None)


def test_closing_ends_the_child() -> None:
    planner = Planner(dawdle)
    planner.ask(50.3)
    planner.close()
    assert not planner.is_busy
    assert planner.collect() is None


def test_a_child_does_not_outlive_its_parent(tmp_path: Path) -> None:
    script = (
        "import sys, time\n"
        "from tests.service.planner_work import sign_and_dawdle\n"
        "from trunnion.service.planner import Planner\n"
        "if __name__ == '__main__':\n"
        "    Planner(sign_and_dawdle).ask(sys.argv[1])\n"
        "    time.sleep(300.0)\n"
    )
    signature = tmp_path / "signature"
    command = [sys.executable, "-c", script, str(signature)]
    parent = subprocess.Popen(command, cwd=Path(__file__).parents[2])
    wait_until(lambda: signature.exists() and signature.read_text() != "")
    child = Path("/proc") / signature.read_text()
    assert child.exists()
    parent.kill()
    parent.wait()
    wait_until(lambda: has_ended(child))


def has_ended(process: Path) -> bool:
    try:
        return "State:\tZ" in (process / "status").read_text()
    except (FileNotFoundError, ProcessLookupError):
        return True


def wait_until(is_so: Callable[[], bool]) -> None:
    until_s = time.monotonic() + 60.0
    while not is_so():
        assert time.monotonic() < until_s
        time.sleep(0.02)
