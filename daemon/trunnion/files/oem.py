"""Orbit ephemeris messages (CCSDS 502.0-B-3, section 5), in keywords and values or in XML.

Read as the standard says, and refused where it says nothing or where it would be wrong to guess:
frames and time systems that cannot be turned into ours exactly, another centre than the Earth,
nodes that are cut off before the span they promise.
"""

from collections.abc import Iterator, Sequence
from itertools import pairwise
from pathlib import Path
from typing import NamedTuple

import numpy as np

from trunnion.files.ccsds import Entry, epoch_s, number, tai_clock
from trunnion.files.oem_blocks import RawMessage, RawSegment, RawState
from trunnion.files.oem_kvn import read_kvn
from trunnion.files.oem_xml import read_xml
from trunnion.files.problems import FileProblems, Problem, did_you_mean
from trunnion.files.reading import read_text
from trunnion.sky.ephemeris import Ephemeris, Segment
from trunnion.sky.frames import Frame
from trunnion.sky.interpolation import Curve, Interpolation, Method
from trunnion.sky.leap_seconds import LeapSeconds

LIMIT_BYTES = 20_000_000
VERSIONS = ("1.0", "2.0", "3.0")
HIGHEST_DEGREE = 15
DEFAULT_NODES = 4
"""Without a method in the file: Hermite through four nodes, or as many as there are."""

_HEADER = ("CREATION_DATE", "ORIGINATOR")
_HEADER_OPTIONAL = ("CLASSIFICATION", "MESSAGE_ID")
_METADATA = (
    *("OBJECT_NAME", "OBJECT_ID", "CENTER_NAME", "REF_FRAME", "TIME_SYSTEM"),
    *("START_TIME", "STOP_TIME"),
)
_METADATA_OPTIONAL = (
    *("REF_FRAME_EPOCH", "USEABLE_START_TIME", "USEABLE_STOP_TIME"),
    *("INTERPOLATION", "INTERPOLATION_DEGREE"),
)
_FRAMES = {
    **dict.fromkeys(("ICRF", "ICRF2", "ICRF3", "GCRF"), Frame.ICRF),
    **dict.fromkeys(("EME2000", "J2000"), Frame.EME2000),
    "TEME": Frame.TEME,
    **dict.fromkeys(
        ("ITRF", "ITRF-93", "ITRF93", "ITRF-97", "ITRF97", "ITRF2000", "ITRF2005", "ITRF2008"),
        Frame.ITRF,
    ),
    **dict.fromkeys(("ITRF2014", "ITRF2020"), Frame.ITRF),
}

_ROUNDING_S = 1e-3
"""Spans and nodes may be written with different numbers of digits."""


class _Fault(Exception):  # noqa: N818 - it never leaves this module
    def __init__(self, line: int | None, key: str, message: str) -> None:
        super().__init__(message)
        self.line, self.key, self.message = line, key, message


def load_oem(path: Path) -> Ephemeris:
    """Return the ephemeris in a file; raises FileProblems with everything wrong."""
    return read_oem(path, read_text(path, LIMIT_BYTES))


def read_oem(path: Path, text: str) -> Ephemeris:
    """Return the ephemeris in a text; raises FileProblems."""
    raw = read_xml(text) if text.lstrip().startswith("<") else read_kvn(text)
    faults = [_Fault(line, "", sentence) for line, sentence in raw.problems]
    faults += _message_faults(raw)
    segments: list[Segment] = []
    for segment in raw.segments:
        try:
            segments.append(_segment(segment, faults))
        except _Fault as fault:
            faults.append(fault)
    if not faults:
        faults += _order_faults(segments)
    if faults:
        raise FileProblems(Problem(str(path), f.line, f.key, f.message) for f in faults)
    named = _values(raw.segments[0].metadata)
    return Ephemeris(named["OBJECT_NAME"].value, named["OBJECT_ID"].value, tuple(segments))


def _message_faults(raw: RawMessage) -> Iterator[_Fault]:
    if raw.version is None or raw.version.value not in VERSIONS:
        got = raw.version.value[:20] if raw.version else "none"
        line = raw.version.line if raw.version else None
        yield _Fault(line, "", f"expected version {', '.join(VERSIONS)}, got {got}")
    yield from _key_faults(raw.header, _HEADER, _HEADER_OPTIONAL, None)
    if not raw.segments:
        yield _Fault(None, "", "expected at least one segment, got none")
    for key in ("OBJECT_NAME", "OBJECT_ID", "TIME_SYSTEM"):
        values = {_values(each.metadata)[key].value for each in raw.segments if _has(each, key)}
        if len(values) > 1:
            listed = ", ".join(sorted(values))[:100]
            yield _Fault(None, key, f"expected the same in all segments, got {listed}")


def _has(segment: RawSegment, key: str) -> bool:
    return key in _values(segment.metadata)


def _values(entries: Sequence[Entry]) -> dict[str, Entry]:
    return {entry.key: entry for entry in entries}


def _key_faults(
    entries: Sequence[Entry], needed: Sequence[str], optional: Sequence[str], line: int | None
) -> Iterator[_Fault]:
    present = _values(entries)
    for key in needed:
        if key not in present or not present[key].value:
            yield _Fault(line, key, "expected a value, got none")
    seen: set[str] = set()
    for entry in entries:
        if entry.key not in (*needed, *optional):
            suggestion = did_you_mean(entry.key, (*needed, *optional))
            yield _Fault(entry.line, entry.key, f"expected a keyword of the standard{suggestion}")
        if entry.key in seen:
            yield _Fault(entry.line, entry.key, "expected it once in its block, got it again")
        seen.add(entry.key)


