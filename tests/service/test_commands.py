"""What the daemon does when asked by the control socket."""

from dataclasses import dataclass, field
from pathlib import Path

import pytest

from tests.safety.bench_mount import LIMITS
from tests.service.test_emergency_desk import Log, desk_of
from trunnion.mount.joints import Reading
from trunnion.pilot.phase import Wish
from trunnion.service.clock import VirtualClock
from trunnion.service.commands import Commands, StopInForce, Surroundings
from trunnion.service.control.protocol import BadArguments
from trunnion.service.corrections import Corrections, NothingToCorrect
from trunnion.service.emergency_desk import EmergencyDesk, StopNotLifted
from trunnion.service.link.status import LinkStatus
from trunnion.service.records.values import EventKind
from trunnion.service.recovery_leave import RecoveryLeave
from trunnion.service.standing_wish import StandingWish

OUTSIDE = Reading(41.4, 201.7, 3.1)
"""Below the horizon mask."""


@dataclass
class Around:
    """The rest of the daemon."""

    link: LinkStatus = field(default_factory=LinkStatus)
    stop_file: str | None = None
    reloads: int = 0
    events: list[tuple[EventKind, str]] = field(default_factory=list)

    def reload(self) -> None:
        self.reloads += 1

    def surroundings(self) -> Surroundings:
        return Surroundings(
            lambda: {"phase": "tracking"},
            self.reload,
            lambda: self.link,
            lambda kind, sentence: self.events.append((kind, sentence)),
            lambda: self.stop_file,
        )


@dataclass
class Rig:
    wish: StandingWish
    desk: EmergencyDesk
    around: Around
    leave: RecoveryLeave
    corrections: Corrections

    def ask(self, command: str, **arguments: object) -> dict[str, object]:
        around = self.around.surroundings()
        commands = Commands(self.wish, self.desk, around, self.leave, self.corrections)
        return dict(commands.handlers()[command](arguments))


@pytest.fixture
def rig(tmp_path: Path) -> Rig:
    clock = VirtualClock(1_893_456_123.75, 41.5)
    leave = RecoveryLeave(LIMITS, clock, lambda: OUTSIDE)
    corrections = Corrections(clock, lambda: None, lambda: None)
    return Rig(StandingWish(tmp_path / "wish"), desk_of(Log()), Around(), leave, corrections)


@pytest.mark.parametrize(
    ("command", "wish"),
    [("resume", Wish.FOLLOW_PLAN), ("stow", Wish.STOW), ("hold", Wish.HOLD)],
)
def test_a_wish_is_taken_up_and_put_on_record(rig: Rig, command: str, wish: Wish) -> None:
    assert rig.ask(command) == {"wish": wish.value, "trouble": None}
    assert rig.wish.wish is wish
    assert rig.around.events == [(EventKind.REQUEST, f"told to {wish.value}")]


@pytest.mark.parametrize("command", ["resume", "stow", "hold"])
def test_while_stopped_nothing_that_could_move_the_mount_is_taken_on(
    rig: Rig, command: str
) -> None:
    rig.desk.stop("the cow")
    with pytest.raises(StopInForce, match="the cow"):
        rig.ask(command)
    assert rig.wish.wish is Wish.FOLLOW_PLAN


def test_a_reset_lifts_the_stop_and_lets_the_mount_stand_still(rig: Rig) -> None:
    rig.desk.stop("the cow")
    assert rig.ask("reset") == {"wish": "stand still", "trouble": None}
    assert rig.desk.latched is None
    assert rig.wish.wish is Wish.STAND


@pytest.mark.parametrize(
    ("link", "sentence"),
    [
        (LinkStatus(stop_pressed=True), "hardware stop input is pressed"),
        (LinkStatus(fault="drive 2 too hot"), "drive 2 too hot"),
    ],
)
def test_a_reset_is_refused_while_the_cause_is_there(
    rig: Rig, link: LinkStatus, sentence: str
) -> None:
    rig.desk.stop("the cow")
    rig.around.link = link
    with pytest.raises(StopNotLifted, match=sentence):
        rig.ask("reset")
    assert rig.desk.latched is not None


