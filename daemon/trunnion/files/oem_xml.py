"""An orbit ephemeris message in XML."""

from collections.abc import Iterator
from xml.etree.ElementTree import Element

from trunnion.files.ccsds import Entry
from trunnion.files.ccsds_xml import child, content, entries, local_name, messages
from trunnion.files.oem_blocks import RawMessage, RawSegment, RawState

_UNITS = {"X": "km", "Y": "km", "Z": "km", "X_DOT": "km/s", "Y_DOT": "km/s", "Z_DOT": "km/s"}


def read_xml(text: str) -> RawMessage:
    """The message's parts; what cannot be read is among its problems."""
    try:
        root, *others = messages(text, "oem")
    except ValueError as error:
        return RawMessage(None, (), (), ((None, str(error)),))
    problems: list[tuple[int | None, str]] = []
    if others:
        problems.append((None, f"expected one ephemeris message, got {1 + len(others)}"))
    body = child(root, "body")
    segments = [
        _segment(element, number, problems)
        for number, element in enumerate(body if body is not None else (), start=1)
        if local_name(element) == "segment"
    ]
    version = Entry(None, "version", root.get("version", ""))
    header = tuple(entries(child(root, "header")))
    return RawMessage(version, header, tuple(segments), tuple(problems))


def _segment(element: Element, number: int, problems: list[tuple[int | None, str]]) -> RawSegment:
    data = child(element, "data")
    states = (
        [each for each in data if local_name(each) == "stateVector"] if data is not None else []
    )
    raw = []
    for place, state in enumerate(states, start=1):
        wrong = list(_faults(state))
        problems += [(None, f"segment {number}, state {place}: {fault}") for fault in wrong]
        if not wrong:
            values = {local_name(each): content(each) for each in state}
            raw.append(RawState(None, values["EPOCH"], tuple(values[key] for key in _UNITS)))
    return RawSegment(None, tuple(entries(child(element, "metadata"))), tuple(raw))


def _faults(state: Element) -> Iterator[str]:
    present = {local_name(each): each for each in state}
    for key in ("EPOCH", *_UNITS):
        if key not in present:
            yield f"expected {key}, got none"
        elif present[key].get("units", _UNITS.get(key, "")) != _UNITS.get(key, ""):
            yield f"expected {key} in {_UNITS[key]}, got {present[key].get('units')!r}"
