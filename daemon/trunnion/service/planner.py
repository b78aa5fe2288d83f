"""Planning in a child process, so that long sums never make a control turn late.

A child is started for each piece of work and ends with it: planning is rare, memory on a small
computer is not. A child whose parent has been killed ends at once: the parent that takes its place
needs the processor for itself.
"""

import os
import pickle
import signal
from collections.abc import Callable
from multiprocessing import get_context, parent_process
from multiprocessing.connection import Connection, wait
from multiprocessing.context import SpawnProcess
from threading import Lock, Thread
from typing import Generic, NamedTuple, TypeVar

WorkOrder = TypeVar("WorkOrder")
Result = TypeVar("Result")

NICENESS = 10
"""The child gives way to the control turn on a computer with one core."""


class PlannerDied(Exception):  # noqa: N818 - named for what happened
    """The child ended without an answer (killed, out of memory)."""


class Outcome(NamedTuple, Generic[Result]):
    """What became of a piece of work: its result, or what went wrong."""

    result: Result | None
    error: Exception | None


class Planner(Generic[WorkOrder, Result]):
    """Hands work to a child process; only the outcome of the newest order counts."""

    def __init__(self, work: Callable[[WorkOrder], Result]) -> None:
        self._work = work
        self._lock = Lock()
        self._child: SpawnProcess | None = None
        self._outcome: Outcome[Result] | None = None

    @property
    def is_busy(self) -> bool:
        """Whether an order is being worked on."""
        return self._child is not None

    def ask(self, order: WorkOrder) -> None:
        """Begin on this order; what was asked before is dropped."""
        self.close()
        context = get_context("spawn")
        ours, theirs = context.Pipe(duplex=False)
        task = pickle.dumps((self._work, order))
        child = context.Process(target=_work, args=(task, theirs), daemon=True)
        child.start()
        theirs.close()
        with self._lock:
            self._child = child
        Thread(target=self._await, args=(child, ours), name="planner", daemon=True).start()

    def collect(self) -> Outcome[Result] | None:
        """The outcome of the newest order, once; None while there is none."""
        with self._lock:
            outcome, self._outcome = self._outcome, None
        return outcome

    def close(self) -> None:
        """Drop what is under way."""
        with self._lock:
            child, self._child, self._outcome = self._child, None, None
        if child is not None:
            child.terminate()

    def _await(self, child: SpawnProcess, answer: Connection) -> None:
        try:
            outcome = answer.recv()
        except Exception as error:  # noqa: BLE001 - unpickling may raise anything, and nobody else would say it
            outcome = Outcome(None, PlannerDied(f"expected an answer, got {error!r}"))
        child.join()
        with self._lock:
            if child is self._child:
                self._child, self._outcome = None, outcome


def _work(task: bytes, answer: Connection) -> None:
    """Give way first: to unpack the task imports all that planning needs."""
    signal.signal(signal.SIGINT, signal.SIG_IGN)  # the parent is told, and tells us
    os.nice(NICENESS)
    Thread(target=_end_with_the_parent, name="parent-watch", daemon=True).start()
    try:
        work, order = pickle.loads(task)  # noqa: S301 - our own parent's
        outcome: Outcome[object] = Outcome(work(order), None)
    except Exception as error:  # noqa: BLE001 - it is told to the parent, whatever it is
        outcome = Outcome(None, error)
    answer.send(outcome)


def _end_with_the_parent() -> None:
    parent = parent_process()
    if parent is not None:
        wait([parent.sentinel])
        os._exit(1)