def test_a_reset_is_refused_where_a_restart_would_move_the_mount(rig: Rig, tmp_path: Path) -> None:
    rig.wish = StandingWish(tmp_path / "gone" / "wish")
    rig.desk.stop("the cow")
    with pytest.raises(StopNotLifted, match="a restart would follow plan"):
        rig.ask("reset")
    assert rig.desk.latched is not None
    assert rig.wish.wish is Wish.STAND


def test_a_reset_is_refused_while_the_file_that_asked_for_the_stop_is_there(rig: Rig) -> None:
    rig.desk.stop("the file asks for it")
    rig.around.stop_file = "the file still asks for it"
    with pytest.raises(StopNotLifted, match="the file still asks"):
        rig.ask("reset")
    rig.around.stop_file = None
    rig.ask("reset")
    assert rig.desk.latched is None


def test_status_and_reload_are_passed_on(rig: Rig) -> None:
    assert rig.ask("status") == {"phase": "tracking"}
    rig.ask("reload")
    assert rig.around.reloads == 1


def test_leave_to_come_back_inside_lets_the_mount_stand_otherwise(rig: Rig) -> None:
    answer = rig.ask("recover")
    assert answer["wish"] == "stand still"
    assert rig.wish.wish is Wish.STAND
    assert answer["goal_deg"] == list(rig.leave.way_back(OUTSIDE) or ())
    assert "inside" in rig.around.events[-1][1]


def test_any_other_wish_ends_the_leave(rig: Rig) -> None:
    rig.ask("recover")
    rig.ask("hold")
    assert rig.leave.way_back(OUTSIDE) is None


def test_there_is_no_leave_while_stopped(rig: Rig) -> None:
    rig.desk.stop("a cow")
    with pytest.raises(StopInForce, match="a cow"):
        rig.ask("recover")
    assert rig.leave.way_back(OUTSIDE) is None


def test_a_correction_is_given_put_on_record_and_cleared(rig: Rig) -> None:
    answer = rig.ask("correct", time_bias_s=1.75, elevation_deg=-0.3, keep=True)
    assert answer["correction"] == {
        "time_bias_s": 1.75,
        "azimuth_deg": 0.0,
        "elevation_deg": -0.3,
        "along_deg": 0.0,
        "across_deg": 0.0,
        "contact": None,
    }
    told = "told to correct time +1.75 s, elevation -0.3° until cleared"
    assert rig.around.events == [(EventKind.REQUEST, told)]
    assert rig.ask("correct", clear=True) == {"correction": None, "trouble": None}
    assert rig.corrections.in_force is None
    assert len(rig.around.events) == 2


@pytest.mark.parametrize(
    ("arguments", "sentence"),
    [
        ({}, "expected something to correct"),
        ({"time_bias_s": 301}, "expected time_bias_s within ±300, got 301"),
        ({"azimuth_deg": -10.5}, "expected azimuth_deg within ±10, got -10.5"),
        ({"azimuth_deg": "3"}, "expected azimuth_deg to be a number, got '3'"),
        ({"azimuth_deg": True}, "expected azimuth_deg to be a number, got True"),
        ({"azimuth_deg": 1, "keep": 1}, "expected keep to be true or false, got 1"),
        ({"azimut_deg": 1}, r"expected no other arguments, got \['azimut_deg'\]"),
        ({"clear": True, "azimuth_deg": 1}, "expected clear alone"),
    ],
)
def test_a_correction_that_makes_no_sense_changes_nothing(
    rig: Rig, arguments: dict[str, object], sentence: str
) -> None:
    rig.ask("correct", along_deg=0.2, keep=True)
    before = rig.corrections.in_force
    with pytest.raises(BadArguments, match=sentence):
        rig.ask("correct", **arguments)
    assert rig.corrections.in_force == before


def test_without_a_contact_a_correction_must_be_kept(rig: Rig) -> None:
    with pytest.raises(NothingToCorrect, match="no contact"):
        rig.ask("correct", along_deg=0.2)
    assert rig.corrections.in_force is None
