"""A spacecraft by an ephemeris: states at nodes, such as the operator of a manoeuvring craft sends.

Nothing is extrapolated: outside the useable intervals there is no position.
"""

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np

from trunnion.sky.errors import NoPosition
from trunnion.sky.frames import Frame, fixed_to_earth
from trunnion.sky.instants import format_utc
from trunnion.sky.interpolation import Curve
from trunnion.sky.look import FloatArray, Look, Looks
from trunnion.sky.topocentric import topocentric
from trunnion.sky.viewpoint import Viewpoint

ROUNDING_S = 1e-3
"""Spans are told so much shorter at their ends, for instants are rounded on their way."""


@dataclass(frozen=True, slots=True, eq=False)
class Segment:
    """One stretch without a manoeuvre: its frame, its useable interval, and the curve in it.

    Instants are POSIX seconds counted in TAI, so that a leap second is no step; the curve's time
    is in seconds from `origin_tai_s`.
    """

    frame: Frame
    begin_tai_s: float
    end_tai_s: float
    origin_tai_s: float
    curve: Curve


@dataclass(frozen=True, slots=True, eq=False)
class Ephemeris:
    """The segments of one object, in order of time."""

    name: str
    object_id: str
    segments: tuple[Segment, ...]

    def segment_at(self, tai_s: float) -> Segment:
        """The segment to use; of two that share an end, the later. Raises NoPosition."""
        for segment in reversed(self.segments):
            if segment.begin_tai_s <= tai_s <= segment.end_tai_s:
                return segment
        raise NoPosition(f"{self.name}: expected an instant within its ephemeris, got one outside")


@dataclass(frozen=True, slots=True, eq=False)
class EphemerisCraft:
    """An ephemeris seen from a viewpoint: a Target."""

    ephemeris: Ephemeris
    viewpoint: Viewpoint

    @property
    def name(self) -> str:
        """The object's name in the file."""
        return self.ephemeris.name

    def look(self, utc_s: float) -> Look:
        """Where it stands; raises NoPosition outside the useable intervals."""
        view = self.viewpoint
        tai_s = utc_s + view.earth.leap_seconds.at(utc_s)
        try:
            segment = self.ephemeris.segment_at(tai_s)
        except NoPosition as error:
            raise NoPosition(f"{error}: {format_utc(utc_s)}") from None
        state = segment.curve.at(tai_s - segment.origin_tai_s)
        fixed = fixed_to_earth(segment.frame, state, utc_s, view.earth)
        return topocentric(*fixed, view, with_light_time=view.is_apparent)

    def spans(self, from_s: float, until_s: float) -> tuple[tuple[float, float], ...]:
        """Begin and end (UTC) of the useable intervals within a window; touching ones as one."""
        found: list[tuple[float, float]] = []
        for segment in self.ephemeris.segments:
            begin_s = self._utc_s(segment.begin_tai_s) + ROUNDING_S
            end_s = self._utc_s(segment.end_tai_s) - ROUNDING_S
            if found and begin_s - found[-1][1] < 4.0 * ROUNDING_S:
                begin_s = found.pop()[0]
            found.append((begin_s, end_s))
        cut = ((max(begin_s, from_s), min(end_s, until_s)) for begin_s, end_s in found)
        return tuple((begin_s, end_s) for begin_s, end_s in cut if begin_s < end_s)

    def _utc_s(self, tai_s: float) -> float:
        leap_seconds = self.viewpoint.earth.leap_seconds
        return tai_s - leap_seconds.at(tai_s - leap_seconds.at(tai_s))

    def looks(self, utc_s: FloatArray) -> Looks:
        """Where it stands at many instants; raises NoPosition when it has none at any of them."""
        return _stacked([self.look(each) for each in utc_s.tolist()])


def _stacked(looks: Sequence[Look]) -> Looks:
    columns = np.array(looks, dtype=float).reshape(-1, len(Look._fields)).T
    return Looks(*columns)
