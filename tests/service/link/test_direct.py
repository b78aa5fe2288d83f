"""What every link promises, in virtual time."""

from itertools import pairwise

import pytest

from tests.service.link.scripted import ScriptedDriver
from trunnion.mount.joints import Motion, Reading
from trunnion.safety.verdict import Halt, Move
from trunnion.service.clock import VirtualClock
from trunnion.service.link.backoff import FIRST_PAUSE_S, LONGEST_PAUSE_S
from trunnion.service.link.direct import DirectLink
from trunnion.service.link.status import LinkState, LinkStatus
from trunnion_drivers.interface.errors import (
    Garbled,
    LinkLost,
    NoReply,
    Refused,
    WrongState,
)
from trunnion_drivers.interface.values import DriverMotion

MOVE = Move(Motion(-148.25, 33.5, 0.31, 0.17))


@pytest.fixture
def clock() -> VirtualClock:
    return VirtualClock(1_893_456_123.75, monotonic_s=41.5)


@pytest.fixture
def driver(clock: VirtualClock) -> ScriptedDriver:
    return ScriptedDriver(clock)


@pytest.fixture
def link(driver: ScriptedDriver, clock: VirtualClock) -> DirectLink:
    return DirectLink(driver, clock)


def turn(link: DirectLink, clock: VirtualClock, order: Move | Halt = MOVE) -> Reading | None:
    """One control turn as the link sees it."""
    clock.sleep(0.125)
    reading = link.newest()
    link.submit(order)
    return reading


def test_building_a_link_touches_no_hardware(driver: ScriptedDriver, link: DirectLink) -> None:
    assert driver.calls == []
    assert link.status == LinkStatus()
    assert not link.status.is_up


def test_it_opens_halts_reads_and_then_moves(
    driver: ScriptedDriver, link: DirectLink, clock: VirtualClock
) -> None:
    assert turn(link, clock) == Reading(41.625, -148.5, 33.05)
    assert driver.calls == ["open", "halt", "read", "move"]
    assert driver.moves == [DriverMotion(*MOVE.motion)]
    assert link.status == LinkStatus(LinkState.UP, connections=1)


def test_a_motion_ordered_before_anything_was_seen_goes_nowhere(
    driver: ScriptedDriver, link: DirectLink
) -> None:
    link.submit(MOVE)
    assert driver.calls == ["open", "halt"]
    link.newest()
    assert driver.calls == ["open", "halt", "read"]


def test_one_instant_has_one_reading(
    driver: ScriptedDriver, link: DirectLink, clock: VirtualClock
) -> None:
    assert link.newest() == link.newest()
    assert driver.calls.count("read") == 1
    clock.sleep(0.125)
    link.newest()
    assert driver.calls.count("read") == 2


@pytest.mark.parametrize(
    ("error", "state", "is_up"),
    [
        (NoReply("expected an answer within 1 s, got none"), LinkState.SILENT, True),
        (Garbled("expected two angles, got noise"), LinkState.GARBLED, True),
        (LinkLost("expected a port, got none"), LinkState.DOWN, False),
        (WrongState("read: expected an open driver"), LinkState.BROKEN, False),
        (ZeroDivisionError("division by zero"), LinkState.BROKEN, False),
        (OSError(5, "input/output error"), LinkState.DOWN, False),
    ],
)
def test_a_failed_reading_is_told_by_blame_and_the_old_one_stays(
    driver: ScriptedDriver,
    link: DirectLink,
    clock: VirtualClock,
    error: Exception,
    state: LinkState,
    is_up: bool,
) -> None:
    before = turn(link, clock)
    driver.fail("read", error)
    clock.sleep(0.125)
    assert link.newest() == before
    status = link.status
    assert (status.state, status.is_up) == (state, is_up)
    assert (status.failures, status.failures_in_row) == (1, 1)
    assert str(error) in str(status.last_error)


def test_a_cured_link_is_up_and_its_last_error_can_still_be_read(
    driver: ScriptedDriver, link: DirectLink, clock: VirtualClock
) -> None:
    turn(link, clock)
    driver.fail("read", Garbled("noise"), Garbled("noise"))
    for _ in range(3):
        turn(link, clock)
    assert link.status == LinkStatus(LinkState.UP, 0, 2, 1, "noise")
    assert driver.calls.count("open") == 1


