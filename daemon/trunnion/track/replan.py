"""Planning the rest of a contact again, from where the mount stands now."""

from dataclasses import replace

from trunnion.mount.clearance import Clearance
from trunnion.mount.joints import Joints
from trunnion.mount.mount import Mount
from trunnion.track.beam import Beam
from trunnion.track.corrected import Corrected
from trunnion.track.correction import Correction
from trunnion.track.day import plan_day
from trunnion.track.objective import Objective
from trunnion.track.programme import Programme
from trunnion.track.wanted import Wanted


def replan(
    wanted: Wanted,
    correction: Correction,
    mount: Mount,
    clearance: Clearance,
    beam: Beam,
    present: Joints,
    now_s: float,
    objective: Objective = Objective.TIME_OUTSIDE_BEAM,
) -> Programme:
    """What is left of a contact from `now_s` (UTC) on, with its target corrected.

    The path that comes of it begins where the target then is; a mount that is led to it by
    `approach` goes over to it without a jump. A correction that the target already bears is
    replaced.
    """
    rest = replace(corrected(wanted, correction), from_s=max(wanted.from_s, now_s))
    return plan_day([rest], mount, clearance, beam, present, now_s, objective)


def corrected(wanted: Wanted, correction: Correction) -> Wanted:
    """The same contact with this correction of its target, and with no other."""
    target = wanted.target.target if isinstance(wanted.target, Corrected) else wanted.target
    return replace(wanted, target=target if correction.is_none else Corrected(target, correction))
