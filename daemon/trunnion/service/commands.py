"""What the running daemon does when asked by the control socket."""

from collections.abc import Callable, Mapping
from typing import NamedTuple

from trunnion.pilot.phase import Wish
from trunnion.service.control.conversation import Handler
from trunnion.service.correction_request import (
    clears,
    correction_in,
    is_kept_in,
    plain_correction,
    told,
)
from trunnion.service.corrections import Corrections
from trunnion.service.emergency_desk import EmergencyDesk
from trunnion.service.errors import ServiceError
from trunnion.service.link.status import LinkStatus
from trunnion.service.records.values import EventKind
from trunnion.service.recovery_leave import RecoveryLeave
from trunnion.service.standing_wish import StandingWish

Answer = Mapping[str, object]


class StopInForce(ServiceError):  # noqa: N818 - named for what it means
    """Nothing that could move the mount is taken on while an emergency stop is latched."""


class Surroundings(NamedTuple):
    """The parts of the daemon that commands reach, each by one call; safe from any thread."""

    status: Callable[[], Answer]
    reload: Callable[[], None]
    link_status: Callable[[], LinkStatus]
    record: Callable[[EventKind, str], None]
    stop_asked_by_file: Callable[[], str | None] = lambda: None


class Commands:
    """The commands of the request lane; `stop` has a lane of its own."""

    def __init__(
        self,
        wish: StandingWish,
        desk: EmergencyDesk,
        around: Surroundings,
        leave: RecoveryLeave,
        corrections: Corrections,
    ) -> None:
        self._wish = wish
        self._desk = desk
        self._around = around
        self._leave = leave
        self._corrections = corrections

    def handlers(self) -> Mapping[str, Handler]:
        """Each command's name and what fulfils it."""
        return {
            "status": lambda _: self._around.status(),
            "reload": self._reload,
            "reset": self._reset,
            "resume": lambda _: self._take_up(Wish.FOLLOW_PLAN),
            "stow": lambda _: self._take_up(Wish.STOW),
            "hold": lambda _: self._take_up(Wish.HOLD),
            "recover": self._recover,
            "correct": self._correct,
        }

    def _reload(self, _: Answer) -> Answer:
        self._around.reload()
        return {"is_planning": True}

    def _correct(self, arguments: Answer) -> Answer:
        """Correct where the target is looked for; the plan is made anew, taken over smoothly."""
        if clears(arguments):
            self._corrections.clear()
            self._around.record(EventKind.REQUEST, "told to correct nothing any more")
            return {"correction": None, "trouble": self._corrections.trouble}
        given = self._corrections.give(correction_in(arguments), is_kept=is_kept_in(arguments))
        self._around.record(EventKind.REQUEST, f"told to correct {told(given)}")
        return {"correction": plain_correction(given), "trouble": self._corrections.trouble}

    def _reset(self, _: Answer) -> Answer:
        """Lift the stop, and wait: the wish to stand still is kept before the stop is gone."""
        trouble = self._wish.set(Wish.STAND)
        self._desk.reset(self._still_there() or trouble)
        self._around.record(EventKind.RESET, "emergency stop lifted; nothing moves until told to")
        return {"wish": self._wish.wish.value, "trouble": trouble}

    def _still_there(self) -> str | None:
        status = self._around.link_status()
        pressed = "the hardware stop input is pressed" if status.stop_pressed else None
        return pressed or self._around.stop_asked_by_file() or status.fault

    def _recover(self, _: Answer) -> Answer:
        """Bring a mount back that was found outside, slowly; it stands still from there on."""
        self._must_not_be_stopped()
        goal = self._leave.grant()
        trouble = self._wish.set(Wish.STAND)
        told = f"told to come back inside, to {goal.first_deg:.1f}°/{goal.second_deg:.1f}°"
        self._around.record(EventKind.REQUEST, told)
        return {"goal_deg": list(goal), "wish": Wish.STAND.value, "trouble": trouble}

    def _must_not_be_stopped(self) -> None:
        stop = self._desk.latched
        if stop is not None:
            raise StopInForce(f"an emergency stop is in force ({stop.cause}): reset it first")

    def _take_up(self, wish: Wish) -> Answer:
        self._must_not_be_stopped()
        self._leave.withdraw()
        trouble = self._wish.set(wish)
        self._around.record(EventKind.REQUEST, f"told to {wish.value}")
        return {"wish": wish.value, "trouble": trouble}
