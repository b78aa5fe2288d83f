"""Files that tell where targets are, whatever their format: it is told from the content."""

import re
from pathlib import Path

from trunnion.files.angle_table import read_angle_table
from trunnion.files.elements import load_elements
from trunnion.files.oem import read_oem
from trunnion.files.oem_kvn import VERSION as OEM_VERSION
from trunnion.files.reading import read_text
from trunnion.sky.angle_table import AngleTable
from trunnion.sky.elements import ElementSet
from trunnion.sky.ephemeris import Ephemeris

LIMIT_BYTES = 20_000_000

TargetFile = tuple[ElementSet, ...] | AngleTable | Ephemeris


def load_target_file(path: Path) -> TargetFile:
    """Return the element sets, the ephemeris or the table in a file, or a folder's element sets.

    Raises FileProblems.
    """
    if path.is_dir():
        return load_elements(path)
    text = read_text(path, LIMIT_BYTES)
    if text.lstrip().startswith(OEM_VERSION) or _is_xml(text, "oem"):
        return read_oem(path, text)
    if _first_line(text).startswith("time,") or "azimuth_deg" in _first_line(text):
        return read_angle_table(path, text)
    return load_elements(path)


def _first_line(text: str) -> str:
    return text.lstrip()[:400].partition("\n")[0].strip()


def _is_xml(text: str, tag: str) -> bool:
    """Whether it is XML with such a message in it; told from its begin."""
    begin = text.lstrip()[:4000]
    return begin.startswith("<") and re.search(rf"<(\w+:)?{tag}[\s>]", begin) is not None
