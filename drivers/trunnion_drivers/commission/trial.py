"""All steps one after the other, until the end, a key, or an error of the driver."""

from collections.abc import Callable, Iterator

from trunnion_drivers.commission.bay import Bay
from trunnion_drivers.commission.finding import Finding, bad
from trunnion_drivers.commission.input_steps import limit_switches, stop_input
from trunnion_drivers.commission.link_step import link
from trunnion_drivers.commission.mover import Stopped
from trunnion_drivers.commission.sense_step import sense_and_scale
from trunnion_drivers.commission.speed_step import speed_and_stopping
from trunnion_drivers.commission.stow_step import stow
from trunnion_drivers.interface.errors import DriverError

CAUTIONS = """\
CAUTION. This moves heavy machinery, and nothing here guards it: goals are chosen above the
elevation floor, and nothing else keeps floor, horizon mask or keep-outs. Before you go on:
  - nobody stands where the antenna can reach, and the transmitter is off and locked;
  - somebody has a hand on the hard-wired emergency stop, which works without this computer;
  - limit switches are wired to the motors, not only to this program;
  - ropes, ladders and covers are gone, and the wind is low.
Any key at this terminal halts the mount, and is no emergency stop."""

STEPS: tuple[tuple[str, Callable[[Bay], Iterator[Finding]]], ...] = (
    ("Link and reading", link),
    ("Stop input", stop_input),
    ("Sense and scale", sense_and_scale),
    ("Speed and stopping", speed_and_stopping),
    ("Limit switches", limit_switches),
    ("Stow", stow),
)


def commission(bay: Bay) -> list[Finding]:
    """Go through all steps; the mount is halted at the end, whatever happens."""
    bay.operator.tell(CAUTIONS)
    if not bay.operator.agrees("All of this is so."):
        return [bad("the cautions were not confirmed; nothing was done")]
    found: list[Finding] = []
    try:
        bay.driver.open()
        for title, step in STEPS:
            bay.operator.tell(f"\n{title}")
            for finding in step(bay):
                found.append(finding)
                bay.operator.tell(f"  {finding.sentence}")
    except (DriverError, Stopped) as error:
        found.append(bad(f"ended early: {error}"))
    finally:
        found += _halted(bay)
    return found


def _halted(bay: Bay) -> list[Finding]:
    try:
        if bay.driver.is_open:
            bay.driver.halt()
    except DriverError as error:
        return [bad(f"THE LAST HALT FAILED: {error}")]
    finally:
        bay.driver.close()
    return []
