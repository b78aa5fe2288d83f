"""The example station in a folder of its own, changed where a test wants it to be."""

from collections.abc import Mapping
from pathlib import Path

from trunnion.cli.init import example_folder
from trunnion.files.station import StationFile, load_station

NO_WIND = {"wind:   ": "# ", "  kind: fixed   ": "# ", "  speed_m_s: 4": "# "}
"""Changes that leave the example station without an anemometer."""

NO_CHANGES: Mapping[str, str] = {}


def write_station(folder: Path, changes: Mapping[str, str] = NO_CHANGES) -> Path:
    """Write the example files there; each key of `changes` stands once in the station file."""
    for name in ("elements.tle", "horizon.txt", "plan.yaml"):
        (folder / name).write_bytes((example_folder() / name).read_bytes())
    text = (example_folder() / "station.yaml").read_text()
    for old, new in changes.items():
        assert text.count(old) == 1, old
        text = text.replace(old, new)
    path = folder / "station.yaml"
    path.write_text(text)
    return path


def station_with(folder: Path, changes: Mapping[str, str] = NO_CHANGES) -> StationFile:
    """The example station, changed."""
    return load_station(write_station(folder, changes))


def write_plan(folder: Path, *contacts: str) -> None:
    """Replace the plan by these contacts, each in YAML's flow style."""
    lines = "\n".join(f"  - {contact}" for contact in contacts)
    (folder / "plan.yaml").write_text(f"contacts:\n{lines}\n")
