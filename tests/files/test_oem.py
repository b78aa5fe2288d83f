"""Orbit ephemeris messages: what is read, what is interpolated, what is refused in which words."""

from contextlib import suppress
from math import dist
from pathlib import Path

import erfa
import pytest
from hypothesis import given
from hypothesis import strategies as st

from tests.files.oem_text import HEADER, NODES, epoch, kvn, on_circle, segment, xml
from trunnion.files.ccsds import epoch_s, tai_clock
from trunnion.files.oem import read_oem
from trunnion.files.problems import FileProblems
from trunnion.files.target_file import load_target_file
from trunnion.sky.ephemeris import Ephemeris
from trunnion.sky.errors import NoPosition
from trunnion.sky.frames import Frame
from trunnion.sky.instants import parse_utc
from trunnion.sky.leap_seconds import LeapSeconds

PATH = Path("craft.oem")
UTC_S = parse_utc("2026-03-01T12:00:00Z")
TAI_MINUS_UTC_S = 37.0

ROUNDING_KM = 2e-6
"""The nodes are written to a millimetre."""


def at(ephemeris: Ephemeris, seconds: float) -> tuple[tuple[float, ...], tuple[float, ...]]:
    tai_s = UTC_S + TAI_MINUS_UTC_S + seconds
    one = ephemeris.segment_at(tai_s)
    return one.curve.at(tai_s - one.origin_tai_s)


def problems(text: str) -> list[tuple[int | None, str, str]]:
    with pytest.raises(FileProblems) as caught:
        read_oem(PATH, text)
    return [(each.line, each.key, each.message) for each in caught.value.problems]


@pytest.mark.parametrize("text", [kvn(), xml(), kvn().replace("\n", "\r\n")])
def test_both_ways_of_writing_give_the_same_craft(text: str, tmp_path: Path) -> None:
    path = tmp_path / "craft.oem"
    path.write_text(text)
    ephemeris = load_target_file(path)
    assert isinstance(ephemeris, Ephemeris)
    assert (ephemeris.name, ephemeris.object_id) == ("TESTSAT", "2026-999A")
    assert [each.frame for each in ephemeris.segments] == [Frame.ICRF]
    for minute in range(NODES):
        assert dist(at(ephemeris, 60.0 * minute)[0], on_circle(60.0 * minute)[0]) < ROUNDING_KM


@pytest.mark.parametrize(
    ("method", "degree", "within_m"),
    [
        ("LAGRANGE", "7", 0.003),
        ("LAGRANGE", "5", 0.01),
        ("LAGRANGE", "3", 5.0),
        ("HERMITE", "3", 0.4),
        ("HERMITE", "7", 0.003),
        ("LINEAR", "1", 3800.0),
        ("", "", 0.003),
    ],
)
def test_between_the_nodes_it_is_as_good_as_its_method(
    method: str, degree: str, within_m: float
) -> None:
    """Figures as computed for the mid-interval of a circular orbit at 500 km; common practice."""
    ephemeris = read_oem(PATH, kvn(INTERPOLATION=method, INTERPOLATION_DEGREE=degree))
    for seconds in (210.0, 233.7, 251.9):
        position, velocity = at(ephemeris, seconds)
        truth, true_velocity = on_circle(seconds)
        assert 1000.0 * dist(position, truth) < within_m
        if method != "LINEAR":
            assert dist(velocity, true_velocity) < 3e-4


def test_useable_intervals_are_honoured_and_nothing_is_extrapolated() -> None:
    text = kvn(USEABLE_START_TIME=epoch(2), USEABLE_STOP_TIME=epoch(6))
    ephemeris = read_oem(PATH, text)
    at(ephemeris, 120.0)
    at(ephemeris, 360.0)
    for seconds in (119.9, 360.1):
        with pytest.raises(NoPosition, match="TESTSAT"):
            at(ephemeris, seconds)


def two_segments(first_end: int, second_begin: int) -> str:
    hermite = {"INTERPOLATION": "HERMITE", "INTERPOLATION_DEGREE": "3"}
    first = segment(range(first_end + 1), STOP_TIME=epoch(first_end), **hermite)
    second = segment(range(second_begin, NODES), START_TIME=epoch(second_begin), **hermite)
    return HEADER + first + second


