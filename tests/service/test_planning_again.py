"""What planning the rest anew gains for a mount that was sent away in the middle of a contact."""

from collections.abc import Sequence
from pathlib import Path

from tests.service.stations import station_with, write_plan
from trunnion.mount.joints import Joints, Motion, Reading
from trunnion.pilot.decision import Situation
from trunnion.pilot.departure import Facts
from trunnion.pilot.phase import Phase
from trunnion.pilot.pilot import Pilot
from trunnion.service.antenna import beam_of, flown_mount_of
from trunnion.service.briefing import brief
from trunnion.service.briefing_order import BriefingOrder
from trunnion.service.clearance import clearance_of
from trunnion.sky.instants import parse_utc
from trunnion.track.path import Assignment

MORNING = "{id: m, target: BRINDLE-4, from: 2026-12-01T00:36:54Z, until: 2026-12-01T00:49:18Z}"
BEFORE_S = parse_utc("2026-12-01T00:30:00Z")
RESUMED_S = parse_utc("2026-12-01T00:46:31Z")
AWAY = Joints(243.7, 60.3)
STEP_S = 0.1


def test_from_the_other_end_of_the_travel_the_rest_is_met_much_sooner(tmp_path: Path) -> None:
    station = station_with(tmp_path)
    write_plan(tmp_path, MORNING)
    before = brief(BriefingOrder(station.path, None, BEFORE_S)).assignments
    anew = brief(BriefingOrder(station.path, None, RESUMED_S, AWAY)).assignments
    pilot_facts = Facts(
        flown_mount_of(station), clearance_of(station), beam_of(station).tolerance_deg
    )
    late_s, late_jump = chased(pilot_facts, before, before, AWAY)
    soon_s, soon_jump = chased(pilot_facts, before, anew, AWAY)
    assert soon_s < 0.5 * late_s
    reach_deg_s = pilot_facts.mount.first.acceleration_deg_s2 * STEP_S
    assert max(late_jump, soon_jump) <= reach_deg_s + 1e-6


def chased(
    facts: Facts, first: Sequence[Assignment], then: Sequence[Assignment], start: Joints
) -> tuple[float, float]:
    """Seconds until the target is tracked, and the largest change of rate in one step.

    The second plan is taken over two seconds after the mount began to chase by the first.
    """
    pilot = Pilot(facts)
    motion, since_s, jump = Motion(*start), 0.0, 0.0
    while since_s < 200.0:
        plan = first if since_s < 2.0 else then
        reading = Reading(since_s, *motion.joints)
        now = Situation(RESUMED_S + since_s, since_s, reading, motion, plan)
        decision = pilot.decide(now)
        if decision.phase is Phase.TRACKING:
            return since_s, jump
        assert decision.demand is not None
        jump = max(jump, abs(decision.demand.first_rate_deg_s - motion.first_rate_deg_s))
        motion = decision.demand
        since_s += STEP_S
    raise AssertionError(f"never tracked; last {motion}")
