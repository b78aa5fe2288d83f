"""One control turn: read, decide, judge, hand over, tell.

The same turn runs under the real clock with a real mount, and under a virtual clock with a
simulated one; nothing in it knows which.
"""

from collections.abc import Callable, Sequence
from typing import NamedTuple, Protocol

from trunnion.mount.joints import Joints, Motion, Reading
from trunnion.pilot.decision import Decision, Situation
from trunnion.pilot.phase import Wish
from trunnion.pilot.pilot import Pilot
from trunnion.safety.gate import Gate
from trunnion.safety.verdict import Move, Verdict
from trunnion.safety.world import World
from trunnion.service.clock import Clock
from trunnion.service.link.link import Link
from trunnion.track.path import Assignment


class Turn(NamedTuple):
    """Everything about one turn, for whoever wants to know: records, status, scores."""

    utc_s: float
    mono_s: float
    reading: Reading | None
    world: World
    decision: Decision
    verdict: Verdict


class Observer(Protocol):
    """Somebody who is told of every turn; it must neither block nor raise."""

    def note(self, turn: Turn) -> None:
        """Take in one turn."""
        ...


class Orders(NamedTuple):
    """What the turn is to work on, as the service has it at this moment."""

    assignments: Sequence[Assignment] | None
    wish: Wish
    way_back: Joints | None = None

    @property
    def wish_in_force(self) -> Wish:
        """Without a plan the mount holds still, unless it has to stand still anyway."""
        has_to_hold = self.assignments is None and self.wish is not Wish.STAND
        return Wish.HOLD if has_to_hold else self.wish


class ControlTurn:
    """Runs turn after turn; keeps only what the mount was last ordered to do."""

    def __init__(
        self,
        clock: Clock,
        link: Link,
        pilot: Pilot,
        gate: Gate,
        observers: Sequence[Observer],
    ) -> None:
        self._clock = clock
        self._link = link
        self._pilot = pilot
        self._gate = gate
        self._observers = observers
        self._ordered: Motion | None = None
        self._must_stow = False
        self._way_out: Joints | None = None

    def run(self, orders: Orders, look_around: Callable[[], World]) -> Turn:
        """Do one turn now."""
        utc_s, mono_s = self._clock.utc_s(), self._clock.monotonic_s()
        reading = self._link.newest()
        world = look_around()._replace(utc_s=utc_s, may_recover=orders.way_back is not None)
        decision = self._pilot.decide(
            Situation(
                utc_s,
                mono_s,
                reading,
                self._ordered,
                orders.assignments or (),
                orders.wish_in_force,
                self._must_stow,
                world.emergency is not None,
                orders.way_back or (None if orders.wish is Wish.STAND else self._way_out),
                world.sun,
            )
        )
        verdict = self._gate.judge(mono_s, decision.demand, reading, world)
        self._link.submit(verdict.order)
        self._ordered = verdict.order.motion if isinstance(verdict.order, Move) else None
        self._must_stow = verdict.wants_stow
        self._way_out = verdict.way_out
        turn = Turn(utc_s, mono_s, reading, world, decision, verdict)
        for observer in self._observers:
            observer.note(turn)
        return turn
