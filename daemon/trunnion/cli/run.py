"""`trunnion run`: the daemon itself."""

import signal
import sys
from typing import TYPE_CHECKING

import typer

from trunnion.cli.arguments import OptionalPlan, Station
from trunnion.cli.errors import MISUSED
from trunnion.cli.output import say
from trunnion.files.problems import FileProblems

if TYPE_CHECKING:
    from types import FrameType

    from trunnion.service.daemon import Daemon

SWITCH_INTERVAL_S = 0.0005
"""A thread that is busy gives the control turn way after this time, not after Python's 5 ms."""


def run(station: Station, *, plan: OptionalPlan = None) -> None:
    """Follow the pass plan, until told to end (SIGTERM, SIGINT); SIGHUP reads the plan again.

    Moving machinery: see that nobody is near the antenna, and that the hardware emergency stop
    works. SIGUSR1 is an emergency stop. The exit code is 2 when the station file cannot be used.
    """
    from trunnion.service.assembly import Paths
    from trunnion.service.clock import SystemClock
    from trunnion.service.daemon import Daemon
    from trunnion.service.log import configure
    from trunnion.service.notify import Notifier

    configure()
    sys.setswitchinterval(SWITCH_INTERVAL_S)
    try:
        daemon = Daemon(Paths(station, plan), SystemClock(), Notifier.from_environment())
    except FileProblems as problems:
        say(str(problems))
        raise typer.Exit(MISUSED) from None
    _listen_to_signals(daemon)
    daemon.run()


def _listen_to_signals(daemon: "Daemon") -> None:
    def end(_number: int, _frame: "FrameType | None") -> None:
        daemon.end()

    def reload(_number: int, _frame: "FrameType | None") -> None:
        daemon.reload()

    def stop(_number: int, _frame: "FrameType | None") -> None:
        daemon.emergency_stop("signal USR1")

    signal.signal(signal.SIGTERM, end)
    signal.signal(signal.SIGINT, end)
    signal.signal(signal.SIGHUP, reload)
    signal.signal(signal.SIGUSR1, stop)
