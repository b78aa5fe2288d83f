"""All contacts of a plan together: who gets the mount when, and which way each is served."""

from collections.abc import Sequence

from trunnion.mount.clearance import Clearance
from trunnion.mount.joints import Joints
from trunnion.mount.mount import Mount
from trunnion.track.beam import Beam
from trunnion.track.course import Course
from trunnion.track.draft import Draft
from trunnion.track.objective import Objective
from trunnion.track.options import options_for
from trunnion.track.programme import FindingKind, Programme
from trunnion.track.schedule import Piece, Schedule
from trunnion.track.serving import Serving, serve
from trunnion.track.steering import Aim
from trunnion.track.stretches import Stretch
from trunnion.track.wanted import Wanted


def plan_day(
    wanted: Sequence[Wanted],
    mount: Mount,
    clearance: Clearance,
    beam: Beam,
    start: Joints,
    now_s: float,
    objective: Objective = Objective.TIME_OUTSIDE_BEAM,
) -> Programme:
    """Give each contact its time, its path and its forecast.

    Where contacts overlap, the one of higher priority has the mount, of equal ones the earlier; the
    other keeps what is left before and after. `start` is where the mount stands at `now_s` (UTC).
    """
    drafts = [Draft(each) for each in wanted]
    for draft in drafts:
        draft.look_for_stretches(clearance, now_s)
    _share_out(drafts)
    aim = Aim(mount, clearance, objective, beam.half_width_deg)
    pieces = sorted(
        (
            (stretch, draft, course)
            for draft in drafts
            for stretch, course in draft.courses(mount.hinges)
        ),
        key=lambda piece: piece[0].begin_s,
    )
    _serve_all(pieces, Serving(aim, beam, start, now_s))
    assignments = (each for draft in drafts for each in draft.assignments)
    return Programme(
        tuple(sorted(assignments, key=lambda each: each.begin_s)),
        tuple(draft.forecast(beam) for draft in drafts),
    )


def _share_out(drafts: Sequence[Draft]) -> None:
    """Let each draft give way to all that come before it in the order of who is wanted more."""
    ranked = sorted(drafts, key=lambda each: (-each.wanted.priority, each.wanted.from_s))
    for rank, draft in enumerate(ranked):
        for other in ranked[:rank]:
            draft.give_way(other)


def _serve_all(pieces: Sequence[tuple[Stretch, Draft, Course]], serving: Serving) -> None:
    aim, beam = serving.aim, serving.beam
    options = [options_for(course, aim, beam) for _, _, course in pieces]
    schedule = Schedule(
        [
            Piece(*stretch, draft.wanted.priority, each)
            for (stretch, draft, _), each in zip(pieces, options, strict=True)
        ],
        aim.mount,
        aim.clearance,
    )
    chosen = schedule.choose(serving.place, serving.free_s)
    for (stretch, draft, course), each, choice in zip(pieces, options, chosen, strict=True):
        if choice is not None:
            serve(draft, course, each[choice], serving)
        elif each:
            draft.find(FindingKind.LEFT_OUT, "there is no time or no way to get there", stretch)
        else:
            sentence = "nothing in the travel of the mount points near the target"
            draft.find(FindingKind.OFF_TRAVEL, sentence, stretch)
