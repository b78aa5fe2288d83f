"""The day as a shortest path over its pieces: which option each takes, and which one is left out.

What is made least is the time outside the beam, each second weighed with the priority of its
contact; of equal ones the shorter slews win.
"""

from collections.abc import Sequence
from dataclasses import dataclass
from itertools import accumulate
from typing import NamedTuple

from trunnion.mount.clearance import Clearance
from trunnion.mount.joints import Joints
from trunnion.mount.mount import Mount
from trunnion.track.options import Option
from trunnion.track.transit import NoWay, transit, transit_time_s

LAYERS_BACK = 3
"""So many pieces before one are looked at as the one that the mount comes from."""

SLEW_SHARE = 1e-3
"""What a second of slewing counts beside a second outside the beam."""

NEVER = float("inf")


class Piece(NamedTuple):
    """Time that one contact has the mount (UTC), and the ways to serve it."""

    begin_s: float
    end_s: float
    priority: int
    options: Sequence[Option]

    @property
    def worth(self) -> float:
        """What all of it is worth."""
        return (self.end_s - self.begin_s) * max(1, self.priority)


@dataclass(frozen=True, slots=True, eq=False)
class _Stop:
    """A piece served by one of its options, and the best way there from the start of the day."""

    cost: float
    piece: int
    option: int
    before: "_Stop | None"
    place: Joints
    free_s: float


class Schedule:
    """Chooses an option for each piece; pieces are in order of time and do not overlap."""

    def __init__(self, pieces: Sequence[Piece], mount: Mount, clearance: Clearance) -> None:
        self._pieces = pieces
        self._mount = mount
        self._clearance = clearance
        self._slew_s: dict[tuple[Joints, Joints], float] = {}
        self._left_out = [0.0, *accumulate(piece.worth for piece in pieces)]

    def choose(self, start: Joints, now_s: float) -> list[int | None]:
        """The option of each piece; None where it is left out."""
        layers = [[_Stop(0.0, -1, -1, None, start, now_s)]]
        for index in range(len(self._pieces)):
            layer = self._layer(index, [stop for each in layers[-LAYERS_BACK:] for stop in each])
            if layer:
                layers.append(layer)
        stops = [stop for layer in layers[-LAYERS_BACK:] for stop in layer]
        last: _Stop | None = min(stops, key=lambda stop: stop.cost + self._skipped(stop, None))
        chosen: list[int | None] = [None] * len(self._pieces)
        while last is not None and last.piece >= 0:
            chosen[last.piece], last = last.option, last.before
        return chosen

    def _layer(self, index: int, stops: list[_Stop]) -> list[_Stop]:
        piece, layer = self._pieces[index], []
        for number, option in enumerate(piece.options):
            costs = [
                stop.cost + self._skipped(stop, index) + self._cost(stop, piece, option)
                for stop in stops
            ]
            least = min(costs)
            if least < NEVER:
                before = stops[costs.index(least)]
                layer.append(_Stop(least, index, number, before, option.end, piece.end_s))
        return layer

    def _skipped(self, stop: _Stop, index: int | None) -> float:
        """What is lost by leaving out all pieces between a stop and another (the end if None)."""
        end = len(self._pieces) if index is None else index
        return self._left_out[end] - self._left_out[stop.piece + 1]

    def _cost(self, stop: _Stop, piece: Piece, option: Option) -> float:
        slew_s = self._slew(stop.place, option.begin)
        late_s = max(0.0, stop.free_s + slew_s - piece.begin_s)
        length_s = piece.end_s - piece.begin_s
        if late_s >= length_s:
            return NEVER
        lost = min(1.0, (late_s + option.lost_s) / length_s)
        return lost * piece.worth + SLEW_SHARE * slew_s

    def _slew(self, place: Joints, goal: Joints) -> float:
        if (place, goal) not in self._slew_s:
            try:
                way = transit(place, goal, self._mount, self._clearance)
                self._slew_s[place, goal] = transit_time_s(place, way, self._mount)
            except NoWay:
                self._slew_s[place, goal] = NEVER
        return self._slew_s[place, goal]