def test_between_segments_there_is_no_position_and_a_shared_end_is_no_gap() -> None:
    gap = read_oem(PATH, two_segments(3, 5))
    with pytest.raises(NoPosition):
        at(gap, 240.0)
    at(gap, 180.0)
    touching = read_oem(PATH, two_segments(4, 4))
    assert dist(at(touching, 240.0)[0], on_circle(240.0)[0]) < ROUNDING_KM


def test_segments_that_overlap_are_refused() -> None:
    assert any("got an overlap" in each[2] for each in problems(two_segments(5, 4)))


def test_comments_covariances_and_accelerations_are_passed_over() -> None:
    text = kvn().replace("META_START\n", "COMMENT one\nMETA_START\nCOMMENT two\n")
    lines = text.splitlines()
    lines = [f"{line} 0.0 0.1 0.2" if line.startswith("2026-") else line for line in lines]
    block = ["COVARIANCE_START", "EPOCH = 2026-03-01T12:00:00", "1.0", "COVARIANCE_STOP"]
    ephemeris = read_oem(PATH, "\n".join([*lines, *block]))
    assert dist(at(ephemeris, 60.0)[0], on_circle(60.0)[0]) < ROUNDING_KM


@pytest.mark.parametrize(
    ("system", "ahead_of_utc_s"),
    [("UTC", 0.0), ("TAI", 37.0), ("TT", 69.184), ("GPS", 18.0), ("TDB", 69.184)],
)
def test_time_systems_are_turned_into_utc(system: str, ahead_of_utc_s: float) -> None:
    """37 leap seconds (IERS Bulletin C); TT = TAI + 32.184 s; GPS = TAI − 19 s by definition."""
    clock = tai_clock(system, LeapSeconds.packaged())
    tolerance_s = 0.002 if system == "TDB" else 1e-6
    assert clock(UTC_S + ahead_of_utc_s) == pytest.approx(UTC_S + 37.0, abs=tolerance_s)


def test_tdb_is_that_of_erfa() -> None:
    """ERFA's dtdb (Fairhead and Bretagnon 1990), for the Earth's centre."""
    clock = tai_clock("TDB", LeapSeconds.packaged())
    for days in (-3000.2, 123.4, 9876.5):
        tt_s = 946_728_000.0 + 86400.0 * days
        ours = tt_s - 32.184 - clock(tt_s)
        assert ours == pytest.approx(erfa.dtdb(2451545.0, days, 0.0, 0.0, 0.0, 0.0), abs=5e-5)


@pytest.mark.parametrize(
    ("text", "utc"),
    [
        ("2026-03-01T12:00:00", "2026-03-01T12:00:00Z"),
        ("2026-060T12:00:00.25", "2026-03-01T12:00:00.25Z"),
        ("2024-366T23:59:59.Z", "2024-12-31T23:59:59Z"),
        ("2026-03-01T12:00:00.123456789", "2026-03-01T12:00:00.123456Z"),
    ],
)
def test_epochs_are_read_by_month_and_by_day_of_the_year(text: str, utc: str) -> None:
    assert epoch_s(text) == pytest.approx(parse_utc(utc), abs=1e-5)


@pytest.mark.parametrize(
    "text",
    [
        *("2026-02-30T00:00:00", "2025-366T00:00:00", "2026-03-01 12:00:00"),
        *("2016-12-31T23:59:60", "2026-03-01T24:00:00", "2026-03-01T12:00", "soon"),
        "2026-000T00:00:00",
    ],
)
def test_epochs_that_are_none_are_refused(text: str) -> None:
    with pytest.raises(ValueError, match="expected"):
        epoch_s(text)


