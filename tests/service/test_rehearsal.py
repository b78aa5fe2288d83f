"""The whole daemon in virtual time: pointing, sharing, the gate in force, nothing left behind."""

from itertools import pairwise
from pathlib import Path

import pytest

from tests.service.stations import write_plan, write_station
from trunnion.pilot.phase import Phase
from trunnion.safety.verdict import Halt, Move, Rule
from trunnion.service.rehearsal import LEAD_S, Rehearsal, rehearsal_of
from trunnion.service.turn import Turn
from trunnion.sky.instants import parse_utc

POINTED_DEG = 0.01
"""Encoder resolution and noise of the simulated mount, and a control turn of 0.1 s."""

MORNING_PASS = "{target: BRINDLE-4, from: 2026-12-01T00:36:54Z, until: 2026-12-01T00:49:18Z}"

Flown = tuple[Rehearsal, list[Turn]]


def flown(station: Path) -> Flown:
    _, rehearsal = rehearsal_of(station, None)
    return rehearsal, list(rehearsal.turns())


@pytest.fixture(scope="module")
def example(tmp_path_factory: pytest.TempPathFactory) -> Flown:
    """The example plan, flown once for all tests that only look at it."""
    return flown(write_station(tmp_path_factory.mktemp("example")))


def test_every_contact_that_the_mount_can_follow_is_pointed_exactly(example: Flown) -> None:
    rehearsal, turns = example
    for contact in ("beacon-check", "brindle-4-morning", "sun-noon", "lantern-g-relay"):
        score = rehearsal.results[contact].score
        assert score.worst_error_deg < POINTED_DEG
        assert score.outside_tolerance_s == 0.0
    assert set(rehearsal.results) == {
        "beacon-check",
        "brindle-4-morning",
        "quillon-1-overhead",
        "sun-noon",
        "osprell-long",
        "quillon-2-north",
        "lantern-g-relay",
    }
    assert all(not turn.verdict.interventions for turn in turns)
    assert turns[-1].decision.phase is Phase.STOWED


def test_a_rehearsal_begins_a_while_before_the_first_contact(example: Flown) -> None:
    assert example[1][0].utc_s == parse_utc("2026-12-01T00:24:00Z") - LEAD_S


def test_while_the_mount_moves_the_turns_keep_the_station_s_cadence(example: Flown) -> None:
    for before, after in pairwise(example[1]):
        if before.decision.phase in (Phase.TRACKING, Phase.SLEWING, Phase.STOWING):
            assert after.mono_s - before.mono_s == pytest.approx(0.1)


def test_the_beam_never_goes_below_the_floor_nor_the_mask(example: Flown) -> None:
    rehearsal, turns = example
    for turn in turns:
        if isinstance(turn.verdict.order, Move):
            joints = turn.verdict.order.motion.joints
            azimuth_deg, elevation_deg = rehearsal.mount.hinges.boresight(joints)
            assert rehearsal.clearance.is_clear(azimuth_deg, elevation_deg + 1e-9)


def test_a_rehearsal_is_the_same_every_time_and_leaves_no_file(tmp_path: Path) -> None:
    station = write_station(tmp_path)
    write_plan(tmp_path, MORNING_PASS)
    files = sorted(tmp_path.iterdir())
    one, other = (flown(station)[1] for _ in range(2))
    assert [(t.utc_s, t.reading, t.verdict) for t in one] == [
        (t.utc_s, t.reading, t.verdict) for t in other
    ]
    assert sorted(tmp_path.iterdir()) == files


def test_the_gate_stops_a_simulated_mount_that_is_stuck(tmp_path: Path) -> None:
    """The simulator runs behind the same gate: nothing of the safety is off in a rehearsal."""
    fault = "{after_s: 700.3, for_s: 99999, joints: [jammed, none]}"
    station = write_station(tmp_path, {"kind: simulator": f"kind: simulator\n  faults: [{fault}]"})
    write_plan(tmp_path, MORNING_PASS)
    rehearsal, turns = flown(station)
    rules = [{each.rule for each in turn.verdict.interventions} for turn in turns]
    stalled = next(index for index, each in enumerate(rules) if Rule.STALLED in each)
    assert all(turn.verdict.order == Halt() for turn in turns[stalled:])
    assert turns[-1].decision.phase is Phase.HALTED
    (result,) = rehearsal.results.values()
    assert result.score.outside_beam_s > 300.0
