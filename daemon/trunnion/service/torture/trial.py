"""One seed put to the test: fly it, judge it, and find the fewest faults that still fail."""

from typing import NamedTuple

from trunnion.safety.gate import Gate
from trunnion.service.torture.checker import Checker, Violation
from trunnion.service.torture.flight import Flight, GateOf
from trunnion.service.torture.scenario import Scenario


class Outcome(NamedTuple):
    """What came of one scenario: its first violation of each guarantee.

    `deepest_deg` is how far the true beam came below floor and mask; negative is the room left.
    """

    scenario: Scenario
    violations: tuple[Violation, ...]
    deepest_deg: float


def try_out(scenario: Scenario, gate_of: GateOf = Gate) -> Outcome:
    """Fly a scenario to its end, and judge every instant of it."""
    checker = Checker(scenario)
    first: dict[str, Violation] = {}
    flight = Flight(scenario, gate_of)
    for instant in flight.instants():
        for violation in checker.note(instant):
            first.setdefault(violation.guarantee, violation)
    if flight.records_defect is not None:
        first["records"] = Violation(scenario.end_s, "records", flight.records_defect)
    return Outcome(scenario, tuple(first.values()), checker.deepest_deg)


def shrink(outcome: Outcome, gate_of: GateOf = Gate) -> Outcome:
    """Leave out mishap after mishap, as long as the same guarantee is still violated."""
    wanted = {violation.guarantee for violation in outcome.violations}
    is_smaller = True
    while is_smaller:
        is_smaller = False
        for mishap in outcome.scenario.mishaps:
            tried = try_out(outcome.scenario.without(mishap), gate_of)
            if wanted & {violation.guarantee for violation in tried.violations}:
                outcome, is_smaller = tried, True
                break
    return outcome
