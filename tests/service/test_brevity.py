"""Keeping one kind of message from filling the log."""

import logging

from trunnion.service.brevity import BURST, REFILL_PER_S, Brevity


def record(second: float, line: int = 71, level: int = logging.WARNING) -> logging.LogRecord:
    made = logging.LogRecord("trunnion.x", level, "x.py", line, "no request: %s", ("y",), None)
    made.created = 1e9 + second
    return made


def test_a_flood_is_cut_short_and_counted() -> None:
    brevity = Brevity()
    passed = [brevity.filter(record(0.001 * number)) for number in range(1000)]
    assert passed == [True] * BURST + [False] * (1000 - BURST)
    later = record(1.0 + 1.0 / REFILL_PER_S)
    assert brevity.filter(later)
    assert later.getMessage() == f"no request: y (and {1000 - BURST} like it before)"


def test_other_messages_have_an_allowance_of_their_own() -> None:
    brevity = Brevity()
    for number in range(1000):
        brevity.filter(record(0.001 * number))
    assert brevity.filter(record(1.1, line=72))


def test_what_is_critical_always_passes() -> None:
    brevity = Brevity()
    assert all(brevity.filter(record(0.0, level=logging.CRITICAL)) for _ in range(1000))


def test_a_steady_trickle_passes_whole() -> None:
    brevity = Brevity()
    assert all(brevity.filter(record(number / REFILL_PER_S)) for number in range(500))


def test_a_clock_that_steps_back_does_no_harm() -> None:
    brevity = Brevity()
    assert brevity.filter(record(5000.0))
    assert brevity.filter(record(-5000.0))


def test_many_kinds_are_forgotten_and_not_hoarded() -> None:
    brevity = Brevity()
    assert all(brevity.filter(record(0.0, line=line)) for line in range(5000))
