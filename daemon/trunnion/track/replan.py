"""Planning the rest of a contact again, from where the mount stands now."""

from trunnion.mount.clearance import Clearance
from trunnion.mount.joints import Joints
from trunnion.mount.mount import Mount
from trunnion.track.beam import Beam
from trunnion.track.corrected import Corrected
from trunnion.track.correction import Correction
from trunnion.track.day import plan_day
from trunnion.track.objective import Objective
from trunnion.track.path import Assignment
from trunnion.track.programme import Programme
from trunnion.track.wanted import Wanted


def replan(
    flown: Assignment,
    correction: Correction,
    mount: Mount,
    clearance: Clearance,
    beam: Beam,
    present: Joints,
    now_s: float,
    objective: Objective = Objective.TIME_OUTSIDE_BEAM,
) -> Programme:
    """What is left of an assignment from `now_s` (UTC) on, with the target corrected.

    An earlier correction of the same target is replaced. The path that comes of it begins where the
    target then is; a mount that is led to it by `approach` goes over to it without a jump.
    """
    target = flown.target.target if isinstance(flown.target, Corrected) else flown.target
    if not correction.is_none:
        target = Corrected(target, correction)
    rest = Wanted(flown.contact, target, max(flown.begin_s, now_s), flown.end_s, flown.priority)
    return plan_day([rest], mount, clearance, beam, present, now_s, objective)
