"""`trunnion torture`: whole stations in virtual time under every fault we could think of."""

import os
from collections import Counter
from typing import TYPE_CHECKING, Annotated

import typer

from trunnion.cli.arguments import AsJson
from trunnion.cli.errors import FAILED
from trunnion.cli.output import print_json, print_text, progress, say

if TYPE_CHECKING:
    from trunnion.service.torture.campaign import SeedResult


def torture(
    *,
    seed: Annotated[int, typer.Option(metavar="N", help="The first seed.")] = 1,
    count: Annotated[
        int, typer.Option(metavar="N", min=1, help="How many seeds, one station each.")
    ] = 100,
    workers: Annotated[
        int | None, typer.Option(metavar="N", min=1, help="Processes; by default one a core.")
    ] = None,
    as_json: AsJson = False,
) -> None:
    """Fly invented stations through contacts full of faults, and judge what truly happened.

    The same seed is the same flight. Moves no real mount. Ctrl-C ends it early and tells what was
    flown. Exit code 1 when a promise was broken, or it was ended early.
    """
    seeds = range(seed, seed + count)
    results = _flown(seeds, workers or os.cpu_count() or 1)
    if not results:
        raise typer.Exit(FAILED)
    failed = [each for each in results if each.violations]
    if as_json:
        print_json(_plain(results, failed))
    else:
        _print(results, failed)
    if failed or len(results) < len(seeds):
        raise typer.Exit(FAILED)


def _flown(seeds: range, workers: int) -> "list[SeedResult]":
    """What came of the seeds, in order; of fewer of them where somebody has had enough."""
    from trunnion.service.torture.campaign import try_seeds

    results: list[SeedResult] = []
    try:
        with progress("torturing", len(seeds)) as advance:
            for result in try_seeds(seeds, workers):
                results.append(result)
                advance(1)
    except KeyboardInterrupt:
        say(f"ended early, after {len(results)} of {len(seeds)} stations")
    return results


def _plain(results: "list[SeedResult]", failed: "list[SeedResult]") -> dict[str, object]:
    return {
        "seeds": len(results),
        "contacts": sum(each.contacts for each in results),
        "mishaps": _by_kind(results),
        "broken": _by_guarantee(failed),
        "deepest_deg": max(each.deepest_deg for each in results),
        "failed": [
            {
                "seed": each.seed,
                "violations": [violation._asdict() for violation in each.violations],
                "fewest_mishaps": list(each.fewest),
            }
            for each in failed
        ],
    }


def _print(results: "list[SeedResult]", failed: "list[SeedResult]") -> None:
    for each in failed:
        print_text(f"seed {each.seed}: trunnion torture --seed {each.seed} --count 1")
        for mishap in each.fewest:
            print_text(f"  given  {mishap}")
        for violation in each.violations:
            print_text(
                f"  broken {violation.guarantee}, after {violation.since_s:.1f} s: "
                f"{violation.sentence}"
            )
    for counts in (_by_kind(results), _by_guarantee(failed)):
        for what, count in counts.items():
            print_text(f"{count:6d}  {what}")
    contacts = sum(each.contacts for each in results)
    mishaps = sum(len(each.mishaps) for each in results)
    print_text(_depth(max(each.deepest_deg for each in results)))
    print_text(
        f"{len(results)} stations, {contacts} contacts, {mishaps} mishaps; "
        f"promises broken at {len(failed)} stations"
    )


def _by_kind(results: "list[SeedResult]") -> dict[str, int]:
    counted = Counter(kind.value for each in results for kind in each.mishaps)
    return dict(counted.most_common())


def _by_guarantee(failed: "list[SeedResult]") -> dict[str, int]:
    counted = Counter(f"broken: {each.guarantee}" for one in failed for each in one.violations)
    return dict(counted.most_common())


def _depth(deepest_deg: float) -> str:
    where = "above" if deepest_deg < 0.0 else "below"
    return (
        f"lowest true beam: {abs(deepest_deg):.3f}° {where} floor and mask, less the encoder's "
        "own error"
    )
