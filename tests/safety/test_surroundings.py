"""Hazards from outside: link, lateness, clock, wind, heartbeat."""

from dataclasses import replace
from math import inf, nan
from typing import Any

import pytest

from tests.safety.bench_mount import CALM, LIMITS
from trunnion.safety.emergency import EmergencyStop
from trunnion.safety.surroundings import find_around
from trunnion.safety.verdict import Rule

WATCHFUL = replace(
    LIMITS,
    turn_max_lateness_s=0.75,
    clock_max_error_s=0.25,
    wind_stow_gust_m_s=20.0,
    wind_stow_mean_m_s=10.0,
    heartbeat_max_age_s=5.5,
)
FINE = CALM._replace(
    lateness_s=0.75,
    clock_error_s=0.25,
    wind_gust_m_s=20.0,
    wind_mean_m_s=10.0,
    heartbeat_age_s=5.5,
)


def rules(acting: frozenset[Rule] = frozenset(), **change: Any) -> list[Rule]:
    return [each.rule for each in find_around(FINE._replace(**change), WATCHFUL, acting)]


def test_everything_may_be_at_its_limit() -> None:
    assert rules() == []


@pytest.mark.parametrize(
    ("change", "rule"),
    [
        ({"emergency": EmergencyStop("somebody pressed it", 17.3)}, Rule.EMERGENCY_STOP),
        ({"is_link_up": False}, Rule.LINK_DOWN),
        ({"mount_fault": "drive too hot"}, Rule.MOUNT_FAULT),
        ({"lateness_s": 0.76}, Rule.TURN_LATE),
        ({"lateness_s": nan}, Rule.TURN_LATE),
        ({"clock_error_s": 0.26}, Rule.CLOCK_UNTRUSTED),
        ({"clock_error_s": inf}, Rule.CLOCK_UNTRUSTED),
        ({"clock_error_s": nan}, Rule.CLOCK_UNTRUSTED),
        ({"clock_error_s": None}, Rule.CLOCK_UNTRUSTED),
        ({"wind_gust_m_s": 20.1}, Rule.WIND),
        ({"wind_gust_m_s": None}, Rule.WIND_UNKNOWN),
        ({"wind_gust_m_s": nan}, Rule.WIND_UNKNOWN),
        ({"wind_mean_m_s": 10.1}, Rule.WIND),
        ({"wind_mean_m_s": None}, Rule.WIND_UNKNOWN),
        ({"heartbeat_age_s": 5.6}, Rule.HEARTBEAT_LOST),
        ({"heartbeat_age_s": None}, Rule.HEARTBEAT_LOST),
        ({"heartbeat_age_s": nan}, Rule.HEARTBEAT_LOST),
    ],
)
def test_each_hazard_is_found_by_itself(change: dict[str, Any], rule: Rule) -> None:
    assert rules(**change) == [rule]


def test_wind_that_was_too_high_must_fall_well_below_the_limit() -> None:
    windy = frozenset({Rule.WIND})
    assert rules(windy, wind_gust_m_s=16.1, wind_mean_m_s=8.0) == [Rule.WIND]
    assert rules(windy, wind_gust_m_s=16.0, wind_mean_m_s=8.1) == [Rule.WIND]
    assert rules(windy, wind_gust_m_s=16.0, wind_mean_m_s=8.0) == []


def test_what_a_station_does_not_watch_is_never_found() -> None:
    nothing = CALM._replace(clock_error_s=inf, wind_gust_m_s=99.0, heartbeat_age_s=99.0)
    assert list(find_around(nothing, LIMITS, frozenset())) == []


@pytest.mark.parametrize(
    ("change", "finding"),
    [
        ({"lateness_s": 0.91}, "the control turn came 0.91 s late, 0.75 s are allowed"),
        ({"mount_fault": "drive too hot"}, "the mount reports: drive too hot"),
        ({"is_link_up": False}, "the mount does not answer as it should"),
        ({"clock_error_s": 0.5}, "the clock may be wrong by 0.5 s, 0.25 s are allowed"),
        ({"clock_error_s": None}, "the clock may be wrong by an unknown time, 0.25 s are allowed"),
        ({"wind_gust_m_s": 23.4}, "gusts of 23.4 m/s, 20 m/s are allowed"),
        ({"wind_mean_m_s": None}, "no reading of mean wind"),
        ({"heartbeat_age_s": 6.25}, "the outside heartbeat was last heard 6.2 s ago"),
        ({"heartbeat_age_s": None}, "the outside heartbeat was never heard"),
    ],
)
def test_findings_say_what_is_and_what_is_allowed(change: dict[str, Any], finding: str) -> None:
    found = find_around(FINE._replace(**change), WATCHFUL, frozenset())
    assert [each.finding for each in found] == [finding]
