"""What is asked of a briefing, apart from it: whoever asks needs none of its tools.

The daemon asks a child process; orbits, passes and paths are loaded there. In the daemon they are
not needed before the first plan comes back, long after the first control turn.
"""

from pathlib import Path
from typing import TYPE_CHECKING, NamedTuple

from trunnion.mount.joints import Joints
from trunnion.service.standing_correction import CorrectionInForce

if TYPE_CHECKING:
    from trunnion.service.briefing import Briefing


class BriefingOrder(NamedTuple):
    """What to prepare: which files, from where the mount stands, from when on.

    Without a plan path the station's own; without a place the mount's stow position; an operator's
    correction where one is in force. With `begun_by_s` the contacts that begin later are left out.
    """

    station: Path
    plan: Path | None
    now_s: float
    place: Joints | None = None
    correction: CorrectionInForce | None = None
    begun_by_s: float | None = None

    def wants(self, from_s: float) -> bool:
        """Whether a contact that may begin at this second is to be prepared."""
        return self.begun_by_s is None or from_s <= self.begun_by_s


def brief_elsewhere(order: BriefingOrder) -> "Briefing":
    """Prepare a plan, loading what that needs; raises FileProblems."""
    from trunnion.service.briefing import brief

    return brief(order)
