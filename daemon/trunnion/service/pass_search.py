"""A long search for passes in pieces of time, so that somebody can watch it, and little is held."""

from collections.abc import Callable, Iterator

from trunnion.sky.look import Target
from trunnion.sky.passes import Pass, Threshold, find_passes

_PIECE_S = 10 * 86400.0
_SAME_DEG = 1e-9


def search_passes(
    target: Target,
    from_s: float,
    until_s: float,
    above: Threshold,
    advance: Callable[[float], None],
) -> tuple[Pass, ...]:
    """Find what `find_passes` finds; `advance` is called with the seconds of time that are done.

    Raises as `find_passes` does.
    """
    found: list[Pass] = []
    for begin_s, end_s in _pieces(from_s, until_s):
        piece = find_passes(target, begin_s, end_s, above)
        if found and piece and found[-1].set_s is None and piece[0].rise_s is None:
            found[-1:] = [_joined(found[-1], piece[0], begin_s)]
            piece = piece[1:]
        found.extend(piece)
        advance(end_s - begin_s)
    return tuple(found)


def _pieces(from_s: float, until_s: float) -> Iterator[tuple[float, float]]:
    begin_s = from_s
    while until_s - begin_s > 1.5 * _PIECE_S:
        yield begin_s, begin_s + _PIECE_S
        begin_s += _PIECE_S
    yield begin_s, until_s


def _joined(before: Pass, after: Pass, seam_s: float) -> Pass:
    """One pass of the two parts that a seam cut; both may be highest at the seam itself."""
    difference_deg = before.highest_elevation_deg - after.highest_elevation_deg
    if abs(difference_deg) <= _SAME_DEG:
        culmination_s: float | None = seam_s
    else:
        culmination_s = (before if difference_deg > 0 else after).culmination_s
    highest_deg = max(before.highest_elevation_deg, after.highest_elevation_deg)
    return Pass(before.rise_s, culmination_s, after.set_s, highest_deg)