def test_a_link_that_stays_garbled_is_not_up_and_is_opened_anew(
    driver: ScriptedDriver, link: DirectLink, clock: VirtualClock
) -> None:
    turn(link, clock)
    driver.fail("read", *[Garbled("noise")] * 5)
    states = []
    for _ in range(5):
        turn(link, clock)
        states.append(link.status.is_up)
    assert states == [True, True, False, False, False]
    assert driver.calls.count("close") == 1
    clock.sleep(FIRST_PAUSE_S)
    turn(link, clock)
    assert (link.status.state, link.status.connections) == (LinkState.UP, 2)


def test_a_refused_motion_is_told_until_an_order_is_taken(
    driver: ScriptedDriver, link: DirectLink, clock: VirtualClock
) -> None:
    turn(link, clock)
    driver.fail("move", Refused("expected the brake released"))
    turn(link, clock)
    clock.sleep(0.125)
    link.newest()
    assert (link.status.state, link.status.is_up) == (LinkState.REFUSING, False)
    turn(link, clock, Halt())
    clock.sleep(0.125)
    link.newest()
    assert (link.status.state, link.status.is_up) == (LinkState.UP, True)
    assert "close" not in driver.calls


def test_after_a_reconnect_only_a_halt_leaves_until_somebody_has_looked(
    driver: ScriptedDriver, link: DirectLink, clock: VirtualClock
) -> None:
    turn(link, clock)
    driver.fail("read", LinkLost("unplugged"))
    driver.calls.clear()
    turn(link, clock)
    assert driver.calls == ["read", "close", "open", "halt"]
    link.submit(Halt())
    link.submit(MOVE)
    assert driver.calls[4:] == ["halt"]
    turn(link, clock)
    assert driver.calls[5:] == ["read", "move"]


def test_attempts_to_open_come_further_and_further_apart_within_a_bound(
    driver: ScriptedDriver, link: DirectLink, clock: VirtualClock
) -> None:
    driver.fail("open", *[LinkLost("no such port")] * 1000)
    attempts_s: list[float] = []
    while clock.monotonic_s() < 41.5 + 60.0:
        before = driver.calls.count("open")
        turn(link, clock)
        if driver.calls.count("open") > before:
            attempts_s.append(clock.monotonic_s())
    pauses_s = [b - a for a, b in pairwise(attempts_s)]
    assert pauses_s == sorted(pauses_s)
    assert pauses_s[0] == pytest.approx(FIRST_PAUSE_S, abs=0.126)
    assert LONGEST_PAUSE_S <= pauses_s[-1] <= LONGEST_PAUSE_S + 0.125
    assert link.status.state is LinkState.DOWN


def test_a_port_that_opens_and_fails_at_once_is_not_opened_at_every_turn(
    driver: ScriptedDriver, link: DirectLink, clock: VirtualClock
) -> None:
    driver.fail("read", *[LinkLost("gone again")] * 1000)
    for _ in range(400):
        turn(link, clock)
    assert driver.calls.count("open") < 40


def test_an_emergency_halts_at_once_and_bars_motion_until_released(
    driver: ScriptedDriver, link: DirectLink, clock: VirtualClock
) -> None:
    turn(link, clock)
    driver.calls.clear()
    link.emergency_halt()
    assert driver.calls == ["halt"]
    turn(link, clock)
    link.emergency_halt()
    assert driver.calls == ["halt", "read", "halt", "halt"]
    link.release()
    assert driver.calls[-1] == "halt"
    turn(link, clock)
    assert driver.calls[-2:] == ["read", "move"]


def test_an_emergency_while_the_link_is_down_halts_when_it_is_back(
    driver: ScriptedDriver, link: DirectLink, clock: VirtualClock
) -> None:
    turn(link, clock)
    driver.fail("read", LinkLost("unplugged"))
    driver.fail("open", LinkLost("still unplugged"))
    turn(link, clock)
    link.emergency_halt()
    driver.calls.clear()
    for _ in range(20):
        turn(link, clock)
    assert driver.calls[:4] == ["open", "halt", "read", "halt"]
    assert "move" not in driver.calls


def test_what_the_mount_says_beside_its_angles_is_told(
    driver: ScriptedDriver, link: DirectLink, clock: VirtualClock
) -> None:
    driver.stop_pressed = True
    turn(link, clock)
    assert link.status.stop_pressed


def test_closing_halts_first_and_may_be_repeated(
    driver: ScriptedDriver, link: DirectLink, clock: VirtualClock
) -> None:
    turn(link, clock)
    driver.calls.clear()
    driver.fail("halt", LinkLost("unplugged"))
    link.close()
    link.close()
    assert driver.calls == ["halt", "close"]
    assert link.status.state is LinkState.CLOSED
