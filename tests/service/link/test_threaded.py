"""The link with a thread of its own, against real time."""

import threading
import time
from collections.abc import Callable, Iterator

import pytest

from tests.service.link.scripted import ScriptedDriver
from trunnion.mount.joints import Motion
from trunnion.safety.verdict import Halt, Move
from trunnion.service.clock import SystemClock
from trunnion.service.link.status import LinkState
from trunnion.service.link.threaded import ThreadedLink
from trunnion_drivers.interface.errors import Garbled, LinkLost
from trunnion_drivers.interface.values import DriverMotion

POLL_S = 0.005


class SlowDriver(ScriptedDriver):
    """A driver whose motions hang until they are let through."""

    def __init__(self) -> None:
        super().__init__(SystemClock())
        self.gate = threading.Event()
        self.gate.set()
        self.has_begun = threading.Event()

    def _halt_at_once(self) -> bool:
        self._note("halt at once")
        return True

    def _move(self, motion: DriverMotion) -> None:
        self.has_begun.set()
        self.gate.wait(30.0)
        super()._move(motion)


@pytest.fixture
def driver() -> SlowDriver:
    return SlowDriver()


@pytest.fixture
def link(driver: SlowDriver) -> Iterator[ThreadedLink]:
    opened = ThreadedLink(driver, SystemClock(), POLL_S)
    until(lambda: opened.newest() is not None)
    yield opened
    driver.gate.set()
    opened.close()


def until(is_so: Callable[[], bool]) -> None:
    """Wait for the link's thread; no virtual clock reaches it."""
    end_s = time.monotonic() + 30.0
    while not is_so():
        assert time.monotonic() < end_s, "expected it within 30 s"
        time.sleep(0.001)


def move(first_deg: float) -> Move:
    return Move(Motion(first_deg, 33.5, 0.31, 0.17))


def test_it_reads_by_itself(driver: SlowDriver, link: ThreadedLink) -> None:
    before = link.newest()
    until(lambda: link.newest() != before)
    assert driver.calls[:3] == ["open", "halt", "read"]
    assert "move" not in driver.calls


def test_the_newest_order_wins(driver: SlowDriver, link: ThreadedLink) -> None:
    driver.gate.clear()
    link.submit(move(1.5))
    driver.has_begun.wait(30.0)
    for first_deg in (2.5, 3.5, 4.5):
        link.submit(move(first_deg))
    driver.gate.set()
    until(lambda: len(driver.moves) == 2)
    assert [motion.first_deg for motion in driver.moves] == [1.5, 4.5]


def test_an_emergency_overtakes_what_waits(driver: SlowDriver, link: ThreadedLink) -> None:
    driver.gate.clear()
    link.submit(move(1.5))
    driver.has_begun.wait(30.0)
    link.submit(move(2.5))
    link.emergency_halt()
    link.submit(move(3.5))
    driver.gate.set()
    until(lambda: driver.calls.count("halt") >= 5)
    assert [motion.first_deg for motion in driver.moves] == [1.5]
    after = driver.calls[driver.calls.index("move") :]
    assert after[:3] == ["move", "read", "halt"]
    link.release()
    time.sleep(4 * POLL_S)
    assert len(driver.moves) == 1
    link.submit(move(5.5))
    until(lambda: len(driver.moves) == 2)


def test_an_emergency_does_not_wait_for_the_call_under_way(
    driver: SlowDriver, link: ThreadedLink
) -> None:
    driver.gate.clear()
    link.submit(move(1.5))
    driver.has_begun.wait(30.0)
    link.emergency_halt()
    assert driver.calls[-1] == "halt at once"
    assert driver.moves == []


def test_a_driver_that_fails_to_halt_at_once_is_halted_in_turn(
    driver: SlowDriver, link: ThreadedLink
) -> None:
    driver.fail("halt at once", ZeroDivisionError())
    before = driver.calls.count("halt")
    link.emergency_halt()
    until(lambda: driver.calls.count("halt") > before)
    assert link.status.state is LinkState.UP


def test_an_emergency_from_many_threads_at_once_is_one(
    driver: SlowDriver, link: ThreadedLink
) -> None:
    threads = [threading.Thread(target=link.emergency_halt) for _ in range(20)]
    for thread in threads:
        thread.start()
    for thread in threads:
        thread.join()
    link.submit(move(1.5))
    until(lambda: driver.calls.count("halt") >= 3)
    assert driver.moves == []


def test_it_survives_whatever_a_driver_raises(driver: SlowDriver, link: ThreadedLink) -> None:
    driver.fail("read", ZeroDivisionError(), KeyError("x"), LinkLost("gone"))
    driver.fail("close", RuntimeError("cannot close"))
    until(lambda: link.status.failures >= 4 and link.status.state is LinkState.UP)
    link.newest()
    link.submit(move(1.5))
    until(lambda: len(driver.moves) == 1)


def test_closing_halts_and_ends_the_thread(driver: SlowDriver, link: ThreadedLink) -> None:
    link.submit(Halt())
    link.close()
    link.close()
    assert driver.calls[-2:] == ["halt", "close"]
    assert link.status.state is LinkState.CLOSED


def test_a_driver_that_hangs_does_not_keep_anybody_from_ending(
    driver: SlowDriver, link: ThreadedLink
) -> None:
    driver.gate.clear()
    link.submit(move(1.5))
    driver.has_begun.wait(30.0)
    begin_s = time.monotonic()
    link.close()
    assert time.monotonic() - begin_s < 20.0


def test_a_change_of_the_link_is_logged_once_with_its_reason(
    driver: SlowDriver, link: ThreadedLink, caplog: pytest.LogCaptureFixture
) -> None:
    caplog.set_level("INFO")
    driver.fail("read", *[Garbled("noise")] * 3)
    until(lambda: link.status.failures == 3 and link.status.state is LinkState.UP)
    until(lambda: len(caplog.messages) == 2)
    assert caplog.messages == ["the mount's answer cannot be trusted: noise", "the mount answers"]