class _Span(NamedTuple):
    start_s: float
    stop_s: float
    useable_start_s: float
    useable_stop_s: float


def _segment(raw: RawSegment, faults: list[_Fault]) -> Segment:
    wrong = list(_key_faults(raw.metadata, _METADATA, _METADATA_OPTIONAL, raw.line))
    faults += wrong
    values = _values(raw.metadata)
    if any(key not in values for key in _METADATA):
        raise _Fault(raw.line, "", "expected a whole block of metadata")
    if values["CENTER_NAME"].value.upper() != "EARTH":
        raise _told(values["CENTER_NAME"], "expected the centre EARTH")
    frame = _FRAMES.get(values["REF_FRAME"].value.upper())
    if frame is None:
        known = ", ".join(dict.fromkeys(each.value for each in Frame))
        raise _told(values["REF_FRAME"], f"expected one of the frames {known}")
    times, positions, velocities = _nodes(raw.states, faults)
    span = _span(values, times, raw)
    try:
        clock = tai_clock(values["TIME_SYSTEM"].value, LeapSeconds.packaged())
    except ValueError as error:
        raise _Fault(values["TIME_SYSTEM"].line, "TIME_SYSTEM", str(error)) from None
    tai_s = np.array([clock(each) for each in times])
    how = _interpolation(values, len(times))
    return Segment(
        frame,
        clock(span.useable_start_s),
        clock(span.useable_stop_s),
        float(tai_s[0]),
        Curve.through(tai_s - tai_s[0], positions, velocities, how),
    )


def _told(entry: Entry, expected: str) -> _Fault:
    return _Fault(entry.line, entry.key, f"{expected}, got {entry.value[:40]!r}")


def _nodes(
    states: Sequence[RawState], faults: list[_Fault]
) -> tuple[list[float], np.ndarray, np.ndarray]:
    times: list[float] = []
    numbers: list[list[float]] = []
    for state in states:
        try:
            values = [number(each) for each in state.numbers]
            times.append(epoch_s(state.epoch))
            numbers.append(values)
        except ValueError as error:
            faults.append(_Fault(state.line, "", str(error)))
    if len(times) == len(states):
        for (before, after), state in zip(pairwise(times), states[1:], strict=True):
            if not after > before:
                message = "expected an epoch after the one before it"
                faults.append(_Fault(state.line, "", f"{message}, got {state.epoch!r}"))
    if len(times) < 2 or faults:
        line = states[0].line if states else None
        raise _Fault(line, "", "expected at least two nodes in order, to interpolate between")
    table = np.array(numbers)
    return times, table[:, :3], table[:, 3:]


def _span(values: dict[str, Entry], times: list[float], raw: RawSegment) -> _Span:
    def at(key: str, default_s: float = 0.0) -> float:
        if key not in values:
            return default_s
        try:
            return epoch_s(values[key].value)
        except ValueError as error:
            raise _Fault(values[key].line, key, str(error)) from None

    start_s, stop_s = at("START_TIME"), at("STOP_TIME")
    span = _Span(
        start_s, stop_s, at("USEABLE_START_TIME", start_s), at("USEABLE_STOP_TIME", stop_s)
    )
    if not start_s <= span.useable_start_s < span.useable_stop_s <= stop_s:
        raise _Fault(raw.line, "", "expected start, useable start, useable stop and stop in order")
    if times[0] > start_s + _ROUNDING_S or times[-1] < stop_s - _ROUNDING_S:
        raise _Fault(
            raw.states[-1].line,
            "",
            "expected nodes from START_TIME to STOP_TIME, got fewer: is the file cut off?",
        )
    return span


def _interpolation(values: dict[str, Entry], count: int) -> Interpolation:
    if "INTERPOLATION" not in values:
        return Interpolation(Method.HERMITE, 2 * min(DEFAULT_NODES, count) - 1)
    try:
        method = Method(values["INTERPOLATION"].value.upper())
    except ValueError:
        known = ", ".join(each.value for each in Method)
        raise _told(values["INTERPOLATION"], f"expected one of {known}") from None
    if method is Method.LINEAR and "INTERPOLATION_DEGREE" not in values:
        return Interpolation(method, 1)
    if "INTERPOLATION_DEGREE" not in values:
        raise _Fault(values["INTERPOLATION"].line, "INTERPOLATION_DEGREE", "expected it, got none")
    entry = values["INTERPOLATION_DEGREE"]
    if not (entry.value.isascii() and entry.value.isdigit() and len(entry.value) < 4):
        raise _told(entry, f"expected a whole number of 1 to {HIGHEST_DEGREE}")
    how = Interpolation(method, int(entry.value))
    if not 1 <= how.degree <= HIGHEST_DEGREE or (method is Method.LINEAR and how.degree != 1):
        raise _told(entry, f"expected a degree of 1 to {HIGHEST_DEGREE}, 1 for LINEAR")
    if how.nodes > count or how.nodes < 1:
        raise _told(entry, f"expected at least {how.nodes} nodes for this degree")
    return how


def _order_faults(segments: Sequence[Segment]) -> Iterator[_Fault]:
    for place, (before, after) in enumerate(pairwise(segments), start=2):
        if after.begin_tai_s < before.end_tai_s:
            yield _Fault(
                None,
                "",
                f"expected segment {place} to be useable from the end of the one before it on, "
                "got an overlap",
            )
