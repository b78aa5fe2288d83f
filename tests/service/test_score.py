"""The score of a contact."""

import pytest

from trunnion.service.score import Score, combined


def score_of(*turns: tuple[float, float, float]) -> Score:
    score = Score(half_beam_deg=1.6, tolerance_deg=0.31)
    for turn in turns:
        score.add(*turn)
    return score


def test_worst_rms_and_times_outside() -> None:
    score = score_of((10.0, 0.1, 0.5), (10.5, 2.1, 0.25), (10.75, 0.4, 0.25))
    assert score.worst_error_deg == 2.1
    assert score.worst_at_utc_s == 10.5
    assert score.seconds == 1.0
    assert score.outside_beam_s == 0.25
    assert score.outside_tolerance_s == 0.5
    mean_square = 0.01 * 0.5 + 4.41 * 0.25 + 0.16 * 0.25
    assert score.rms_error_deg == pytest.approx(mean_square**0.5)


def test_before_the_first_turn_there_is_no_error_to_tell() -> None:
    score = score_of()
    assert (score.rms_error_deg, score.worst_at_utc_s) == (None, None)


def test_two_parts_of_a_contact_make_one_score() -> None:
    parts = ((10.0, 0.1, 0.5), (10.5, 2.1, 0.25)), ((31.0, 0.7, 0.3),)
    whole = combined(*(score_of(*part) for part in parts))
    together = score_of(*parts[0], *parts[1])
    assert whole == together
