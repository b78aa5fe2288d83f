"""A plan that mixes every kind of target is flown, and each is pointed at."""

import shutil
from pathlib import Path

from tests.sky.stations import EPOCH_S
from trunnion.files.draft import draft_plan
from trunnion.files.station import load_station
from trunnion.service.briefing import brief
from trunnion.service.briefing_order import BriefingOrder
from trunnion.service.rehearsal import rehearsal_of
from trunnion.service.targets import TargetBook
from trunnion.service.viewpoint import viewpoint_of
from trunnion.sky.instants import format_utc
from trunnion.sky.passes import find_passes

EXAMPLE = Path(__file__).parents[2] / "config"
NAMES = ("moon", "jupiter", "icrs:83.633,22.014", "LANTERN-G", "beacon", "file:table.csv")
FROM_S = EPOCH_S + 7200.0
CONTACT_S = 240.0
PAUSE_S = 600.0
POINTED_DEG = 0.02
"""Encoder resolution and noise of the simulated mount, and a control turn of 0.1 s."""


def table(begin_s: float) -> str:
    rows = (
        f"{format_utc(begin_s + 10.0 * i)},{40.0 + 0.3 * i:.3f},{30.0 + 0.1 * i:.3f}\n"
        for i in range(60)
    )
    return "time,azimuth_deg,elevation_deg\n" + "".join(rows)


def test_every_kind_of_target_is_flown_in_one_plan(tmp_path: Path) -> None:
    for name in ("station.yaml", "horizon.txt", "elements.tle"):
        shutil.copy(EXAMPLE / name, tmp_path)
    station = load_station(tmp_path / "station.yaml")
    book = TargetBook(station, viewpoint_of(station))
    contacts = []
    begin_s = FROM_S
    for name in NAMES:
        if name.startswith("file:"):
            (tmp_path / "table.csv").write_text(table(begin_s + 60.0))
        found = find_passes(book.resolve(name), begin_s, begin_s + 2.0 * 86400.0, 25.0)
        risen_s = (found[0].rise_s if found else None) or begin_s
        contacts.append((name, risen_s + 60.0, risen_s + 60.0 + CONTACT_S))
        begin_s = risen_s + 60.0 + CONTACT_S + PAUSE_S
    parts = [draft_plan(name, [(begin, end)]) for name, begin, end in contacts]
    body = "".join(part[part.index("contacts:") + len("contacts:") :] for part in parts)
    (tmp_path / "plan.yaml").write_text("contacts:" + body)
    briefing = brief(BriefingOrder(tmp_path / "station.yaml", None, FROM_S))
    assert [each.contact.target for each in briefing.contacts] == list(NAMES)
    assert [each.sentences for each in briefing.contacts if not each.is_served] == []
    _, rehearsal = rehearsal_of(tmp_path / "station.yaml", None)
    assert len(list(rehearsal.turns())) > 6 * 10 * CONTACT_S
    scores = {name: each.score for name, each in rehearsal.results.items()}
    assert len(scores) == len(NAMES)
    assert max(each.worst_error_deg for each in scores.values()) < POINTED_DEG
