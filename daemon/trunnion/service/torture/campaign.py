"""Many seeds, on all cores: what failed, what was lost, and how to see it again."""

from collections.abc import Iterator
from concurrent.futures import ProcessPoolExecutor
from multiprocessing import get_context
from typing import NamedTuple

from trunnion.service.torture.checker import Violation
from trunnion.service.torture.scenario import draw
from trunnion.service.torture.trial import shrink, try_out

CHUNK = 4


class SeedResult(NamedTuple):
    """What came of one seed: how many contacts and mishaps, and what was violated.

    `fewest` are the mishaps, in words, that are needed to see the violations again.
    """

    seed: int
    contacts: int
    mishaps: int
    violations: tuple[Violation, ...]
    fewest: tuple[str, ...]


def try_seed(seed: int) -> SeedResult:
    """Fly a seed; where it fails, find the fewest mishaps that still fail."""
    outcome = try_out(draw(seed))
    contacts, mishaps = len(outcome.scenario.contacts), len(outcome.scenario.mishaps)
    if outcome.violations:
        outcome = shrink(outcome)
    fewest = tuple(map(str, outcome.scenario.mishaps)) if outcome.violations else ()
    return SeedResult(seed, contacts, mishaps, outcome.violations, fewest)


def try_seeds(seeds: range, workers: int) -> Iterator[SeedResult]:
    """Fly every seed of a range, in order, in so many processes; one works in this process."""
    if workers == 1:
        yield from map(try_seed, seeds)
        return
    with ProcessPoolExecutor(workers, mp_context=get_context("spawn")) as pool:
        yield from pool.map(try_seed, seeds, chunksize=CHUNK)
