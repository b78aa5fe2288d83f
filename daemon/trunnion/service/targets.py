"""Targets by name: what a plan or a command line calls them, as something to point at."""

from collections.abc import Iterable, Sequence
from functools import cached_property
from pathlib import Path

from trunnion.files.elements import SUFFIXES, load_elements
from trunnion.files.problems import FileProblems, Problem, did_you_mean
from trunnion.files.station import StationFile
from trunnion.files.target_file import load_target_file
from trunnion.files.target_text import is_builtin, target_file
from trunnion.service.errors import ServiceError
from trunnion.sky.builtin import builtin_target
from trunnion.sky.elements import ElementSet, Satellite
from trunnion.sky.ephemeris import Ephemeris, EphemerisCraft
from trunnion.sky.look import Target
from trunnion.sky.naming import BODY_NAMES, meaning
from trunnion.sky.viewpoint import Viewpoint

_MOST_LISTED = 12


class UnknownTarget(ServiceError):  # noqa: N818 - named for what happened
    """Nothing goes by this name, or more than one thing does."""


class TargetBook:
    """All targets of one station, seen from one viewpoint; reads the elements when first needed."""

    def __init__(self, station: StationFile, viewpoint: Viewpoint) -> None:
        self._station = station
        self._viewpoint = viewpoint

    @cached_property
    def elements(self) -> tuple[ElementSet, ...]:
        """The station's orbit elements, all files together; raises FileProblems."""
        return _all_elements(self._station.files.elements)

    def resolve(self, text: str) -> Target:
        """Find the target that a plan means by this text.

        The station's own names come first, then what has a meaning of its own (`sun`, `moon`,
        `icrs:…`, `fixed:…`, `file:…`), then name or catalogue number of orbit elements, of which
        the newest count. Raises UnknownTarget, FileProblems for files that cannot be read, and
        SkyError for an ephemeris file that cannot.
        """
        meant = self._station.targets.get(text, text)
        path = target_file(meant)
        if path is not None:
            return self._from_file(self._station.path.parent / path, text)
        return self._builtin(meant) or Satellite(
            _newest(self._called(meant), meant), self._viewpoint
        )

    def resolve_or_read(self, text: str) -> Target:
        """Find what a command line means: a target as above, or a file with one target."""
        if self.means_file(text) or Path(text).suffix.lower() in SUFFIXES:
            return self._from_file(Path(text), text)
        return self.resolve(text)

    def means_file(self, text: str) -> bool:
        """Whether a command line means a file with a target in it by this text."""
        return not (text in self._station.targets or is_builtin(text)) and Path(text).is_file()

    def _from_file(self, path: Path, text: str) -> Target:
        found = load_target_file(path)
        if isinstance(found, tuple):
            return Satellite(_newest(found, text), self._viewpoint)
        return EphemerisCraft(found, self._viewpoint) if isinstance(found, Ephemeris) else found

    def _builtin(self, text: str) -> Target | None:
        try:
            meant = meaning(text)
        except ValueError as error:
            raise UnknownTarget(str(error)) from None
        if meant is None:
            return None
        ephemeris = self._station.files.ephemeris
        return builtin_target(meant, self._viewpoint, str(ephemeris) if ephemeris else None)

    def _called(self, name: str) -> Sequence[ElementSet]:
        found = [each for each in self.elements if _is_called(each, name)]
        if not found:
            raise UnknownTarget(f"expected a known target, got {name!r}{self._suggestion(name)}")
        return found

    def _suggestion(self, name: str) -> str:
        known = [*self._station.targets, *(each.name for each in self.elements), *BODY_NAMES]
        listed = ", ".join(known[:_MOST_LISTED]) + (", …" if len(known) > _MOST_LISTED else "")
        return did_you_mean(name, known) or f"; known here: {listed}"


def resolve_target(text: str, station: StationFile, viewpoint: Viewpoint) -> Target:
    """Find one target; a TargetBook finds many without reading the elements again and again."""
    return TargetBook(station, viewpoint).resolve(text)


def _is_called(element_set: ElementSet, name: str) -> bool:
    if name.isascii() and name.isdigit() and int(name) == element_set.catalogue_number:
        return True
    number_as_written = element_set.line_1[2:7].strip()
    return name.casefold() in (element_set.name.casefold(), number_as_written.casefold())


def _newest(sets: Iterable[ElementSet], text: str) -> ElementSet:
    """Return the newest set of the one object that they are all of."""
    by_number = {_identity(each): each for each in sorted(sets, key=_epoch)}
    if len(by_number) != 1:
        listed = ", ".join(f"{each.name} ({number})" for number, each in by_number.items())
        raise UnknownTarget(
            f"expected {text!r} to mean one spacecraft, got {len(by_number)}: {listed[:400]}"
        )
    (newest,) = by_number.values()
    return newest


def _identity(element_set: ElementSet) -> int | str:
    """The catalogue number, or the name of what has none."""
    return element_set.catalogue_number or element_set.name


def _epoch(element_set: ElementSet) -> float:
    return element_set.epoch_utc_s


def _all_elements(paths: Iterable[Path]) -> tuple[ElementSet, ...]:
    found: list[ElementSet] = []
    problems: list[Problem] = []
    for path in paths:
        try:
            found.extend(load_elements(path))
        except FileProblems as trouble:
            problems.extend(trouble.problems)
    if problems:
        raise FileProblems(problems)
    return tuple(found)
