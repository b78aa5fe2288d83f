"""Put a simulated mount where the station's driver looks for the real one.

`trunnion bench STATION` opens a pseudo-terminal at the path, or listens on the
port of this machine, that the station file gives as the driver's url, speaks what that driver
speaks, and prints the wire. Then run the station in another terminal.
"""

import argparse
import json
import signal
import sys
import time
from collections.abc import Sequence
from pathlib import Path

from trunnion_drivers.bench.bench import Passed, Way
from trunnion_drivers.bench.setup import bench_for
from trunnion_drivers.bench.station import read_station
from trunnion_drivers.dialect.show import shown
from trunnion_drivers.interface.errors import BadSettings, SettingProblem
from trunnion_drivers.settings import checked
from trunnion_drivers.simulator.machine import SimulatedMachine, start_problems
from trunnion_drivers.simulator.settings import MachineSettings

_ARROWS = {Way.IN: ">", Way.OUT: "<"}


class _SystemClock:
    def monotonic_s(self) -> float:
        return time.monotonic()

    def sleep(self, seconds: float) -> None:
        time.sleep(max(0.0, seconds))


def main(arguments: Sequence[str] | None = None) -> int:
    """Serve until interrupted; 1 for a station that cannot be put on the bench."""
    given = _parser().parse_args(arguments)
    clock = _SystemClock()
    try:
        station = read_station(given.station)
        settings = checked(MachineSettings, _json(given.machine))
        start_problems(settings, station.facts)
        machine = SimulatedMachine(settings, station.facts, clock.monotonic_s())
        bench = bench_for(station, machine, clock, _Printer(is_quiet=given.quiet))
    except BadSettings as bad:
        sys.stderr.write("".join(f"{problem.key}: {problem.reason}\n" for problem in bad.problems))
        return 1
    except OSError as error:
        sys.stderr.write(f"{error}\n")
        return 1
    sys.stdout.write(f"the bench is at {bench.url}; end it with Ctrl-C\n")
    sys.stdout.flush()
    signal.signal(signal.SIGTERM, signal.default_int_handler)
    try:
        bench.serve()
    except KeyboardInterrupt:
        return 0
    finally:
        bench.pull()
    return 0


class _Printer:
    """Writes a line for all that passes: seconds since the start, the way, the bytes."""

    def __init__(self, *, is_quiet: bool) -> None:
        self._begin_s = time.monotonic()
        self._is_quiet = is_quiet

    def __call__(self, passed: Passed) -> None:
        if not self._is_quiet:
            since_s = passed.mono_s - self._begin_s
            sys.stdout.write(f"{since_s:10.4f} {_ARROWS[passed.way]} {shown(passed.data)}\n")
            sys.stdout.flush()


def _json(text: str) -> dict[str, object]:
    try:
        settings = json.loads(text)
    except ValueError as error:
        raise BadSettings((SettingProblem("--machine", f"not valid JSON: {error}"),)) from error
    if not isinstance(settings, dict):
        raise BadSettings((SettingProblem("--machine", "expected a JSON object"),))
    return {key: _as_tuples(value) for key, value in settings.items()}


def _as_tuples(value: object) -> object:
    return tuple(map(_as_tuples, value)) if isinstance(value, list) else value


def _parser() -> argparse.ArgumentParser:
    parser = argparse.ArgumentParser(prog="trunnion bench", description=__doc__)
    parser.add_argument("station", type=Path, help="the station file")
    parser.add_argument(
        "--machine", default="{}", help="settings of the simulated machine, as a JSON object"
    )
    parser.add_argument("--quiet", action="store_true", help="do not print the wire")
    return parser


if __name__ == "__main__":
    sys.exit(main())
