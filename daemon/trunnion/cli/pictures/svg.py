"""A few shapes as SVG text (W3C Scalable Vector Graphics 1.1)."""

from collections.abc import Iterable
from enum import Enum
from xml.sax.saxutils import escape

Point = tuple[float, float]


class Pen(Enum):
    """How a line is drawn; no colour carries a meaning."""

    BOLD = "stroke-width:1.8"
    PLAIN = "stroke-width:1"
    DASHED = "stroke-width:1;stroke-dasharray:5 3"
    DOTTED = "stroke-width:1;stroke-dasharray:1 3"
    FAINT = "stroke-width:0.6;stroke:#999"


class Anchor(Enum):
    """Which end of a text stands at its place."""

    START = "start"
    MIDDLE = "middle"
    END = "end"


class Drawing:
    """Shapes in pixels, x to the right and y down, from the top left corner."""

    def __init__(self, width: float, height: float) -> None:
        self._size = width, height
        self._shapes: list[str] = []

    def line(self, points: Iterable[Point], pen: Pen = Pen.PLAIN) -> None:
        """An open line through these points."""
        self._shapes.append(f'<polyline style="{pen.value}" points="{_listed(points)}"/>')

    def area(self, points: Iterable[Point], *, is_hatched: bool = False) -> None:
        """A closed shape, grey or hatched."""
        fill = "url(#hatch)" if is_hatched else "#ddd"
        self._shapes.append(
            f'<polygon style="fill:{fill};stroke-width:0.6" points="{_listed(points)}"/>'
        )

    def circle(self, centre: Point, radius: float, pen: Pen = Pen.FAINT) -> None:
        """A circle."""
        x, y = centre
        self._shapes.append(
            f'<circle style="{pen.value}" cx="{x:.1f}" cy="{y:.1f}" r="{radius:.1f}"/>'
        )

    def dot(self, centre: Point, radius: float = 2.5) -> None:
        """A filled circle."""
        x, y = centre
        self._shapes.append(
            f'<circle style="fill:black" cx="{x:.1f}" cy="{y:.1f}" r="{radius:.1f}"/>'
        )

    def text(self, place: Point, words: str, anchor: Anchor = Anchor.START, size: int = 11) -> None:
        """Words, their baseline at this place."""
        x, y = place
        self._shapes.append(
            f'<text x="{x:.1f}" y="{y:.1f}" font-size="{size}" '
            f'text-anchor="{anchor.value}">{escape(words)}</text>'
        )

    def __str__(self) -> str:
        width, height = self._size
        head = (
            f'<svg xmlns="http://www.w3.org/2000/svg" width="{width:.0f}" height="{height:.0f}" '
            f'viewBox="0 0 {width:.0f} {height:.0f}">'
        )
        return "\n".join([head, _STYLE, *self._shapes, "</svg>", ""])


_STYLE = """<style>
svg { background: white; font-family: sans-serif }
polyline, circle { fill: none; stroke: black; stroke-linejoin: round }
polygon { stroke: black }
</style>
<defs><pattern id="hatch" width="5" height="5" patternUnits="userSpaceOnUse">
<path d="M0 5 L5 0" style="stroke:black;stroke-width:0.6"/></pattern></defs>"""


def _listed(points: Iterable[Point]) -> str:
    return " ".join(f"{x:.1f},{y:.1f}" for x, y in points)
