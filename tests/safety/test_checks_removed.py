"""Without any one of its checks the gate no longer passes its tests."""

from collections.abc import Iterator
from multiprocessing import get_context
from multiprocessing.pool import Pool

import pytest

from tests.safety.equivalent import IDLE_CHECKS
from tests.safety.removal import fails_whole, is_missed, removals

FEWEST = 55
"""So many checks there were when this was written: the search for them must not lose any."""


@pytest.fixture(scope="module")
def processes() -> Iterator[Pool]:
    """A fresh process for each call, forked from one that has never seen the gate."""
    context = get_context("forkserver")
    context.set_forkserver_preload(["tests.safety.removal", "hypothesis", "pytest_timeout"])
    with context.Pool(2, maxtasksperchild=1) as pool:
        yield pool


def test_every_check_of_the_gate_is_found() -> None:
    assert len(removals()) >= FEWEST


def test_with_all_of_its_checks_the_gate_passes(processes: Pool) -> None:
    assert not processes.apply(fails_whole, ["gate"])


def test_no_check_can_be_taken_out_unnoticed(processes: Pool) -> None:
    checks = removals()
    missed = processes.map(is_missed, checks, chunksize=1)
    unnoticed = {each.name for each, is_it in zip(checks, missed, strict=True) if not is_it}
    assert unnoticed == set(IDLE_CHECKS)
