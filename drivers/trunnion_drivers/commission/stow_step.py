"""Last step: whether it gets to its stow position."""

from collections.abc import Iterator

from trunnion_drivers.commission.bay import Bay
from trunnion_drivers.commission.finding import Finding, bad, judged
from trunnion_drivers.commission.mover import Place

_FARTHEST_OFF_DEG = 0.5


def stow(bay: Bay) -> Iterator[Finding]:
    """Creep there."""
    goal = Place(bay.facts.stow_first_deg, bay.facts.stow_second_deg)
    if not bay.operator.agrees(f"The mount shall creep to its stow position {tuple(goal)}."):
        yield bad("the way to the stow position was passed over")
        return
    bay.mover.creep(goal, 0)
    off_deg = max(abs(at - to) for at, to in zip(bay.mover.place(), goal, strict=True))
    text = f"stowed {off_deg:.3f}° off the stow position"
    yield judged(text, is_good=off_deg < _FARTHEST_OFF_DEG)
