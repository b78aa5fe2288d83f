"""The four ways in which mean-elements messages are written, each into records."""

import csv
import json
import re
from collections.abc import Callable, Iterator
from io import StringIO
from xml.etree.ElementTree import Element

from trunnion.files.ccsds import keyword, kvn_lines
from trunnion.files.ccsds_xml import content, local_name, messages
from trunnion.files.omm import Field, Record

VERSION = "CCSDS_OMM_VERS"
_VERSIONS = ("1.0", "2.0", "3.0")
_WITH_UNIT = re.compile(r"(.*?)\s*\[([^\]]*)\]", re.ASCII)

Reader = Callable[[str], Iterator[Record]]
"""Yields records; raises ValueError with a sentence, after its line where it has one."""


def reader_of(text: str) -> Reader | None:
    """What reads this text, or None where it is no mean-elements message."""
    begin = text.lstrip()[:4000]
    first_line = begin.partition("\n")[0]
    if begin.startswith(VERSION):
        return read_kvn
    if begin.startswith("<"):
        return read_xml
    if begin.startswith(("{", "[")):
        return read_json
    if "MEAN_MOTION" in first_line and "," in first_line:
        return read_csv
    return None


def read_kvn(text: str) -> Iterator[Record]:
    """Messages one after another, each begun by its version."""
    fields: dict[str, Field] = {}
    begin = 0
    for line, content_ in kvn_lines(text):
        found = keyword(content_)
        if found is None:
            raise ValueError(f"line {line}: expected KEYWORD = value, got {content_[:60]!r}")
        key, value = found
        if key == VERSION:
            _check_version(value)
            if fields:
                yield Record(begin, fields, is_complete=True)
            fields, begin = {}, line
            continue
        if key in fields:
            raise ValueError(f"line {line}: expected {key} once in a message, got it again")
        with_unit = _WITH_UNIT.fullmatch(value)
        fields[key] = Field(line, *with_unit.groups()) if with_unit else Field(line, value)
    yield Record(begin, fields, is_complete=True)


def read_xml(text: str) -> Iterator[Record]:
    """One `omm`, or those in an `ndm`."""
    for message in messages(text, "omm"):
        _check_version(message.get("version", ""))
        fields = {local_name(each): _xml_field(each) for each in message.iter() if not len(each)}
        yield Record(None, fields, is_complete=True)


def _xml_field(element: Element) -> Field:
    return Field(None, content(element), element.get("units", ""))


def read_json(text: str) -> Iterator[Record]:
    """An object, or a list of objects."""
    try:
        found = json.loads(text)
    except (ValueError, RecursionError) as error:
        raise ValueError(f"expected JSON: {str(error)[:80]}") from None
    for place, each in enumerate(found if isinstance(found, list) else [found], start=1):
        if not isinstance(each, dict):
            raise ValueError(f"record {place}: expected an object, got {json.dumps(each)[:40]}")  # noqa: TRY004 - it is the text that is wrong
        fields = {str(key): Field(None, _json_text(value)) for key, value in each.items()}
        yield Record(None, fields, is_complete=False)


def _json_text(value: object) -> str:
    return "" if value is None or isinstance(value, bool | dict | list) else str(value).strip()


def read_csv(text: str) -> Iterator[Record]:
    """A first line of keywords, then a line a satellite."""
    reader = csv.reader(StringIO(text))
    header: list[str] = []
    try:
        for cells in reader:
            if not cells:
                continue
            if not header:
                header = [cell.strip() for cell in cells]
                continue
            line = reader.line_num
            if len(cells) != len(header):
                raise ValueError(f"line {line}: expected {len(header)} values, got {len(cells)}")
            pairs = zip(header, cells, strict=True)
            fields = {key: Field(line, value.strip()) for key, value in pairs}
            yield Record(line, fields, is_complete=False)
    except csv.Error as error:
        raise ValueError(f"line {reader.line_num}: expected CSV: {error}") from None


def _check_version(version: str) -> None:
    if version not in _VERSIONS:
        raise ValueError(f"expected version {', '.join(_VERSIONS)}, got {version[:20]!r}")
