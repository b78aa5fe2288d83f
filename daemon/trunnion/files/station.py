"""The station file: everything about one antenna, read, bounded and checked."""

from collections.abc import Iterable, Mapping
from pathlib import Path
from typing import Annotated, Any

from pydantic import AfterValidator, Field, PrivateAttr

from trunnion.files.fields import Name
from trunnion.files.problems import FileProblems, Problem
from trunnion.files.section import Section
from trunnion.files.station_checks import STATION_CHECKS
from trunnion.files.station_files import FilesSection
from trunnion.files.station_machine import (
    AntennaSection,
    CadenceSection,
    DriverSection,
    MountSection,
    PlanningSection,
    WindSection,
)
from trunnion.files.station_safety import SafetySection
from trunnion.files.station_sky import SiteSection, SkySection
from trunnion.files.target_text import checked_target, is_builtin
from trunnion.files.validation import validated
from trunnion.files.yaml_text import KeyPath, YamlText, read_yaml


def _a_name_of_its_own(name: str) -> str:
    if is_builtin(name):
        raise ValueError(f"expected a name of your own, got {name!r}, which already has a meaning")
    return name


_ALL_DEFAULTS: Any = {}  # validated as a section that stands in the file and is empty

TargetName = Annotated[Name, AfterValidator(_a_name_of_its_own)]
TargetText = Annotated[Name, AfterValidator(checked_target)]


class StationFile(Section):
    """One antenna: where it stands, what it can do, what it may never do, where its files are."""

    site: SiteSection
    mount: MountSection
    antenna: AntennaSection
    planning: PlanningSection = _ALL_DEFAULTS
    sky: SkySection = _ALL_DEFAULTS
    safety: SafetySection
    driver: DriverSection
    wind: WindSection | None = None
    """The anemometer, where there is one."""
    cadence: CadenceSection = _ALL_DEFAULTS
    files: FilesSection = _ALL_DEFAULTS
    targets: dict[TargetName, TargetText] = Field(default_factory=dict)
    """Names of your own for targets: `sun`, `moon` or a planet, `icrs:RIGHT_ASCENSION,DECLINATION`,
    `fixed:AZIMUTH,ELEVATION`, `file:PATH` (orbit elements, an ephemeris or an angle table; the path
    begins at the station file's folder), or the name or the catalogue number of a set of orbit
    elements."""

    _source: YamlText = PrivateAttr()

    @property
    def path(self) -> Path:
        """The file it was read from."""
        return Path(self._source.file)

    def problem(self, key: KeyPath, message: str) -> Problem:
        """Return a problem that showed only when the file was put to use, with its line."""
        return self._source.problem(key, message)


def load_station(path: Path) -> StationFile:
    """Read a station file; raises FileProblems with everything that is wrong with it."""
    text = read_yaml(path)
    station = validated(StationFile, text, path.absolute().parent, STATION_CHECKS)
    station._source = text  # noqa: SLF001 - the one place that fills it
    return station


def driver_problems(station: StationFile, found: Iterable[tuple[str, str]]) -> FileProblems:
    """Return what a driver found wrong with its settings, with file and line.

    `found` are pairs of a dotted key below `driver:` and a reason.
    """
    return FileProblems(
        station.problem(("driver", *key.split(".")) if key else ("driver",), reason)
        for key, reason in found
    )


def effective_settings(station: StationFile) -> Mapping[str, object]:
    """Return every key with the value in force, defaults filled in, as plain data."""
    return station.model_dump(mode="json", by_alias=True)
