"""Orbit mean-elements messages (CCSDS 502.0-B-3, section 4): one record a satellite.

In keywords or XML as the standard has them, and in the JSON and CSV that distributors make of them,
which leave out what is always the same: centre, frame, time system, theory.
"""

from collections.abc import Iterator, Mapping, Sequence
from math import tau
from typing import NamedTuple

from trunnion.files.ccsds import epoch_s, number
from trunnion.files.problems import did_you_mean
from trunnion.sky.elements import ElementSet, MeanElements

_FIXED = {
    "CENTER_NAME": ("EARTH",),
    "REF_FRAME": ("TEME",),
    "TIME_SYSTEM": ("UTC",),
    "MEAN_ELEMENT_THEORY": ("SGP4", "SGP/SGP4"),
    "EPHEMERIS_TYPE": ("0", "2"),
}
"""What our propagation needs them to be. Ephemeris types 0 and 2 are SGP4, 4 is another theory."""

_ALWAYS_TOLD = ("CENTER_NAME", "REF_FRAME", "TIME_SYSTEM", "MEAN_ELEMENT_THEORY")

_ANGLE = (0.0, 360.0)
_BOUNDS = {
    "MEAN_MOTION": (0.01, 20.0),
    "ECCENTRICITY": (0.0, 0.999999),
    "INCLINATION": (0.0, 180.0),
    "RA_OF_ASC_NODE": _ANGLE,
    "ARG_OF_PERICENTER": _ANGLE,
    "MEAN_ANOMALY": _ANGLE,
    "BSTAR": (-10.0, 10.0),
}
_UNITS = {
    "MEAN_MOTION": ("rev/day", "REV/DAY"),
    "INCLINATION": ("deg",),
    "RA_OF_ASC_NODE": ("deg",),
    "ARG_OF_PERICENTER": ("deg",),
    "MEAN_ANOMALY": ("deg",),
    "BSTAR": ("1/ER",),
}
_KNOWN = (*_FIXED, *_BOUNDS, "EPOCH", "OBJECT_NAME", "OBJECT_ID", "NORAD_CAT_ID")

_MINUTES_A_DAY = 1440.0
_LONGEST_NUMBER = 9


class Field(NamedTuple):
    """The value of a keyword and where it stands; `unit` as written beside it, or nothing."""

    line: int | None
    value: str
    unit: str = ""


class Record(NamedTuple):
    """One message; `is_complete` where the format tells everything, as the standard asks."""

    line: int | None
    fields: Mapping[str, Field]
    is_complete: bool


Fault = tuple[int | None, str, str]
"""Line, keyword and sentence."""


def element_set(record: Record) -> ElementSet | Sequence[Fault]:
    """The element set in a record, or everything that is wrong with it."""
    wrong = [*_fixed_faults(record), *_number_faults(record), *_other_faults(record)]
    if wrong:
        return wrong
    value = {key: float(record.fields[key].value) for key in _BOUNDS}
    identity = _text(record, "NORAD_CAT_ID")
    catalogue_number = int(identity) if identity else 0
    mean = MeanElements(
        bstar=value["BSTAR"],
        eccentricity=value["ECCENTRICITY"],
        argument_of_perigee_deg=value["ARG_OF_PERICENTER"],
        inclination_deg=value["INCLINATION"],
        mean_anomaly_deg=value["MEAN_ANOMALY"],
        mean_motion_rad_min=value["MEAN_MOTION"] * tau / _MINUTES_A_DAY,
        node_deg=value["RA_OF_ASC_NODE"],
    )
    name = _text(record, "OBJECT_NAME") or str(catalogue_number)
    return ElementSet(name, catalogue_number, epoch_s(record.fields["EPOCH"].value), mean=mean)


def _text(record: Record, key: str) -> str:
    return record.fields[key].value if key in record.fields else ""


def _fixed_faults(record: Record) -> Iterator[Fault]:
    for key, allowed in _FIXED.items():
        field = record.fields.get(key)
        if field is None or not field.value:
            if record.is_complete and key in _ALWAYS_TOLD:
                yield _missing(record, key)
        elif field.value.upper() not in allowed:
            yield field.line, key, f"expected {' or '.join(allowed)}, got {field.value[:40]!r}"


def _number_faults(record: Record) -> Iterator[Fault]:
    for key, (low, high) in _BOUNDS.items():
        field = record.fields.get(key)
        if field is None or not field.value:
            yield _missing(record, key)
            continue
        try:
            value = number(field.value)
        except ValueError as error:
            yield field.line, key, str(error)
            continue
        if not low <= value <= high:
            yield field.line, key, f"expected {low:g} to {high:g}, got {field.value[:40]}"
        if field.unit and field.unit not in _UNITS.get(key, ()):
            yield field.line, key, f"expected the unit of the standard, got {field.unit[:20]!r}"


def _other_faults(record: Record) -> Iterator[Fault]:
    epoch = record.fields.get("EPOCH")
    if epoch is None or not epoch.value:
        yield _missing(record, "EPOCH")
    else:
        try:
            epoch_s(epoch.value)
        except ValueError as error:
            yield epoch.line, "EPOCH", str(error)
    identity = record.fields.get("NORAD_CAT_ID", Field(None, ""))
    is_number = identity.value.isascii() and identity.value.isdigit()
    if identity.value and not (is_number and len(identity.value) <= _LONGEST_NUMBER):
        message = f"expected at most {_LONGEST_NUMBER} digits, got {identity.value[:40]!r}"
        yield identity.line, "NORAD_CAT_ID", message
    if not identity.value and not _text(record, "OBJECT_NAME"):
        yield record.line, "OBJECT_NAME", "expected a name or a catalogue number, got neither"


def _missing(record: Record, key: str) -> Fault:
    unknown = [each for each in record.fields if each not in _KNOWN]
    return record.line, key, f"expected a value, got none{did_you_mean(key, unknown)}"
