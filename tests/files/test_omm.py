"""Mean-elements messages in their four formats: against the sgp4 package, and bad ones."""

import json
from contextlib import suppress
from io import StringIO
from math import dist
from pathlib import Path

import pytest
from hypothesis import given
from hypothesis import strategies as st
from sgp4 import omm as reference
from sgp4.api import Satrec

from trunnion.files.elements import load_elements
from trunnion.files.omm import element_set
from trunnion.files.omm_formats import reader_of
from trunnion.files.problems import FileProblems
from trunnion.sky.elements import ElementSet, Propagator
from trunnion.sky.instants import parse_utc

FIELDS = {
    "OBJECT_NAME": "QUILLON-9",
    "OBJECT_ID": "2026-903A",
    "CENTER_NAME": "EARTH",
    "REF_FRAME": "TEME",
    "TIME_SYSTEM": "UTC",
    "MEAN_ELEMENT_THEORY": "SGP4",
    "EPOCH": "2026-11-30T18:03:07.123456",
    "MEAN_MOTION": "15.17962949",
    "ECCENTRICITY": "0.0011234",
    "INCLINATION": "97.4512",
    "RA_OF_ASC_NODE": "61.3017",
    "ARG_OF_PERICENTER": "83.2093",
    "MEAN_ANOMALY": "320.7741",
    "EPHEMERIS_TYPE": "0",
    "CLASSIFICATION_TYPE": "U",
    "NORAD_CAT_ID": "290117",
    "ELEMENT_SET_NO": "12",
    "REV_AT_EPOCH": "2204",
    "BSTAR": "0.000031",
    "MEAN_MOTION_DOT": "0.00000112",
    "MEAN_MOTION_DDOT": "0",
}
_IN_HEADER = "CREATION_DATE = 2026-12-01T00:00:00\nORIGINATOR = EXAMPLE\n"
_IN_METADATA = tuple(FIELDS)[:6]
_IN_ELEMENTS = tuple(FIELDS)[6:13]


def kvn(**changes: str) -> str:
    fields = {**FIELDS, **changes}
    lines = "".join(f"{key} = {value}\n" for key, value in fields.items() if value)
    return f"CCSDS_OMM_VERS = 3.0\nCOMMENT invented\n{_IN_HEADER}{lines}"


def xml(**changes: str) -> str:
    fields = {key: value for key, value in {**FIELDS, **changes}.items() if value}

    def part(tag: str, keys: list[str]) -> str:
        return f"<{tag}>{''.join(f'<{k}>{fields.pop(k)}</{k}>' for k in keys)}</{tag}>"

    metadata = part("metadata", [key for key in _IN_METADATA if key in fields])
    elements = part("meanElements", [key for key in _IN_ELEMENTS if key in fields])
    rest = part("tleParameters", list(fields))
    return (
        '<?xml version="1.0" encoding="UTF-8"?><ndm><omm id="CCSDS_OMM_VERS" version="2.0">'
        f"<header><CREATION_DATE/><ORIGINATOR/></header><body><segment>{metadata}"
        f"<data>{elements}{rest}</data></segment></body></omm></ndm>"
    )


def as_json(**changes: str) -> str:
    fields = {key: value for key, value in {**FIELDS, **changes}.items() if value}
    numbers = {"MEAN_MOTION", "ECCENTRICITY", "NORAD_CAT_ID"}
    plain = {
        key: json.loads(value)
        if key in numbers and value[0].isdigit() and value.isascii()
        else value
        for key, value in fields.items()
    }
    return json.dumps([plain])


def as_csv(**changes: str) -> str:
    fields = {**FIELDS, **changes}
    keys = [key for key in fields if key not in _IN_METADATA[2:6] or key in changes]
    return f"{','.join(keys)}\n{','.join(fields[key] for key in keys)}\n"


WRITERS = {"omm": kvn, "xml": xml, "json": as_json, "csv": as_csv}


def loaded(folder: Path, text: str) -> tuple[ElementSet, ...]:
    path = folder / "elements.omm"
    path.write_text(text, encoding="utf-8")
    return load_elements(path)


def problems(folder: Path, text: str) -> list[tuple[str, str]]:
    with pytest.raises(FileProblems) as caught:
        loaded(folder, text)
    return [(each.key, each.message) for each in caught.value.problems]


