"""Emergency stops: halted first, kept on disk, lifted only when the cause is gone."""

from dataclasses import dataclass, field

import pytest

from trunnion.safety.emergency import EmergencyStop
from trunnion.service.clock import VirtualClock
from trunnion.service.emergency_desk import EmergencyDesk, StopNotLifted

UTC_S = 1_796_083_217.3


@dataclass
class Log:
    """A link, a disk and an ear, which note what happens to them in one list."""

    kept: EmergencyStop | None = None
    disk_trouble: str | None = None
    said: list[str] = field(default_factory=list)

    def emergency_halt(self) -> None:
        self.said.append("halt")

    def release(self) -> None:
        self.said.append("release")

    def read(self) -> EmergencyStop | None:
        return self.kept

    def write(self, stop: EmergencyStop) -> str | None:
        self.said.append("write")
        if self.disk_trouble is None:
            self.kept = stop
        return self.disk_trouble

    def clear(self) -> str | None:
        self.said.append("clear")
        if self.disk_trouble is None:
            self.kept = None
        return self.disk_trouble

    def tell(self, sentence: str) -> None:
        self.said.append(sentence)


def desk_of(log: Log) -> EmergencyDesk:
    desk = EmergencyDesk(log, VirtualClock(UTC_S), log.tell)
    desk.attach(log)
    return desk


def test_the_halt_comes_before_anything_that_could_block() -> None:
    log = Log()
    desk = desk_of(log)
    desk.stop("button at the south door")
    assert log.said == ["halt", "write", "emergency stop: button at the south door"]
    assert desk.latched == EmergencyStop("button at the south door", UTC_S)


def test_a_second_stop_halts_again_and_keeps_the_first_cause() -> None:
    log = Log()
    desk = desk_of(log)
    desk.stop("first")
    desk.stop("second")
    assert log.said.count("halt") == 2
    assert desk.latched is not None
    assert desk.latched.cause == "first"


def test_a_stop_from_before_the_start_bars_the_link_as_soon_as_there_is_one() -> None:
    log = Log(kept=EmergencyStop("yesterday", UTC_S - 86400.0))
    desk = EmergencyDesk(log, VirtualClock(UTC_S), log.tell)
    assert desk.latched == log.kept
    desk.attach(log)
    assert log.said == ["halt", "still stopped since before this start: yesterday"]


def test_a_stop_may_come_before_there_is_a_link() -> None:
    log = Log()
    desk = EmergencyDesk(log, VirtualClock(UTC_S), log.tell)
    desk.stop("early")
    desk.attach(log)
    assert "halt" in log.said


def test_a_disk_that_fails_leaves_it_latched_and_is_told() -> None:
    log = Log(disk_trouble="no space left")
    desk = desk_of(log)
    desk.stop("button")
    assert desk.latched is not None
    assert log.said[-1] == "the stop holds, but a restart would forget it: no space left"


def test_a_disk_that_keeps_the_stop_but_not_its_cause_is_told_apart() -> None:
    log = Log()
    desk = desk_of(log)
    log.disk_trouble, log.kept = "no space left", EmergencyStop("a damaged file", 0.0)
    desk.stop("button")
    assert log.said[-1] == "the stop holds, but a restart would forget its cause: no space left"


def test_a_reset_lifts_it_on_disk_before_the_link_is_released() -> None:
    log = Log()
    desk = desk_of(log)
    desk.stop("button")
    desk.reset(None)
    assert log.said[3:5] == ["clear", "release"]
    assert (desk.latched, log.kept) == (None, None)


def test_a_reset_is_refused_while_the_cause_is_there() -> None:
    log = Log()
    desk = desk_of(log)
    desk.stop("button")
    with pytest.raises(StopNotLifted, match="the button is pressed"):
        desk.reset("the button is pressed")
    assert "release" not in log.said
    assert desk.latched is not None


def test_a_latch_that_cannot_be_removed_stays_in_force() -> None:
    log = Log()
    desk = desk_of(log)
    desk.stop("button")
    log.disk_trouble = "read-only file system"
    with pytest.raises(StopNotLifted, match="read-only file system"):
        desk.reset(None)
    assert "release" not in log.said
    assert desk.latched is not None


def test_a_reset_of_nothing_does_nothing() -> None:
    log = Log()
    desk_of(log).reset(None)
    assert log.said == []
