import pickle
from itertools import pairwise

import numpy as np
import pytest

from tests.sky.stations import EPOCH_S, satellite
from trunnion.sky.angle_table import AngleTable, Row
from trunnion.sky.errors import NoPosition, SkyError
from trunnion.sky.look import Target
from trunnion.sky.passes import find_passes

STEP_S = 10.0
TOLERANCE_DEG = 0.02
"""The cubic's slopes come from rows 10 s apart, over a low pass near the zenith."""


def sampled(target: Target, from_s: float, until_s: float, step_s: float = STEP_S) -> AngleTable:
    looks = [(s, target.look(float(s))) for s in np.arange(from_s, until_s, step_s)]
    return AngleTable(
        "sampled", tuple(Row(float(s), each[0], each[1], each[2]) for s, each in looks)
    )


def test_between_its_rows_it_follows_the_target_they_were_taken_from() -> None:
    target = satellite("QUILLON-1")
    one = max(
        find_passes(target, EPOCH_S, EPOCH_S + 86400.0, 5.0), key=lambda p: p.highest_elevation_deg
    )
    assert one.rise_s is not None
    assert one.set_s is not None
    table = sampled(target, one.rise_s, one.set_s)
    for instant in np.linspace(table.rows[0].utc_s, table.rows[-1].utc_s, 257).tolist():
        truth, look = target.look(instant), table.look(instant)
        across_deg = (look[0] - truth[0] + 180.0) % 360.0 - 180.0
        assert abs(across_deg) * np.cos(np.radians(truth[1])) < TOLERANCE_DEG
        assert look.elevation_deg == pytest.approx(truth.elevation_deg, abs=TOLERANCE_DEG)
        assert look.range_km == pytest.approx(truth.range_km, rel=1e-3)


def test_through_north_it_goes_the_short_way() -> None:
    rows = tuple(Row(10.0 * i, (356.5 + i) % 360.0, 30.0 + 0.1 * i) for i in range(8))
    table = AngleTable("north", rows)
    azimuths = [table.look(s).azimuth_deg for s in np.linspace(0.0, 70.0, 141).tolist()]
    steps = [(b - a + 180.0) % 360.0 - 180.0 for a, b in pairwise(azimuths)]
    assert min(steps) > 0.0
    assert max(steps) < 0.06
    assert table.look(35.0).azimuth_rate_deg_s == pytest.approx(0.1, abs=1e-3)
    assert table.look(35.0).elevation_rate_deg_s == pytest.approx(0.01, abs=1e-3)
    assert table.look(35.0).range_km is None


def test_outside_and_in_a_gap_it_says_nothing() -> None:
    rows = [Row(10.0 * i, 40.0 + i, 20.0) for i in range(5)]
    rows += [Row(900.0 + 10.0 * i, 45.0 + i, 20.0) for i in range(5)]
    table = AngleTable("gap", tuple(rows))
    for instant in (-0.1, 41.0, 899.0, 940.1):
        with pytest.raises(NoPosition, match="gap: expected an instant within its rows"):
            table.look(instant)
    assert table.look(40.0).azimuth_deg == pytest.approx(44.0)
    assert table.look(940.0).azimuth_deg == pytest.approx(49.0)


@pytest.mark.parametrize(
    ("rows", "answer"),
    [
        ((), "at least two rows, got 0"),
        ((Row(1.0, 2.0, 3.0), Row(1.0, 3.0, 3.0)), "row 2: expected a time after"),
        ((Row(1.0, 2.0, 3.0), Row(2.0, 3.0, 91.0)), "row 2: expected an azimuth"),
        ((Row(1.0, 2.0, float("nan")), Row(2.0, 3.0, 1.0)), "row 1: expected finite"),
        ((Row(1.0, 2.0, 3.0, 500.0), Row(2.0, 3.0, 1.0)), "row 2: expected a range in every"),
    ],
)
def test_rows_that_cannot_be_followed_are_refused(rows: tuple[Row, ...], answer: str) -> None:
    with pytest.raises(SkyError, match=answer):
        AngleTable("bad", rows)


def test_arrays_and_a_pickled_copy_give_the_same_numbers() -> None:
    table = pickle.loads(pickle.dumps(sampled(satellite("QUILLON-2"), EPOCH_S, EPOCH_S + 300.0)))
    instants = EPOCH_S + np.array([3.3, 171.9, 288.8])
    looks = table.looks(instants)
    assert looks.range_km is not None
    for index, instant in enumerate(instants.tolist()):
        assert [column[index] for column in looks] == list(table.look(instant))
    assert table.looks(np.empty(0)).azimuth_deg.size == 0


def test_passes_are_looked_for_where_there_are_rows() -> None:
    target = satellite("QUILLON-1")
    whole = find_passes(target, EPOCH_S, EPOCH_S + 43_200.0, 5.0)
    rows: list[Row] = []
    for each in whole[:2]:
        assert each.rise_s is not None
        assert each.set_s is not None
        instants = np.arange(each.rise_s - 45.0, each.set_s - 45.0, STEP_S).tolist()
        rows += [Row(s, *target.look(s)[:3]) for s in instants]
    found = find_passes(AngleTable("two", tuple(rows)), EPOCH_S, EPOCH_S + 43_200.0, 5.0)
    assert len(found) == 2
    for ours, theirs in zip(found, whole, strict=False):
        assert ours.rise_s == pytest.approx(theirs.rise_s, abs=0.5)
        assert ours.set_s is not None
        assert theirs.set_s is not None
        assert theirs.set_s - 60.0 < ours.set_s < theirs.set_s - 40.0
