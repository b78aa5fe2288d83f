"""What check says of the ways that contacts are flown."""

from pathlib import Path

from tests.service.stations import write_plan, write_station
from tests.service.test_geometries import OVERHEAD
from trunnion.service.briefing import brief
from trunnion.service.briefing_order import BriefingOrder
from trunnion.service.plan_words import FASTER, is_worth_comparing, plan_words
from trunnion.sky.instants import parse_utc

NOW_S = parse_utc("2026-12-01T00:00:00Z")
BEACON = (
    "{id: beacon, target: 'fixed:251.3,18.5', from: 2026-12-01T00:24:00Z, "
    "until: 2026-12-01T00:28:00Z}"
)


def test_a_turn_that_would_point_alike_is_named(tmp_path: Path) -> None:
    order = BriefingOrder(write_station(tmp_path), None, NOW_S)
    write_plan(tmp_path, BEACON)
    (sentence,) = plan_words(brief(order))["beacon"]
    assert sentence == "the first joint begins at -109°, where 251° would point alike"


def test_a_travel_of_less_than_a_turn_leaves_nothing_to_say(tmp_path: Path) -> None:
    station = write_station(tmp_path, {"travel_deg: [-270, 270]": "travel_deg: [-170, 170]"})
    write_plan(tmp_path, BEACON)
    briefing = brief(BriefingOrder(station, None, NOW_S))
    assert plan_words(briefing)["beacon"] == ()
    assert not is_worth_comparing(briefing)


def test_what_a_faster_mount_gains_is_told_with_numbers(tmp_path: Path) -> None:
    order = BriefingOrder(write_station(tmp_path), None, NOW_S)
    write_plan(tmp_path, OVERHEAD)
    briefing, faster = brief(order), brief(order, FASTER)
    assert is_worth_comparing(briefing)
    sentence = plan_words(briefing, faster)["overhead"][-1]
    now, then = briefing.contacts[0].forecast, faster.contacts[0].forecast
    assert now is not None
    assert then is not None
    assert then.worst_error_deg < 0.01 < 0.5 < now.worst_error_deg
    assert sentence == (
        f"joints 2 times as fast: error up to {then.worst_error_deg:.2f}° (0.0 dB) instead of "
        f"{now.worst_error_deg:.2f}° ({now.worst_loss_db:.1f} dB)"
    )
