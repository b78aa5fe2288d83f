"""Taking the power from the motors, over the link."""

from dataclasses import dataclass, field

import pytest

from tests.service.link.scripted import ScriptedDriver
from trunnion.mount.joints import Motion
from trunnion.safety.verdict import Move
from trunnion.service.clock import VirtualClock
from trunnion.service.link.direct import DirectLink
from trunnion_drivers.interface.errors import LinkLost, NoReply

MOVE = Move(Motion(-148.25, 33.5, 0.31, 0.17))


@dataclass
class Rig:
    """A link to a mount whose motors can lose their power, up and moving."""

    cuts_power: bool = True
    clock: VirtualClock = field(default_factory=lambda: VirtualClock(1_893_456_123.75, 41.5))

    def __post_init__(self) -> None:
        self.driver = ScriptedDriver(self.clock, cuts_power=self.cuts_power)
        self.link = DirectLink(self.driver, self.clock)
        self.turns(3)

    def turns(self, count: int) -> list[str]:
        """What the driver was asked in so many control turns."""
        self.driver.calls.clear()
        for _ in range(count):
            self.clock.sleep(0.125)
            self.link.newest()
            self.link.submit(MOVE)
        return self.driver.calls


def test_it_is_cut_once_and_comes_back_with_the_reset() -> None:
    rig = Rig()
    rig.link.emergency_halt()
    rig.link.cut_power()
    assert rig.driver.calls[-2:] == ["halt", "cut power"]
    assert rig.link.status.is_power_cut
    rig.link.cut_power()
    assert "cut power" not in rig.turns(4)
    rig.link.release()
    assert "open" not in rig.driver.calls
    calls = rig.turns(4)
    assert calls[:2] == ["read", "close"]
    assert calls[2:5] == ["open", "halt", "read"]
    assert calls[-1] == "move"
    assert not rig.link.status.is_power_cut


def test_without_a_stop_it_is_never_cut() -> None:
    rig = Rig()
    rig.link.cut_power()
    assert "cut power" not in rig.turns(3)


def test_a_mount_that_cannot_is_left_alone() -> None:
    rig = Rig(cuts_power=False)
    rig.link.emergency_halt()
    rig.link.cut_power()
    assert "cut power" not in rig.turns(3)
    assert not rig.link.status.is_power_cut


def test_an_attempt_that_failed_is_repeated() -> None:
    rig = Rig()
    rig.driver.fail("cut power", NoReply("a hiccup"))
    rig.link.emergency_halt()
    rig.link.cut_power()
    assert not rig.link.status.is_power_cut
    assert rig.turns(1) == ["read", "halt", "cut power"]
    assert rig.link.status.is_power_cut


def test_a_halt_that_fails_does_not_stand_in_the_way() -> None:
    rig = Rig()
    rig.driver.fail("halt", *[NoReply("busy")] * 2)
    rig.link.emergency_halt()
    rig.link.cut_power()
    assert rig.link.status.is_power_cut


@pytest.mark.parametrize("error", [LinkLost("the controller is dead too"), NoReply("silence")])
def test_a_controller_that_goes_with_it_is_not_opened_anew_which_would_give_it_back(
    error: Exception,
) -> None:
    rig = Rig()
    rig.link.emergency_halt()
    rig.link.cut_power()
    rig.driver.fail("read", *[error] * 30)
    assert "open" not in rig.turns(30)
    rig.link.release()
    calls = rig.turns(30)
    assert "open" in calls
    assert calls[-1] == "move"


def test_a_link_that_was_lost_before_is_cut_once_it_is_back() -> None:
    rig = Rig()
    rig.driver.fail("read", LinkLost("unplugged"))
    rig.driver.fail("open", *[LinkLost("still unplugged")] * 2)
    rig.turns(1)
    rig.link.emergency_halt()
    rig.link.cut_power()
    calls = rig.turns(20)
    assert calls.count("cut power") == 1
    assert calls.index("cut power") > calls.index("halt")
