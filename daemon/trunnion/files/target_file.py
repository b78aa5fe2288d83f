"""Files that tell where targets are, whatever their format: it is told from the content."""

from pathlib import Path

from trunnion.files.angle_table import read_angle_table
from trunnion.files.elements import load_elements
from trunnion.files.reading import read_text
from trunnion.sky.angle_table import AngleTable
from trunnion.sky.elements import ElementSet

LIMIT_BYTES = 20_000_000

TargetFile = tuple[ElementSet, ...] | AngleTable


def load_target_file(path: Path) -> TargetFile:
    """Return the element sets, or the table, of one file or of a folder of element files.

    Raises FileProblems.
    """
    if path.is_dir():
        return load_elements(path)
    text = read_text(path, LIMIT_BYTES)
    if _first_line(text).startswith("time,") or "azimuth_deg" in _first_line(text):
        return read_angle_table(path, text)
    return load_elements(path)


def _first_line(text: str) -> str:
    return text.lstrip()[:400].partition("\n")[0].strip()