@pytest.mark.parametrize(
    ("changes", "key", "answer"),
    [
        ({"CENTER_NAME": "MARS"}, "CENTER_NAME", "expected the centre EARTH, got 'MARS'"),
        ({"REF_FRAME": "TOD"}, "REF_FRAME", "expected one of the frames ICRF"),
        ({"TIME_SYSTEM": "UT1"}, "TIME_SYSTEM", "expected one of the time systems UTC"),
        ({"OBJECT_ID": ""}, "OBJECT_ID", "expected a value, got none"),
        ({"INTERPOLATION_DEGREE": ""}, "INTERPOLATION_DEGREE", "expected it, got none"),
        ({"INTERPOLATION_DEGREE": "12"}, "INTERPOLATION_DEGREE", "expected at least 13 nodes"),
        ({"INTERPOLATION_DEGREE": "7 [n/a]"}, "INTERPOLATION_DEGREE", "expected a whole number"),
        ({"INTERPOLATION": "SPLINE"}, "INTERPOLATION", "expected one of LAGRANGE"),
        ({"STOP_TIME": "2026-03-01T12:09:00"}, "", "expected nodes from START_TIME to STOP_TIME"),
        ({"START_TIME": "2026-03-01T12:08:30"}, "", "expected start, useable start"),
        ({"STOP_TIME": "tomorrow"}, "STOP_TIME", "expected an epoch"),
        ({"OBJECT_NAMES": "X"}, "OBJECT_NAMES", "expected a keyword of the standard; did you mean"),
    ],
)
@pytest.mark.parametrize("write", [kvn, xml])
def test_metadata_that_cannot_be_trusted_is_refused(
    write: object, changes: dict[str, str], key: str, answer: str
) -> None:
    assert callable(write)
    found = problems(write(**changes))
    assert (key, answer) in [(each[1], each[2][: len(answer)]) for each in found]


@pytest.mark.parametrize(
    ("before", "after", "line", "answer"),
    [
        ("12:03:00.000 ", "12:02:00.000 ", 18, "expected an epoch after the one before it"),
        ("12:03:00.000 ", "12:01:30.000 ", 18, "expected an epoch after the one before it"),
        ("12:03:00.000 ", "12:03:60.000 ", 18, "expected a second of 0 to 59"),
        ("6862.976657", "nan", 16, "expected a number"),
        ("6862.976657", "6862.976657 [km]", 16, "expected an epoch, three coordinates"),
        ("6862.976657", "6.8e999", 16, "expected a finite number"),
        ("6862.976657 ", "", 16, "expected an epoch, three coordinates"),
    ],
)
def test_nodes_that_cannot_be_trusted_are_refused_with_their_line(
    before: str, after: str, line: int, answer: str
) -> None:
    found = problems(kvn().replace(before, after))
    assert (line, answer) in [(each[0], each[2][: len(answer)]) for each in found]


def test_a_file_cut_off_is_refused() -> None:
    whole = kvn()
    for end in (0.3, 0.55, 0.8, 0.97):
        assert problems(whole[: int(end * len(whole))])


def test_another_object_in_a_later_segment_is_refused() -> None:
    later = segment(range(4, NODES), START_TIME=epoch(4), OBJECT_ID="2026-998A")
    text = HEADER + segment(range(5), STOP_TIME=epoch(4)) + later
    found = [(key, sentence[:32]) for _, key, sentence in problems(text)]
    assert ("OBJECT_ID", "expected the same in all segment") in found


def test_entity_bombs_and_broken_xml_are_refused() -> None:
    bomb = '<!DOCTYPE oem [<!ENTITY a "aaaaaaaaaa"><!ENTITY b "&a;&a;&a;&a;&a;&a;">]><oem>&b;</oem>'
    assert "document type" in problems(bomb)[0][2]
    assert "expected XML" in problems(xml()[:-20])[0][2]
    assert "expected X in km, got 'm'" in problems(xml().replace('units="km"', 'units="m"'))[0][2]


@given(
    st.text(max_size=120),
    st.integers(min_value=0, max_value=len(kvn())),
    st.integers(min_value=0, max_value=60),
    st.sampled_from([kvn, xml]),
)
def test_any_damage_gives_an_ephemeris_or_problems(
    noise: str, place: int, removed: int, write: object
) -> None:
    assert callable(write)
    text = write()
    with suppress(FileProblems):
        read_oem(PATH, text[:place] + noise + text[place + removed :])
    with suppress(FileProblems):
        read_oem(PATH, noise)
