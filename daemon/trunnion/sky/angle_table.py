"""A target given as a table of instants, azimuths and elevations, by whoever computed them."""

from bisect import bisect_right
from collections.abc import Iterator
from dataclasses import dataclass, field
from itertools import pairwise
from math import atan2, cos, degrees, hypot, isfinite, radians, sin
from statistics import median
from typing import NamedTuple

import numpy as np

from trunnion.sky.errors import NoPosition, SkyError
from trunnion.sky.instants import format_utc
from trunnion.sky.look import FloatArray, Look, Looks
from trunnion.sky.site import Vector

WIDEST_STEP_DEG = 20.0
LONGEST_STEP_IN_MEDIANS = 5.0
"""Between rows further apart than that, on the sky or in time, the table has a gap."""

_ZENITH = 1e-9
"""Closer to the zenith (rad) azimuth has no rate worth the name."""


class Row(NamedTuple):
    """One line of the table: UTC (POSIX seconds), azimuth, elevation (deg), range (km) or None."""

    utc_s: float
    azimuth_deg: float
    elevation_deg: float
    range_km: float | None = None


class _Node(NamedTuple):
    """East, north, up and range at a row, and their slopes a second."""

    utc_s: float
    values: tuple[float, ...]
    slopes: tuple[float, ...]


@dataclass(frozen=True, slots=True)
class AngleTable:
    """Rows in order of time, taken as the boresight is to have them: a Target.

    No viewpoint enters: no refraction is added. Between rows the direction follows a cubic on the
    unit vector, which knows neither the step of the azimuth at north nor the zenith. Raises
    SkyError for rows that cannot be interpolated.
    """

    name: str
    rows: tuple[Row, ...]
    _nodes: tuple[_Node, ...] = field(init=False, repr=False, compare=False)
    _gaps: frozenset[int] = field(init=False, repr=False, compare=False)

    def __post_init__(self) -> None:
        problem = next(row_problems(self.rows), None)
        if problem is not None:
            raise SkyError(f"{self.name}: row {problem[0] + 1}: {problem[1]}")
        object.__setattr__(self, "_gaps", frozenset(_gaps(self.rows)))
        object.__setattr__(self, "_nodes", tuple(_nodes(self.rows, self._gaps)))

    def look(self, utc_s: float) -> Look:
        """Where it stands; raises NoPosition outside the table and in its gaps."""
        index = self._interval(utc_s)
        before, after = self._nodes[index : index + 2]
        values, slopes = _between(before, after, utc_s)
        return _look(values, slopes)

    def spans(self, from_s: float, until_s: float) -> tuple[tuple[float, float], ...]:
        """Begin and end of every stretch of rows without a gap, cut to a window."""
        edges = [-1, *sorted(self._gaps), len(self.rows) - 1]
        stretches = (
            (self.rows[before + 1].utc_s, self.rows[after].utc_s)
            for before, after in pairwise(edges)
        )
        cut = ((max(begin_s, from_s), min(end_s, until_s)) for begin_s, end_s in stretches)
        return tuple((begin_s, end_s) for begin_s, end_s in cut if begin_s < end_s)

    def _interval(self, utc_s: float) -> int:
        """Index of the row from which the curve runs over this instant."""
        if self.rows[0].utc_s <= utc_s <= self.rows[-1].utc_s:
            index = bisect_right(self._nodes, utc_s, key=_utc_s) - 1
            if index in self._gaps or index == len(self.rows) - 1:
                index -= self.rows[index].utc_s == utc_s  # a row ends what comes before it
            if index not in self._gaps:
                return index
        raise NoPosition(
            f"{self.name}: expected an instant within its rows, got {format_utc(utc_s)}"
        )

    def looks(self, utc_s: FloatArray) -> Looks:
        """Where it stands at many instants; raises NoPosition when it has none at any of them."""
        looks = [self.look(each) for each in utc_s.tolist()]
        columns = [np.array(column) for column in zip(*looks, strict=True)] or [np.empty(0)] * 6
        has_range = self.rows[0].range_km is not None
        azimuth, elevation, range_km, azimuth_rate, elevation_rate, range_rate = columns
        return Looks(
            azimuth,
            elevation,
            range_km if has_range else None,
            azimuth_rate,
            elevation_rate,
            range_rate if has_range else None,
        )


