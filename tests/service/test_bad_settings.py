"""Settings that leave the mount little room: a mask with gaps and steps, a stow that is walled off.

What contradicts itself is refused where the station file is read (`tests/files/test_station.py`);
what is merely narrow must be flown safely, and told.
"""

from dataclasses import replace
from math import nextafter
from pathlib import Path

import pytest

from tests.pilot.flight import CLEARANCE, FACTS, MOUNT, START_UTC_S
from tests.safety.bench_mount import CALM
from tests.service.stations import station_with, write_plan, write_station
from trunnion.mount.clearance import Sector
from trunnion.mount.joints import Joints, Motion, Reading
from trunnion.pilot.decision import Situation
from trunnion.pilot.phase import Phase, Wish
from trunnion.pilot.pilot import Pilot
from trunnion.safety.gate import Gate
from trunnion.safety.limits import SafetyLimits
from trunnion.safety.verdict import Halt, Rule
from trunnion.service.briefing import brief
from trunnion.service.briefing_order import BriefingOrder
from trunnion.service.clearance import clearance_of
from trunnion.sky.instants import parse_utc

RING = (Sector("ring east", 0.0, 180.0, 47.1, 58.3), Sector("ring west", 180.0, 360.0, 47.1, 58.3))
BELOW_THE_RING = Joints(-133.9, 41.7)
RING_TEXT = """keep_outs:
    - {name: ring east, azimuth_deg: [0, 180], elevation_deg: [47.1, 58.3]}
    - {name: ring west, azimuth_deg: [180, 360], elevation_deg: [47.1, 58.3]}
    #"""


def test_a_gap_in_the_mask_is_bridged_by_a_line_and_a_step_counts_its_higher_side(
    tmp_path: Path,
) -> None:
    station = station_with(tmp_path)
    (tmp_path / "horizon.txt").write_text("100 14\n131 7\n131 23\n200 20\n")
    clearance = clearance_of(station)
    assert clearance.lowest_deg(330.0) == pytest.approx(17.0)  # half-way through the gap
    assert clearance.lowest_deg(0.0) == pytest.approx(20.0 - 6.0 * 160.0 / 260.0)
    assert clearance.lowest_deg(131.0) == 23.0
    assert clearance.lowest_deg(nextafter(131.0, 0.0)) == pytest.approx(7.0)


def test_a_stow_behind_keep_outs_is_never_reached_through_them() -> None:
    facts = FACTS._replace(clearance=replace(CLEARANCE, keep_outs=RING))
    gate = Gate(SafetyLimits(MOUNT, facts.clearance, transmit_floor_deg=5.0))
    pilot, mono_s = Pilot(facts), 500.7
    for _ in range(30):
        mono_s += 0.1
        reading = Reading(mono_s - 0.031, *BELOW_THE_RING)
        decision = pilot.decide(
            Situation(START_UTC_S + mono_s, mono_s, reading, None, (), Wish.STOW)
        )
        verdict = gate.judge(mono_s, decision.demand, reading, CALM)
        assert verdict.order == Halt()
    assert (decision.phase, decision.demand) == (Phase.HOLDING, None)
    assert decision.trouble is not None
    straight = Motion(BELOW_THE_RING.first_deg, 47.2, 0.0, 0.0)
    for _ in range(40):
        mono_s += 0.1
        verdict = gate.judge(mono_s, straight, Reading(mono_s - 0.031, *BELOW_THE_RING), CALM)
    assert Rule.KEEP_OUT in {each.rule for each in verdict.interventions}


def test_contacts_beyond_a_wall_are_told_before_they_are_lost(tmp_path: Path) -> None:
    station = write_station(tmp_path, {"keep_outs:    ": RING_TEXT})
    text = station.read_text()
    begin, end = text.index("    - name: lattice mast"), text.index("  reading_max_age_s")
    station.write_text(text[:begin] + text[end:])
    times = "from: 2026-12-01T00:24:00Z, until: 2026-12-01T00:25:00Z"
    later = "from: 2026-12-01T00:44:00Z, until: 2026-12-01T00:45:00Z"
    write_plan(
        tmp_path,
        f"{{id: low, target: 'fixed:10,25', {times}}}",
        f"{{id: high, target: 'fixed:10,75', {later}}}",
    )
    briefing = brief(BriefingOrder(station, None, parse_utc("2026-12-01T00:00:00Z")))
    low, high = briefing.contacts
    assert (low.is_served, high.is_served) == (False, True)
    assert any("no way" in sentence for sentence in low.sentences)
