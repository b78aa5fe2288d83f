"""One page for a programme: the sky on the left, the joints over time on the right."""

from collections.abc import Sequence

from trunnion.cli.pictures.chart import Box, Chart, Level
from trunnion.cli.pictures.flight import Flight, flight_of
from trunnion.cli.pictures.sky_view import SkyView
from trunnion.cli.pictures.svg import Anchor, Drawing, Pen
from trunnion.mount.clearance import Clearance
from trunnion.mount.mount import JointLimits, Mount
from trunnion.sky.instants import format_utc
from trunnion.track.beam import Beam
from trunnion.track.programme import Programme

WIDTH, HEIGHT = 1240.0, 720.0
LEFT, CHART_WIDTH = 560.0, 590.0
NOTES = (
    "solid: where the beam will point; dashed: where the target stands",
    "grey: below floor (dotted) or horizon mask; hatched: keep-out",
)


def picture(programme: Programme, mount: Mount, clearance: Clearance, beam: Beam) -> str:
    """SVG text of a programme as it will be flown; raises NoPosition."""
    flights = [flight_of(each, mount) for each in programme.assignments]
    drawing = Drawing(WIDTH, max(HEIGHT, 620.0 + 15.0 * len(flights)))
    SkyView(drawing, (265.0, 275.0), 225.0).draw(clearance, flights)
    for line, note in enumerate(NOTES):
        drawing.text((265.0, 545.0 + 16 * line), note, Anchor.MIDDLE, 10)
    for number, flight in enumerate(flights, start=1):
        worst_deg = max(sample.error_deg for sample in flight.samples)
        words = f"{number}  {flight.contact}: error up to {worst_deg:.2f}°"
        drawing.text((40.0, 590.0 + 15 * number), words, size=10)
    if flights:
        _charts(drawing, flights, mount, beam)
    return str(drawing)


def _charts(drawing: Drawing, flights: Sequence[Flight], mount: Mount, beam: Beam) -> None:
    _angle(drawing, 40.0, flights, mount.first, 0)
    _angle(drawing, 205.0, flights, mount.second, 1)
    rates = Chart(drawing, Box(LEFT, 370.0, CHART_WIDTH, 125.0), flights, (-110.0, 110.0))
    limits = [Level(100.0, "limit"), Level(0.0, "", Pen.FAINT), Level(-100.0, "limit")]
    rates.frame("rates, % of the limit: first joint solid, second dotted", limits)
    rates.curve(lambda sample: 100.0 * sample.motion.first_rate_deg_s / mount.first.rate_deg_s)
    rates.curve(
        lambda sample: 100.0 * sample.motion.second_rate_deg_s / mount.second.rate_deg_s,
        Pen.DOTTED,
    )
    worst_deg = max(sample.error_deg for flight in flights for sample in flight.samples)
    highest_deg = 1.2 * max(worst_deg, beam.half_width_deg)
    errors = Chart(
        drawing, Box(LEFT, 535.0, CHART_WIDTH, 125.0), flights, (0.0, round(highest_deg, 2))
    )
    levels = [Level(beam.half_width_deg, "half beam"), Level(beam.tolerance_deg, "tolerance")]
    if worst_deg > 2.0 * beam.half_width_deg:
        levels.append(Level(worst_deg, f"{worst_deg:.2f}°", Pen.FAINT))
    errors.frame("predicted error, °", levels)
    errors.curve(lambda sample: sample.error_deg)
    errors.names([format_utc(flight.samples[0].utc_s, 0)[11:] for flight in flights])


def _angle(
    drawing: Drawing, top: float, flights: Sequence[Flight], limits: JointLimits, joint: int
) -> None:
    room_deg = 0.08 * (limits.upper_deg - limits.lower_deg)
    span = round(limits.lower_deg - room_deg), round(limits.upper_deg + room_deg)
    chart = Chart(drawing, Box(LEFT, top, CHART_WIDTH, 125.0), flights, span)
    levels = [Level(limits.lower_deg, f"{limits.lower_deg:g}°")]
    levels.append(Level(limits.upper_deg, f"{limits.upper_deg:g}°"))
    chart.frame(f"{('first', 'second')[joint]} joint, °", levels)
    chart.curve(lambda sample: sample.motion[joint])
