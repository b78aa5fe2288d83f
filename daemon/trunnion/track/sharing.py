"""One antenna, several contacts at once: the more wanted one has it, the other keeps the rest."""

from collections.abc import Iterable, Iterator, Sequence

from trunnion.track.stretches import Stretch

SHORTEST_S = 5.0
"""What is left beside another contact is served from this length on."""


def without(stretches: Iterable[Stretch], taken: Sequence[Stretch]) -> list[Stretch]:
    """The stretches less the taken time; what is left of one may be several, or nothing."""
    left = list(stretches)
    for other in taken:
        left = [rest for each in left for rest in _less(each, other)]
    return left


def _less(stretch: Stretch, taken: Stretch) -> Iterator[Stretch]:
    if taken.end_s <= stretch.begin_s or taken.begin_s >= stretch.end_s:
        yield stretch
        return
    before = Stretch(stretch.begin_s, taken.begin_s)
    after = Stretch(taken.end_s, stretch.end_s)
    yield from (rest for rest in (before, after) if rest.end_s - rest.begin_s >= SHORTEST_S)
