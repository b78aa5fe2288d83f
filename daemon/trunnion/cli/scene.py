"""One picture of the station at work: plan, state, target, joints."""

from rich.console import Group
from rich.panel import Panel
from rich.table import Table
from rich.text import Text

from trunnion.files.station_machine import JointSection
from trunnion.service.briefing import Briefing
from trunnion.service.contact_log import contact_on
from trunnion.service.turn import Turn
from trunnion.sky.instants import format_utc

SCALE_CELLS = 49


def draw(briefing: Briefing, turn: Turn) -> Panel:
    """The whole picture at one turn."""
    title = f"{briefing.station.site.name}  {format_utc(turn.utc_s, 0)}"
    joints = _joints(briefing, turn)
    parts = Group(_plan(briefing, turn), Text(""), _state(turn), *joints, _gate(turn))
    return Panel(parts, title=title, title_align="left", width=100)


def _plan(briefing: Briefing, turn: Turn) -> Table:
    table = Table.grid(padding=(0, 2))
    on = contact_on(turn)
    for each in briefing.contacts:
        begin_s = each.forecast.begin_s if each.forecast else None
        end_s = each.forecast.end_s if each.forecast else None
        if begin_s is None or end_s is None:
            table.add_row(" ", each.contact.id, "cannot be served", style="dim")
            continue
        is_on = on is not None and on.contact == each.contact.id
        mark = "▶" if is_on else ("✓" if turn.utc_s >= end_s else " ")
        span = f"{format_utc(begin_s, 0)[11:19]}–{format_utc(end_s, 0)[11:19]}"
        table.add_row(
            mark, each.contact.id, span, each.contact.target, style="bold" if is_on else ""
        )
    return table


def _state(turn: Turn) -> Text:
    decision = turn.decision
    text = f"{decision.phase.value.upper():<10}"
    if decision.look is not None:
        text += f" target at azimuth {decision.look.azimuth_deg:6.1f}°"
        text += f", elevation {decision.look.elevation_deg:5.1f}°"
    if decision.error_deg is not None:
        text += f", pointing error {decision.error_deg:.3f}°"
    return Text(text)


def _joints(briefing: Briefing, turn: Turn) -> tuple[Text, ...]:
    if turn.reading is None:
        return (Text("no reading"), Text(""))
    mount = briefing.station.mount
    demand = turn.decision.demand
    return (
        _scale("first", mount.first, turn.reading.first_deg, demand and demand.first_deg),
        _scale("second", mount.second, turn.reading.second_deg, demand and demand.second_deg),
    )


def _scale(name: str, joint: JointSection, angle_deg: float, wanted_deg: float | None) -> Text:
    """A joint's travel as a line: `|` where it should be, `o` where it is."""
    lower_deg, upper_deg = joint.travel_deg
    cells = ["·"] * SCALE_CELLS

    def put(at_deg: float, mark: str) -> None:
        share = (at_deg - lower_deg) / (upper_deg - lower_deg)
        cells[min(max(round(share * (SCALE_CELLS - 1)), 0), SCALE_CELLS - 1)] = mark

    if wanted_deg is not None:
        put(wanted_deg, "|")
    put(angle_deg, "o")
    return Text(f"{name:<7}{lower_deg:7.0f}° {''.join(cells)} {upper_deg:.0f}°   {angle_deg:8.2f}°")


def _gate(turn: Turn) -> Text:
    if not turn.verdict.interventions:
        return Text("gate   lets it pass", style="dim")
    return Text("gate   " + "; ".join(each.sentence for each in turn.verdict.interventions))
