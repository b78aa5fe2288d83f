"""Values over time, contact beside contact: the pauses between them are cut out."""

from collections.abc import Callable, Sequence
from typing import NamedTuple

from trunnion.cli.pictures.flight import Flight, Sample
from trunnion.cli.pictures.svg import Drawing, Pen

GAP = 14.0
"""Pixels between two contacts, unless there are many."""

ROOM_FOR_TIME = 55.0


class Box(NamedTuple):
    """Where a chart stands, in pixels."""

    left: float
    top: float
    width: float
    height: float


class Level(NamedTuple):
    """A value that is drawn as a line across the chart, with its name."""

    value: float
    name: str
    pen: Pen = Pen.DASHED


class Chart:
    """A frame with a title, levels and one or two curves a contact."""

    def __init__(
        self, drawing: Drawing, box: Box, flights: Sequence[Flight], span: tuple[float, float]
    ) -> None:
        self._drawing = drawing
        self._box = box
        self._flights = flights
        self._low, self._high = span

    def frame(self, title: str, levels: Sequence[Level]) -> None:
        """Title and levels."""
        left, top, width, height = self._box
        right, bottom = left + width, top + height
        corners = [(left, top), (right, top), (right, bottom), (left, bottom), (left, top)]
        self._drawing.line(corners, Pen.FAINT)
        self._drawing.text((left, top - 5), title)
        for level in levels:
            if self._low <= level.value <= self._high:
                y = self._y(level.value)
                self._drawing.line([(left, y), (right, y)], level.pen)
                self._drawing.text((right + 3, y + 3), level.name, size=9)

    def curve(self, value: Callable[[Sample], float], pen: Pen = Pen.BOLD) -> None:
        """One value of every contact."""
        for flight, (begin_x, end_x) in zip(self._flights, self._columns(), strict=True):
            last = len(flight.samples) - 1
            points = [
                (begin_x + (end_x - begin_x) * index / last, self._y(value(sample)))
                for index, sample in enumerate(flight.samples)
            ]
            self._drawing.line(points, pen)

    def names(self, begins: Sequence[str]) -> None:
        """Below the chart, each contact's number, and when it begins if there is room for it."""
        bottom = self._box.top + self._box.height
        for number, ((begin_x, end_x), begin) in enumerate(
            zip(self._columns(), begins, strict=True), start=1
        ):
            words = f"{number}  {begin}" if end_x - begin_x > ROOM_FOR_TIME else f"{number}"
            self._drawing.text((begin_x, bottom + 12), words, size=9)

    def _columns(self) -> list[tuple[float, float]]:
        lengths = [flight.samples[-1].utc_s - flight.samples[0].utc_s for flight in self._flights]
        gap = min(GAP, 0.3 * self._box.width / (len(lengths) + 1))
        free = self._box.width - gap * (len(lengths) + 1)
        columns, x = [], self._box.left + gap
        for length in lengths:
            width = free * length / sum(lengths)
            columns.append((x, x + width))
            x += width + gap
        return columns

    def _y(self, value: float) -> float:
        share = (min(max(value, self._low), self._high) - self._low) / (self._high - self._low)
        return self._box.top + self._box.height * (1.0 - share)
