"""The way back of a mount outside its limits: gentle, and inwards only."""

import pytest

from tests.safety.bench_mount import CALM, Bench, rules
from trunnion.mount.joints import Joints, Motion
from trunnion.safety.verdict import Move, Rule

LEAVE = CALM._replace(may_recover=True)

# floor 5.3, travel of the first joint to 268.0, accelerations 2.9 and 2.1


def test_it_starts_with_a_fifth_of_the_mounts_acceleration() -> None:
    bench = Bench(place=Joints(201.7, 3.1)).settle()
    order = bench.turn(Motion(201.7, 5.9), LEAVE).order
    assert isinstance(order, Move)
    assert order.motion.second_rate_deg_s == pytest.approx(0.2 * 2.1 * 0.1)


def test_past_the_travel_the_other_joint_stays_where_it_is() -> None:
    bench = Bench(place=Joints(268.9, 41.3)).settle()
    assert rules(bench.turn(Motion(268.9, 45.1), LEAVE)) == {Rule.OUTSIDE}
    assert not rules(bench.turn(Motion(267.3, 45.1), LEAVE))


def test_leave_takes_nothing_from_a_mount_inside() -> None:
    bench = Bench(place=Joints(267.6, 41.3)).settle()
    demand = Motion(267.6, 41.303)
    verdict = bench.turn(demand, LEAVE)
    assert (verdict.order, rules(verdict)) == (Move(demand), set())
