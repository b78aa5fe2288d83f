"""The choice of options over a day, against every choice there is."""

from itertools import product

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from tests.track.stations import CLEARANCE, mount
from trunnion.mount.joints import Joints
from trunnion.track.options import Leg, Option
from trunnion.track.schedule import LAYERS_BACK, SLEW_SHARE, Piece, Schedule
from trunnion.track.transit import transit, transit_time_s

MACHINE = mount()
START = Joints(12.7, 61.3)

places = st.builds(Joints, st.floats(-270.0, 267.0), st.floats(5.4, 90.0))


def option(begin: Joints, end: Joints, lost_s: float = 0.0) -> Option:
    return Option(np.zeros(2, dtype=np.int64), (Leg(0, 1),), begin, end, lost_s)


options = st.builds(option, places, places, st.floats(0.0, 100.0))
days = st.lists(
    st.tuples(
        st.floats(0.0, 90.0),
        st.floats(30.0, 300.0),
        st.integers(0, 9),
        st.lists(options, min_size=1, max_size=2),
    ),
    min_size=1,
    max_size=LAYERS_BACK,  # so that leaving out all the others is one of the choices looked at
)


def pieces_of(day: list[tuple[float, float, int, list[Option]]]) -> list[Piece]:
    pieces, now_s = [], 100.0
    for pause_s, length_s, priority, each in day:
        pieces.append(Piece(now_s + pause_s, now_s + pause_s + length_s, priority, each))
        now_s = pieces[-1].end_s
    return pieces


def cost_of(pieces: list[Piece], chosen: tuple[int | None, ...]) -> float:
    """What a choice costs, counted from its description."""
    place, free_s, cost = START, 0.0, 0.0
    for piece, number in zip(pieces, chosen, strict=True):
        if number is None:
            cost += piece.worth
            continue
        option = piece.options[number]
        way = transit(place, option.begin, MACHINE, CLEARANCE)
        slew_s = transit_time_s(place, way, MACHINE)
        late_s = max(0.0, free_s + slew_s - piece.begin_s)
        length_s = piece.end_s - piece.begin_s
        if late_s >= length_s:
            return float("inf")
        cost += min(1.0, (late_s + option.lost_s) / length_s) * piece.worth + SLEW_SHARE * slew_s
        place, free_s = option.end, piece.end_s
    return cost


@settings(max_examples=150, deadline=None)
@given(days)
def test_no_choice_is_cheaper_than_the_one_made(
    day: list[tuple[float, float, int, list[Option]]],
) -> None:
    pieces = pieces_of(day)
    chosen = Schedule(pieces, MACHINE, CLEARANCE).choose(START, 0.0)
    choices = [[None, *range(len(piece.options))] for piece in pieces]
    best = min(cost_of(pieces, choice) for choice in product(*choices))
    assert cost_of(pieces, tuple(chosen)) == pytest.approx(best)


def test_the_turn_of_a_contact_is_chosen_for_the_one_after_it() -> None:
    """Two turns serve the first one alike; the second one begins near the end of the farther."""

    def turn(begin_deg: float, end_deg: float) -> Option:
        return option(Joints(begin_deg, 20.0), Joints(end_deg, 20.0))

    first = Piece(100.0, 400.0, 1, [turn(-100.0, -190.0), turn(260.0, 170.0)])
    second = Piece(410.0, 700.0, 1, [turn(185.0, 90.0)])
    schedule = Schedule([first, second], MACHINE, CLEARANCE)
    assert schedule.choose(START, 0.0) == [1, 0]


def test_a_day_of_nothing() -> None:
    assert Schedule([], MACHINE, CLEARANCE).choose(START, 0.0) == []
