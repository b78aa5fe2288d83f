"""What the daemon says of itself."""

import json
from math import inf
from pathlib import Path

import pytest

from tests.pilot.flight import START_UTC_S
from tests.service.stations import station_with
from tests.service.turns import ASSIGNMENT, LATE, turn_at
from trunnion.files.station import StationFile
from trunnion.pilot.phase import Wish
from trunnion.safety.emergency import EmergencyStop
from trunnion.safety.transmit import TransmitPermit
from trunnion.service.cadence import Beat
from trunnion.service.link.status import LinkState, LinkStatus
from trunnion.service.score import Score
from trunnion.service.standing_correction import CorrectionInForce
from trunnion.service.status import Health, describe
from trunnion.sky.instants import format_utc
from trunnion.track.correction import Correction


def health_at(utc_s: float) -> Health:
    """All is well."""
    return Health(
        utc_s=utc_s,
        wish=Wish.FOLLOW_PLAN,
        stop=None,
        link=LinkStatus(state=LinkState.UP, connections=3),
        beat=Beat(17, 0.0123, 0),
        missed_turns=5,
        records_trouble=None,
        plan_trouble=None,
        is_planning=False,
        transmit=TransmitPermit(None, "no contact is on"),
        transmit_trouble=None,
        sensors_trouble=None,
    )


HEALTH = health_at(START_UTC_S + 11.5)


@pytest.fixture
def station(tmp_path: Path) -> StationFile:
    return station_with(tmp_path)


def test_before_the_first_turn_it_is_starting_and_knows_no_more(station: StationFile) -> None:
    told = describe(station, None, None, HEALTH)
    assert (told["station"], told["phase"]) == ("Ternholm", "starting")
    assert told["time"] == format_utc(START_UTC_S + 11.5)
    assert told["contact"] is told["mount"] is told["surroundings"] is None
    assert told["interventions"] == told["trouble"] == []


def test_in_a_contact_it_tells_where_target_and_mount_are_and_how_well(
    station: StationFile,
) -> None:
    score = Score(1.6, 0.31)
    score.add(START_UTC_S + 11.0, 0.25, 0.5)
    told = describe(station, turn_at(11.5, 0.17), score, HEALTH)
    contact, mount = told["contact"], told["mount"]
    assert isinstance(contact, dict)
    assert (contact["id"], contact["target"]) == ("evening", "fixed:171.3,41.9")
    assert contact["begin"] == format_utc(ASSIGNMENT.begin_s)
    assert contact["error_deg"] == 0.17
    assert contact["azimuth_deg"] is not None
    assert contact["so_far"]["worst_error_deg"] == 0.25
    assert isinstance(mount, dict)
    assert mount["reading_deg"] == [171.2, 41.8]
    assert mount["reading_age_s"] == pytest.approx(0.031)
    assert mount["demand_deg"] == mount["order_deg"] == [171.3, 41.9]


def test_a_halt_is_no_order_and_has_its_reason(station: StationFile) -> None:
    told = describe(station, turn_at(11.5, 0.17, interventions=(LATE,)), None, HEALTH)
    mount = told["mount"]
    assert isinstance(mount, dict)
    assert mount["order_deg"] is None
    assert told["interventions"] == [
        "tracking evening, asked for 171.3°/41.9°: the control turn came late"
    ]


def test_a_stop_tells_its_cause_and_since_when(station: StationFile) -> None:
    stopped = HEALTH._replace(stop=EmergencyStop("a cow", START_UTC_S - 7.0), wish=Wish.HOLD)
    told = describe(station, turn_at(11.5), None, stopped)
    assert told["emergency_stop"] == {"cause": "a cow", "since": format_utc(START_UTC_S - 7.0)}
    assert told["wish"] == "hold"


def test_a_stop_by_a_damaged_latch_knows_no_time(station: StationFile) -> None:
    stopped = HEALTH._replace(stop=EmergencyStop("damaged", 0.0))
    told = describe(station, turn_at(11.5), None, stopped)
    assert told["emergency_stop"] == {"cause": "damaged", "since": None}


def test_every_trouble_is_told(station: StationFile) -> None:
    troubled = HEALTH._replace(
        plan_trouble="no plan",
        records_trouble="disk full",
        transmit_trouble="no file",
        sensors_trouble="no wind",
        wish_trouble="wish lost",
        correction_trouble="correction lost",
    )
    told = describe(station, turn_at(11.5, trouble="no way"), None, troubled)
    assert told["trouble"] == [
        "no way",
        "no plan",
        "disk full",
        "no file",
        "no wind",
        "wish lost",
        "correction lost",
    ]


def test_permission_correction_and_link_are_told(station: StationFile) -> None:
    correction = CorrectionInForce(Correction(time_bias_s=0.4), "evening")
    permitted = HEALTH._replace(transmit=TransmitPermit(600.0, None), correction=correction)
    told = describe(station, turn_at(11.5), None, permitted)
    assert told["transmit"] == {"is_permitted": True, "reason": None}
    given, link = told["correction"], told["link"]
    assert isinstance(given, dict)
    assert (given["contact"], given["time_bias_s"]) == ("evening", 0.4)
    assert isinstance(link, dict)
    assert (link["state"], link["connections"]) == (LinkState.UP.value, 3)
    assert told["turns"] == {"lateness_s": 0.0123, "missed": 5}


def test_all_of_it_is_json_even_of_a_clock_that_nobody_ever_set(station: StationFile) -> None:
    turn = turn_at(11.5, 0.17)
    turn = turn._replace(world=turn.world._replace(clock_error_s=inf, wind_gust_m_s=11.3))
    told = describe(station, turn, Score(1.6, 0.31), HEALTH)
    again = json.loads(json.dumps(told, allow_nan=False))
    assert again["surroundings"]["clock_error_s"] is None
    assert again["surroundings"]["wind_gust_m_s"] == 11.3
