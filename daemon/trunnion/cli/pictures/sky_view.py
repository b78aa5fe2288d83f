"""The sky over the station: zenith in the middle, north up, east to the right as on a map."""

from collections.abc import Iterable, Sequence
from math import cos, radians, sin

from trunnion.cli.pictures.flight import Flight
from trunnion.cli.pictures.svg import Anchor, Drawing, Pen, Point
from trunnion.mount.clearance import Clearance, Sector

RINGS_DEG = (0, 30, 60)
STEP_DEG = 2


class SkyView:
    """Draws directions into a circle."""

    def __init__(self, drawing: Drawing, centre: Point, radius: float) -> None:
        self._drawing = drawing
        self._centre = centre
        self._radius = radius

    def draw(self, clearance: Clearance, flights: Sequence[Flight]) -> None:
        """Everything: what must stay clear, the paths as seen (dashed) and as flown (solid)."""
        self._horizon(clearance)
        for sector in clearance.keep_outs:
            self._keep_out(sector)
        self._frame()
        for number, flight in enumerate(flights, start=1):
            self._path((sample.seen for sample in flight.samples), Pen.DASHED)
            self._path((sample.flown for sample in flight.samples), Pen.BOLD)
            begin = self._place(*flight.samples[0].flown)
            self._drawing.dot(begin)
            self._drawing.text((begin[0] + 5, begin[1] - 4), str(number))

    def _place(self, azimuth_deg: float, elevation_deg: float) -> Point:
        distance = self._radius * (90.0 - max(elevation_deg, 0.0)) / 90.0
        azimuth = radians(azimuth_deg)
        x, y = self._centre
        return x + distance * sin(azimuth), y - distance * cos(azimuth)

    def _path(self, directions: Iterable[tuple[float, float]], pen: Pen) -> None:
        self._drawing.line([self._place(*each) for each in directions], pen)

    def _horizon(self, clearance: Clearance) -> None:
        azimuths = range(0, 360 + STEP_DEG, STEP_DEG)
        rim = [self._place(azimuth_deg, 0.0) for azimuth_deg in azimuths]
        lowest = [
            self._place(azimuth_deg, clearance.lowest_deg(azimuth_deg)) for azimuth_deg in azimuths
        ]
        self._drawing.area([*rim, *reversed(lowest)])
        floor = [self._place(azimuth_deg, clearance.floor_deg) for azimuth_deg in azimuths]
        self._drawing.line(floor, Pen.DOTTED)

    def _keep_out(self, sector: Sector) -> None:
        width_deg = (sector.to_azimuth_deg - sector.from_azimuth_deg) % 360.0 or 360.0
        steps = max(1, round(width_deg / STEP_DEG))
        azimuths = [sector.from_azimuth_deg + width_deg * step / steps for step in range(steps + 1)]
        low = [self._place(azimuth_deg, sector.lower_elevation_deg) for azimuth_deg in azimuths]
        high = [self._place(azimuth_deg, sector.upper_elevation_deg) for azimuth_deg in azimuths]
        self._drawing.area([*low, *reversed(high)], is_hatched=True)

    def _frame(self) -> None:
        for elevation_deg in RINGS_DEG:
            radius = self._radius * (90 - elevation_deg) / 90
            self._drawing.circle(self._centre, radius)
            x, y = self._centre
            self._drawing.text((x + 3, y - radius + 11), f"{elevation_deg}°", size=9)
        for azimuth_deg, word in ((0, "N"), (90, "E"), (180, "S"), (270, "W")):
            self._drawing.line([self._centre, self._place(azimuth_deg, 0.0)], Pen.FAINT)
            x, y = self._place(azimuth_deg, 0.0)
            aside, down = 12 * sin(radians(azimuth_deg)), -12 * cos(radians(azimuth_deg))
            self._drawing.text((x + aside, y + down + 4), word, Anchor.MIDDLE)
