"""The horizon mask: a text file of azimuth and elevation, one pair a line."""

from collections.abc import Iterator
from math import isfinite
from pathlib import Path

from trunnion.files.problems import FileProblems, Problem
from trunnion.files.reading import read_text

_LIMIT_BYTES = 100_000
_MOST_POINTS = 3600

MaskPoints = tuple[tuple[float, float], ...]


def load_mask(path: Path) -> MaskPoints:
    """Return the points of a horizon mask: pairs of azimuth and elevation in degrees.

    Azimuths go from 0 to below 360 and never decrease; two points at one azimuth make a step. A
    line may end with a comment after `#`; the numbers stand apart by blanks or a comma. Raises
    FileProblems with everything that is wrong with it.
    """
    file = str(path)
    points: list[tuple[float, float]] = []
    problems: list[Problem] = []
    for line, text in _lines_with_content(read_text(path, _LIMIT_BYTES)):
        try:
            points.append(_next_point(text, points))
        except ValueError as error:
            problems.append(Problem(file, line, "", str(error)))
    if not points and not problems:
        problems.append(Problem(file, None, "", "expected azimuth and elevation pairs, got none"))
    if len(points) > _MOST_POINTS:
        message = f"expected at most {_MOST_POINTS} points, got {len(points)}"
        problems.append(Problem(file, None, "", message))
    if problems:
        raise FileProblems(problems)
    return tuple(points)


def _lines_with_content(text: str) -> Iterator[tuple[int, str]]:
    for line, raw in enumerate(text.split("\n"), start=1):
        content = raw.partition("#")[0].strip()
        if content:
            yield line, content


def _next_point(text: str, earlier: list[tuple[float, float]]) -> tuple[float, float]:
    azimuth_deg, elevation_deg = _two_numbers(text)
    if not 0 <= azimuth_deg < 360:
        raise ValueError(f"expected an azimuth from 0 to below 360, got {azimuth_deg:g}")
    if not -90 <= elevation_deg <= 90:
        raise ValueError(f"expected an elevation of -90 to 90, got {elevation_deg:g}")
    if earlier and azimuth_deg < earlier[-1][0]:
        raise ValueError(
            f"expected azimuths in rising order, got {azimuth_deg:g} after {earlier[-1][0]:g}"
        )
    return azimuth_deg, elevation_deg


def _two_numbers(text: str) -> tuple[float, float]:
    try:
        first, second = map(float, text.replace(",", " ").split())
    except ValueError:
        raise _not_a_pair(text) from None
    if not (isfinite(first) and isfinite(second)):
        raise _not_a_pair(text)
    return first, second


def _not_a_pair(text: str) -> ValueError:
    return ValueError(f"expected azimuth and elevation in degrees, got {text[:40]!r}")
