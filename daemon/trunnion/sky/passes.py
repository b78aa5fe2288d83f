"""When a target is up: rise, culmination and set over a window of time.

The elevation of anything in orbit has one maximum and one minimum a revolution, many minutes
apart. So a grid of two minutes brackets every maximum by the sign of the elevation's rate; each is
refined and joins the grid before rise and set are looked for. A pass that reaches the threshold
for a second only is therefore found like any other.
"""

from collections.abc import Callable
from dataclasses import dataclass
from typing import NamedTuple, Protocol, runtime_checkable

import numpy as np
from numpy.typing import NDArray

from trunnion.sky.errors import SkyError
from trunnion.sky.look import FloatArray, Looks, Target
from trunnion.sky.roots import changes

GRID_S = 120.0
LONGEST_WINDOW_S = 366.0 * 86400.0
MASK_STEP_DEG = 0.25
"""A gap in a horizon mask that a target crosses in a smaller angle than this can be overlooked."""

Threshold = float | Callable[[float], float]


@runtime_checkable
class Bounded(Protocol):
    """A target that has positions at some times only."""

    def spans(self, from_s: float, until_s: float) -> tuple[tuple[float, float], ...]:
        """Begin and end (UTC) of every span that reaches into a window, cut to it."""
        ...


@dataclass(frozen=True, slots=True)
class Pass:
    """One stretch of time above the threshold.

    Instants are UTC as POSIX seconds. `rise_s` is None for a target that is up when the window
    opens, `set_s` for one that is up when it closes, and `culmination_s`, the instant of the
    highest elevation, where the window cuts the pass at its highest.
    """

    rise_s: float | None
    culmination_s: float | None
    set_s: float | None
    highest_elevation_deg: float


def find_passes(
    target: Target, from_s: float, until_s: float, above: Threshold
) -> tuple[Pass, ...]:
    """All passes of a target within a window, in order of time.

    `above` is an elevation in degrees, or a function from azimuth to elevation: a horizon mask. The
    pieces into which a mask cuts a pass are passes of their own. Raises SkyError for a window that
    is empty or longer than a year, NoPosition where the target has none in it. A target that tells
    the spans of its ephemeris is looked for in those alone, and rises and sets at their ends.
    """
    if not 0.0 < until_s - from_s <= LONGEST_WINDOW_S:
        raise SkyError(
            f"expected a window of more than 0 and at most {LONGEST_WINDOW_S / 86400.0:g} days, "
            f"got {(until_s - from_s) / 86400.0:g} days"
        )

    return tuple(
        each
        for begin_s, end_s in _known(target, from_s, until_s)
        for each in _passes_within(target, (begin_s, end_s), (from_s, until_s), above)
    )


def _known(target: Target, from_s: float, until_s: float) -> tuple[tuple[float, float], ...]:
    """The parts of the window in which the target has positions."""
    if isinstance(target, Bounded):
        return target.spans(from_s, until_s)
    return ((from_s, until_s),)


def _passes_within(
    target: Target, part: tuple[float, float], window: tuple[float, float], above: Threshold
) -> tuple[Pass, ...]:
    """The passes in a part of the window, at whose own ends a target may rise and set too."""
    from_s, until_s = part

    def is_up(utc_s: FloatArray) -> NDArray[np.bool_]:
        return _is_above(target.looks(utc_s), above)

    nodes_s = _nodes(target, from_s, until_s, above)
    looks = target.looks(nodes_s)
    ups = _is_above(looks, above)
    turns = np.flatnonzero(ups[1:] != ups[:-1])
    turns_s = changes(is_up, nodes_s[turns], nodes_s[turns + 1])
    begins_s = np.concatenate((nodes_s[:1][ups[:1]], turns_s[~ups[turns]]))
    ends_s = np.concatenate((turns_s[ups[turns]], nodes_s[-1:][ups[-1:]]))
    heights = _Heights(nodes_s, looks.elevation_deg)
    edges_deg = [target.looks(each).elevation_deg.tolist() for each in (begins_s, ends_s)]
    return tuple(
        _pass(window, begin, end, heights)
        for begin, end in zip(
            zip(begins_s.tolist(), edges_deg[0], strict=True),
            zip(ends_s.tolist(), edges_deg[1], strict=True),
            strict=True,
        )
    )


