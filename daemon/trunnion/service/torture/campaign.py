"""Many seeds, on all cores: what failed, what was lost, and how to see it again."""

import logging
import signal
from collections.abc import Iterator
from concurrent.futures import ProcessPoolExecutor
from multiprocessing import get_context
from typing import NamedTuple

from trunnion.service.torture.checker import Violation
from trunnion.service.torture.mishap import MishapKind
from trunnion.service.torture.scenario import draw
from trunnion.service.torture.trial import shrink, try_out

CHUNK = 4


class SeedResult(NamedTuple):
    """What came of one seed: how many contacts, which mishaps, and what was violated.

    `deepest_deg` is how far the true beam came below floor and mask; negative is the room left.
    `fewest` are the mishaps, in words, that are needed to see the violations again.
    """

    seed: int
    contacts: int
    mishaps: tuple[MishapKind, ...]
    deepest_deg: float
    violations: tuple[Violation, ...]
    fewest: tuple[str, ...]


def try_seed(seed: int) -> SeedResult:
    """Fly a seed; where it fails, find the fewest mishaps that still fail."""
    outcome = try_out(draw(seed))
    contacts, deepest_deg = len(outcome.scenario.contacts), outcome.deepest_deg
    mishaps = tuple(each.kind for each in outcome.scenario.mishaps)
    if outcome.violations:
        outcome = shrink(outcome)
    fewest = tuple(map(str, outcome.scenario.mishaps)) if outcome.violations else ()
    return SeedResult(seed, contacts, mishaps, deepest_deg, outcome.violations, fewest)


def _keep_quiet() -> None:
    """What the daemon's parts log of their troubles is no news here."""
    logging.getLogger("trunnion").addHandler(logging.NullHandler())


def _begin_worker() -> None:
    """A Ctrl-C is for the process that tells what was flown."""
    signal.signal(signal.SIGINT, signal.SIG_IGN)
    _keep_quiet()


def try_seeds(seeds: range, workers: int) -> Iterator[SeedResult]:
    """Fly every seed of a range, in order, in so many processes; one works in this process."""
    _keep_quiet()
    if workers == 1:
        yield from map(try_seed, seeds)
        return
    with ProcessPoolExecutor(workers, get_context("spawn"), _begin_worker) as pool:
        yield from pool.map(try_seed, seeds, chunksize=CHUNK)