def row_problems(rows: tuple[Row, ...]) -> Iterator[tuple[int, str]]:
    """Everything wrong with rows, as the index of one and a sentence."""
    if len(rows) < 2:
        yield 0, f"expected at least two rows, got {len(rows)}"
    for index, row in enumerate(rows):
        if not all(isfinite(value) for value in row if value is not None):
            yield index, "expected finite numbers"
        if not (abs(row.azimuth_deg) <= 360.0 and abs(row.elevation_deg) <= 90.0):
            yield (
                index,
                (
                    "expected an azimuth of -360 to 360 and an elevation of -90 to 90, "
                    f"got {row.azimuth_deg:g}, {row.elevation_deg:g}"
                ),
            )
        if row.range_km is not None and row.range_km <= 0.0:
            yield index, f"expected a range above 0, got {row.range_km:g}"
    for index, (before, after) in enumerate(pairwise(rows), start=1):
        if not after.utc_s > before.utc_s:
            yield index, "expected a time after that of the row before it"
        if (after.range_km is None) != (before.range_km is None):
            yield index, "expected a range in every row or in none"


def _utc_s(node: _Node) -> float:
    return node.utc_s


def _gaps(rows: tuple[Row, ...]) -> Iterator[int]:
    steps_s = [after.utc_s - before.utc_s for before, after in pairwise(rows)]
    longest_s = LONGEST_STEP_IN_MEDIANS * median(steps_s)
    narrowest = cos(radians(WIDEST_STEP_DEG))
    for index, (before, after) in enumerate(pairwise(map(_direction, rows))):
        cosine = sum(a * b for a, b in zip(before, after, strict=True))
        if cosine < narrowest or steps_s[index] > longest_s:
            yield index


def _direction(row: Row) -> Vector:
    azimuth, elevation = radians(row.azimuth_deg), radians(row.elevation_deg)
    return sin(azimuth) * cos(elevation), cos(azimuth) * cos(elevation), sin(elevation)


def _nodes(rows: tuple[Row, ...], gaps: frozenset[int]) -> Iterator[_Node]:
    """Rows with slopes: of the parabola through a row and its neighbours, on its side of a gap."""
    times = np.array([row.utc_s for row in rows])
    values = np.array([(*_direction(row), row.range_km or 0.0) for row in rows])
    slopes = np.zeros_like(values)
    edges = [0, *(index + 1 for index in sorted(gaps)), len(rows)]
    for begin, end in pairwise(edges):
        if end - begin > 1:
            part = slice(begin, end)
            slopes[part] = np.gradient(
                values[part], times[part], axis=0, edge_order=2 if end - begin > 2 else 1
            )
    for row, value, slope in zip(rows, values.tolist(), slopes.tolist(), strict=True):
        yield _Node(row.utc_s, tuple(value), tuple(slope))


def _between(before: _Node, after: _Node, utc_s: float) -> tuple[list[float], list[float]]:
    """Values and slopes on the cubic between two nodes (Hermite)."""
    step_s = after.utc_s - before.utc_s
    u = (utc_s - before.utc_s) / step_s
    values, slopes = [], []
    for a, b, a_slope, b_slope in zip(
        before.values, after.values, before.slopes, after.slopes, strict=True
    ):
        rise, begin, end = b - a, a_slope * step_s, b_slope * step_s
        c2, c3 = 3.0 * rise - 2.0 * begin - end, begin + end - 2.0 * rise
        values.append(a + u * (begin + u * (c2 + u * c3)))
        slopes.append((begin + u * (2.0 * c2 + 3.0 * u * c3)) / step_s)
    return values, slopes


def _look(values: list[float], slopes: list[float]) -> Look:
    east, north, up, range_km = values
    v_east, v_north, v_up, range_rate = slopes
    level = max(hypot(east, north), _ZENITH)
    length2 = level * level + up * up
    along = (east * v_east + north * v_north) / level
    has_range = range_km > 0.0
    return Look(
        degrees(atan2(east, north)) % 360.0 % 360.0,
        degrees(atan2(up, level)),
        range_km if has_range else None,
        degrees((v_east * north - v_north * east) / level**2),
        degrees((v_up * level - up * along) / length2),
        range_rate if has_range else None,
    )