class _Heights(NamedTuple):
    """Elevations (deg) at the nodes (s), among which are all maxima."""

    nodes_s: FloatArray
    elevation_deg: FloatArray

    def highest(self, begin_s: float, end_s: float) -> tuple[float, float] | None:
        """The highest node strictly between two instants: its instant and elevation."""
        first = int(np.searchsorted(self.nodes_s, begin_s, side="right"))
        last = int(np.searchsorted(self.nodes_s, end_s, side="left"))
        if first >= last:
            return None
        place = first + int(np.argmax(self.elevation_deg[first:last]))
        return float(self.nodes_s[place]), float(self.elevation_deg[place])


def _pass(
    window: tuple[float, float],
    begin: tuple[float, float],
    end: tuple[float, float],
    heights: _Heights,
) -> Pass:
    """A pass from its edges, each an instant and its elevation."""
    top = heights.highest(begin[0], end[0])
    highest = max((each for each in (begin, end, top) if each), key=lambda each: each[1])
    return Pass(
        None if begin[0] == window[0] else begin[0],
        None if highest[0] in window else highest[0],
        None if end[0] == window[1] else end[0],
        highest[1],
    )


def _nodes(target: Target, from_s: float, until_s: float, above: Threshold) -> FloatArray:
    """Instants between which the target crosses the threshold once at most."""
    grid_s = np.linspace(from_s, until_s, max(2, int((until_s - from_s) / GRID_S) + 2))
    nodes_s = np.union1d(grid_s, _culminations(target, grid_s))
    return _finer_at_mask(target, nodes_s, above) if callable(above) else nodes_s


def _culminations(target: Target, grid_s: FloatArray) -> FloatArray:
    """The maxima of the elevation between the nodes of a grid."""

    def is_rising(utc_s: FloatArray) -> NDArray[np.bool_]:
        rising: NDArray[np.bool_] = target.looks(utc_s).elevation_rate_deg_s > 0.0
        return rising

    rising = is_rising(grid_s)
    before = np.flatnonzero(rising[:-1] & ~rising[1:])
    return changes(is_rising, grid_s[before], grid_s[before + 1])


def _finer_at_mask(
    target: Target, nodes_s: FloatArray, mask: Callable[[float], float]
) -> FloatArray:
    """The nodes, with others between them where the target moves far along or across a mask."""
    looks = target.looks(nodes_s)
    lowest_deg = min(map(mask, np.arange(0.0, 360.0, MASK_STEP_DEG).tolist()))
    is_near = np.maximum(looks.elevation_deg[1:], looks.elevation_deg[:-1]) >= lowest_deg
    turn_deg = np.abs((np.diff(looks.azimuth_deg) + 180.0) % 360.0 - 180.0)
    climb_deg = np.abs(np.diff(looks.elevation_deg))
    pieces = np.where(is_near, np.ceil(np.maximum(turn_deg, climb_deg) / MASK_STEP_DEG), 1.0)
    finer = [
        np.linspace(before, after, int(count) + 1)[1:]
        for before, after, count in zip(
            nodes_s[:-1], nodes_s[1:], np.maximum(pieces, 1.0), strict=True
        )
    ]
    return np.concatenate([nodes_s[:1], *finer])


def _is_above(looks: Looks, above: Threshold) -> NDArray[np.bool_]:
    if not callable(above):
        return looks.elevation_deg >= above
    return looks.elevation_deg >= np.array([above(each) for each in looks.azimuth_deg.tolist()])
