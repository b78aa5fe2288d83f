"""The picture of the station at work, as text."""

from pathlib import Path

from rich.console import Console

from tests.service.stations import write_plan, write_station
from trunnion.cli.scene import draw
from trunnion.pilot.phase import Phase
from trunnion.service.rehearsal import rehearsal_of

CONTACTS = (
    "{id: first-light, target: beacon, from: 2026-12-01T00:24:00Z, until: 2026-12-01T00:24:30Z}",
    "{id: beneath, target: 'fixed:10,2', from: 2026-12-01T01:24:00Z, until: 2026-12-01T01:25:00Z}",
)


def test_plan_phase_target_joints_and_gate_are_told(tmp_path: Path) -> None:
    station = write_station(tmp_path)
    write_plan(tmp_path, *CONTACTS)
    briefing, rehearsal = rehearsal_of(station, None)
    shown: dict[Phase, str] = {}
    for turn in rehearsal.turns():
        if turn.decision.phase not in shown:
            console = Console(width=100)
            with console.capture() as captured:
                console.print(draw(briefing, turn))
            shown[turn.decision.phase] = captured.get()
    tracking = shown[Phase.TRACKING]
    assert "Ternholm  2026-12-01T00:24:00Z" in tracking
    assert "▶  first-light" in tracking
    assert "cannot be served" in tracking
    assert "TRACKING" in tracking
    assert "azimuth  251.3°, elevation  18.5°" in tracking
    assert "-270° " in tracking
    assert "-108.70°" in tracking
    assert "lets it pass" in tracking
    assert "✓  first-light" not in tracking
    assert "✓  first-light" in shown[Phase.STOWING]
    assert "STOWING" in shown[Phase.STOWING]
    assert max(len(line) for line in tracking.splitlines()) <= 100
