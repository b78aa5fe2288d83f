"""Commission a mount: `trunnion commission STATION`. No daemon may run beside it.

Step by step, each with your agreement: link, stop input, sense and scale of each joint, speed and
stopping, limit switches, stow. Writes a dated report beside the station file.
"""

import argparse
import sys
import time
from collections.abc import Sequence
from importlib.metadata import entry_points
from pathlib import Path

from trunnion_drivers.bench.station import BenchStation, read_station
from trunnion_drivers.commission.bay import Bay
from trunnion_drivers.commission.finding import report
from trunnion_drivers.commission.mover import CREEP_DEG_S, Mover
from trunnion_drivers.commission.operator import AtTerminal, Operator
from trunnion_drivers.commission.trial import commission
from trunnion_drivers.interface.driver import Driver
from trunnion_drivers.interface.errors import BadSettings, SettingProblem
from trunnion_drivers.interface.values import Clock

FASTEST_CREEP_DEG_S = 10.0


class _SystemClock:
    def monotonic_s(self) -> float:
        return time.monotonic()

    def sleep(self, seconds: float) -> None:
        time.sleep(max(0.0, seconds))


def main(arguments: Sequence[str] | None = None, operator: Operator | None = None) -> int:
    """Commission; 0 when there is nothing to put right."""
    given = _parser().parse_args(arguments)
    operator, clock = operator or AtTerminal(), _SystemClock()
    try:
        station = read_station(given.station)
        driver = _driver(station, clock)
    except BadSettings as bad:
        sys.stderr.write("".join(f"{problem.key}: {problem.reason}\n" for problem in bad.problems))
        return 1
    facts = station.facts
    mover = Mover(driver, facts, clock, operator, given.creep)
    found = commission(Bay(driver, facts, clock, operator, mover, station.floor_deg))
    written = report(f"Commissioning of {given.station.name}, {_now('%Y-%m-%d %H:%M:%SZ')}", found)
    path = given.station.with_name(f"commissioning-{_now('%Y%m%dT%H%M%SZ')}.txt")
    path.write_text(written, encoding="utf-8")
    operator.tell(f"\n{written}\nThe report is in {path}")
    return 0 if all(finding.is_good for finding in found) else 1


def _driver(station: BenchStation, clock: Clock) -> Driver:
    found = entry_points(group="trunnion.drivers", name=station.kind)
    if not found:
        reason = f"expected an installed driver, got {station.kind!r}"
        raise BadSettings((SettingProblem("driver.kind", reason),))
    driver: Driver = next(iter(found)).load().from_settings(station.settings, station.facts, clock)
    return driver


def _now(pattern: str) -> str:
    return time.strftime(pattern, time.gmtime())


def _creep_deg_s(text: str) -> float:
    """Above zero: at no speed, or a negative one, nothing would hold the mount to a slow one."""
    creep_deg_s = float(text)
    if not 0.0 < creep_deg_s <= FASTEST_CREEP_DEG_S:
        raise argparse.ArgumentTypeError(
            f"expected more than 0 and at most {FASTEST_CREEP_DEG_S:g}, got {text}"
        )
    return creep_deg_s


def _parser() -> argparse.ArgumentParser:
    parser = argparse.ArgumentParser(prog="trunnion commission", description=__doc__)
    parser.add_argument("station", type=Path, help="the station file")
    parser.add_argument(
        "--creep",
        type=_creep_deg_s,
        default=CREEP_DEG_S,
        help=f"degrees a second of slow motions, {FASTEST_CREEP_DEG_S:g} at most; "
        f"default {CREEP_DEG_S:g}",
    )
    return parser


if __name__ == "__main__":
    sys.exit(main())