@pytest.mark.parametrize("suffix", WRITERS)
def test_every_format_gives_what_the_sgp4_package_gives(suffix: str, tmp_path: Path) -> None:
    (found,) = loaded(tmp_path, WRITERS[suffix]())
    assert (found.name, found.catalogue_number) == ("QUILLON-9", 290117)
    assert found.epoch_utc_s == pytest.approx(parse_utc("2026-11-30T18:03:07.123456Z"), abs=1e-6)
    satrec = Satrec()
    reference.initialize(satrec, next(reference.parse_csv(StringIO(as_csv()))))
    for days in (0.0, 0.731, 9.417):
        moment = satrec.jdsatepoch, satrec.jdsatepochF + days
        error, position_km, velocity_km_s = satrec.sgp4(*moment)
        ours_km, ours_km_s = Propagator(found).at(*moment)
        assert error == 0
        assert dist(ours_km, position_km) < 1e-5
        assert dist(ours_km_s, velocity_km_s) < 1e-8


def test_several_messages_and_whole_folders_are_read(tmp_path: Path) -> None:
    two = kvn() + kvn(OBJECT_NAME="QUILLON-10", NORAD_CAT_ID="123456789")
    assert [each.catalogue_number for each in loaded(tmp_path, two)] == [290117, 123456789]
    for suffix, write in WRITERS.items():
        (tmp_path / f"more.{suffix}").write_text(write(OBJECT_NAME=suffix.upper()))
    names = {each.name for each in load_elements(tmp_path)}
    assert names == {"QUILLON-9", "QUILLON-10", "OMM", "XML", "JSON", "CSV"}


def test_units_of_the_standard_may_stand_behind_values(tmp_path: Path) -> None:
    text = kvn(MEAN_MOTION="15.17962949 [rev/day]", INCLINATION="97.4512 [deg]")
    assert loaded(tmp_path, text) == loaded(tmp_path, kvn())
    wrong = problems(tmp_path, kvn(INCLINATION="1.7008 [rad]"))
    assert wrong == [("INCLINATION", "expected the unit of the standard, got 'rad'")]


@pytest.mark.parametrize("suffix", WRITERS)
@pytest.mark.parametrize(
    ("key", "value", "answer"),
    [
        ("MEAN_ELEMENT_THEORY", "DSST", "expected SGP4 or SGP/SGP4, got 'DSST'"),
        ("CENTER_NAME", "MARS", "expected EARTH, got 'MARS'"),
        ("REF_FRAME", "EME2000", "expected TEME, got 'EME2000'"),
        ("TIME_SYSTEM", "TAI", "expected UTC, got 'TAI'"),
        ("EPHEMERIS_TYPE", "4", "expected 0 or 2, got '4'"),
        ("ECCENTRICITY", "1.2", "expected 0 to 0.999999, got 1.2"),
        ("MEAN_ANOMALY", "12.5 deg", "expected a number without a unit"),
        ("MEAN_MOTION", "", "expected a value, got none"),
        ("BSTAR", "", "expected a value, got none"),
        ("EPOCH", "2026-11-31T00:00:00", "expected an epoch that exists"),
        ("NORAD_CAT_ID", "1234567890", "expected at most 9 digits"),
    ],
)
def test_a_message_for_something_else_is_refused(
    suffix: str, key: str, value: str, answer: str, tmp_path: Path
) -> None:
    text = WRITERS[suffix](**{key: value})
    ((told, message),) = problems(tmp_path, text)
    assert (told, message.removeprefix("record 1: ")[: len(answer)]) == (key, answer)


def test_a_misspelt_keyword_is_suggested(tmp_path: Path) -> None:
    text = kvn(MEAN_ANOMALY="", MEAN_ANOMOLY="320.7741")
    ((key, message),) = problems(tmp_path, text)
    assert (key, message) == (
        "MEAN_ANOMALY",
        "expected a value, got none; did you mean 'MEAN_ANOMOLY'?",
    )


def test_entity_bombs_are_refused(tmp_path: Path) -> None:
    bomb = '<!DOCTYPE omm [<!ENTITY a "aa"><!ENTITY b "&a;&a;&a;">]>' + xml()[38:]
    ((_, message),) = problems(tmp_path, bomb)
    assert "document type" in message


@given(
    st.sampled_from(sorted(WRITERS)),
    st.integers(min_value=0, max_value=900),
    st.integers(min_value=0, max_value=40),
    st.text(max_size=60),
)
def test_any_damage_gives_elements_or_faults(
    suffix: str, place: int, removed: int, noise: str
) -> None:
    text = WRITERS[suffix]()
    damaged = text[:place] + noise + text[place + removed :]
    reader = reader_of(damaged)
    if reader is not None:
        with suppress(ValueError):
            for record in reader(damaged):
                assert element_set(record)
