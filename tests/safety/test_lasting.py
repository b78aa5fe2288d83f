"""How long hazards last: when rules begin to act, and when they let go."""

from trunnion.safety.hazard import Hazard
from trunnion.safety.lasting import Lasting
from trunnion.safety.policy import POLICY, Policy
from trunnion.safety.verdict import Rule

SHORT = Hazard(Rule.TURN_LATE, "late")
SLOW = Hazard(Rule.STALLED, "behind")
WINDY = Hazard(Rule.WIND, "gusts")
TABLE: dict[Rule, Policy] = {
    **POLICY,
    Rule.STALLED: POLICY[Rule.STALLED]._replace(after_s=2.75),
    Rule.WIND: POLICY[Rule.WIND]._replace(calm_s=31.5),
}


def test_nothing_found_is_nothing_that_acts() -> None:
    lasting = Lasting(TABLE)
    assert lasting.acting_at(71.3, ()) == ()
    assert lasting.acting == frozenset()


def test_a_hazard_without_patience_acts_at_once_and_lets_go_at_once() -> None:
    lasting = Lasting(TABLE)
    assert lasting.acting_at(71.3, [SHORT]) == (SHORT,)
    assert lasting.acting == {Rule.TURN_LATE}
    assert lasting.acting_at(71.4, []) == ()


def test_a_hazard_acts_once_it_has_lasted_long_enough() -> None:
    lasting = Lasting(TABLE)
    assert lasting.acting_at(71.25, [SLOW]) == ()
    assert lasting.acting_at(73.99, [SLOW]) == ()
    assert lasting.acting_at(74.0, [SLOW]) == (SLOW,)


def test_one_turn_without_it_begins_the_count_anew() -> None:
    lasting = Lasting(TABLE)
    lasting.acting_at(71.25, [SLOW])
    lasting.acting_at(73.0, [])
    assert lasting.acting_at(74.5, [SLOW]) == ()
    assert lasting.acting_at(77.25, [SLOW]) == (SLOW,)


def test_a_rule_lets_go_once_it_has_been_calm_for_long_enough() -> None:
    lasting = Lasting(TABLE)
    lasting.acting_at(71.25, [WINDY])
    assert lasting.acting_at(102.74, []) == (WINDY,)
    assert lasting.acting_at(102.75, []) == ()


def test_calm_is_counted_from_the_last_time_it_was_seen() -> None:
    lasting = Lasting(TABLE)
    lasting.acting_at(71.25, [WINDY])
    lasting.acting_at(81.25, [WINDY])
    assert lasting.acting_at(112.0, []) == (WINDY,)
    assert lasting.acting_at(112.75, []) == ()


def test_the_newest_finding_is_the_one_that_is_told() -> None:
    lasting = Lasting(TABLE)
    lasting.acting_at(71.25, [WINDY])
    stronger = Hazard(Rule.WIND, "stronger gusts")
    assert lasting.acting_at(71.35, [stronger]) == (stronger,)
    assert lasting.acting_at(71.45, []) == (stronger,)
