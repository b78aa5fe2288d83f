"""Serving one piece of a contact by the option that the day has chosen for it."""

from dataclasses import dataclass
from itertools import pairwise

from trunnion.mount.joints import Joints, Motion
from trunnion.track.beam import Beam
from trunnion.track.course import Course
from trunnion.track.draft import Draft
from trunnion.track.handover import begin_late, end_early
from trunnion.track.keeping_clear import clear_parts
from trunnion.track.options import Leg, Option
from trunnion.track.outcome import outcome
from trunnion.track.path import Assignment
from trunnion.track.planned import PlannedPath
from trunnion.track.planned_arrays import planned_path
from trunnion.track.programme import FindingKind
from trunnion.track.reasons import Reason, reason_for
from trunnion.track.steering import Aim, steer
from trunnion.track.transit import NoWay
from trunnion.track.wanted import Wanted

PROMPT_S = 0.5
"""A mount that is no later than this is not called late."""

NEAR_DEG = 5.0
"""A path that begins no further from the mount is taken up at once, and caught on the way."""


@dataclass
class Serving:
    """What is planned for, and where and from when on (UTC) the mount is free."""

    aim: Aim
    beam: Beam
    place: Joints
    free_s: float
    last: Draft | None = None

    def is_near(self, begins: Joints, begin_s: float) -> bool:
        """Whether the mount, free by then, stands near enough to follow from there at once."""
        off_deg = max(abs(a - b) for a, b in zip(self.place, begins, strict=True))
        return off_deg <= NEAR_DEG and self.free_s <= begin_s

    def make_room(self, wanted: Wanted, begins: Joints, begin_s: float) -> None:
        """Have a less wanted contact just before end early enough for this one; raises NoWay."""
        if self.last is None or self.last.wanted.priority >= wanted.priority:
            return
        before = self.last.assignments[-1]
        early = end_early(before, begins, begin_s, self.aim.mount, self.aim.clearance)
        if early.end_s < before.end_s:
            self.last.end_early(early, wanted.contact)
            self.place, self.free_s = early.path.at(early.end_s).joints, early.end_s


def serve(draft: Draft, course: Course, option: Option, serving: Serving) -> None:
    """Plan the legs of an option, one after the other."""
    for before, after in pairwise(option.legs):
        _say_gap(draft, course, option, (before.last, after.begin), serving)
    for leg in option.legs:
        _serve_leg(draft, course, option, leg, serving)


def _serve_leg(draft: Draft, course: Course, option: Option, leg: Leg, serving: Serving) -> None:
    aim = serving.aim
    part = course.part(leg.begin, leg.last + 1)
    motions = steer(part, option.branch[leg.begin : leg.last + 1], aim)
    path = planned_path(draft.wanted.target, part.begin_s, part.step_s, motions)
    parts = list(clear_parts(motions, aim.mount, aim.clearance))
    if parts != [(0, part.size - 1)]:
        sentence = "the way to follow the target leads through something that must stay clear"
        draft.find(FindingKind.OBSTRUCTED, sentence, part.span(0, part.size - 1))
    for begin, last in parts:
        _fly(draft, path, part.span(begin, last), serving)
    for lost in draft.take_lost():
        reason = reason_for(course, option.branch, (lost.begin_s, lost.end_s), aim.mount)
        draft.find_lost(lost, reason, serving.beam)


def _fly(draft: Draft, path: PlannedPath, span: tuple[float, float], serving: Serving) -> None:
    """Take a part of a path into the programme, and note what will come of it."""
    aim, beam, wanted = serving.aim, serving.beam, draft.wanted
    begin_s, end_s = span
    try:
        serving.make_room(wanted, path.at(begin_s).joints, begin_s)
        there_s = begin_s
        if not serving.is_near(path.at(begin_s).joints, begin_s):
            there_s = begin_late(
                path, span, serving.place, serving.free_s, aim.mount, aim.clearance
            )
    except NoWay as none:
        draft.find(FindingKind.NO_WAY, str(none), span)
        return
    if there_s > begin_s + PROMPT_S:
        draft.find(FindingKind.LATE, f"the mount arrives {there_s - begin_s:.0f} s late", span)
    draft.outside_beam_s += there_s - begin_s
    if there_s >= end_s:
        return
    is_in_time = serving.free_s < begin_s or there_s > begin_s
    begins = Motion(*(path.at(there_s).joints if is_in_time else serving.place))
    draft.note(outcome(path, (there_s, end_s), begins, aim.mount, beam), beam)
    draft.assignments.append(
        Assignment(wanted.contact, wanted.target, there_s, end_s, path, wanted.priority)
    )
    serving.place, serving.free_s, serving.last = path.at(end_s).joints, end_s, draft


def _say_gap(
    draft: Draft, course: Course, option: Option, gap: tuple[int, int], serving: Serving
) -> None:
    """Say where the target is given up between two legs, and for how long."""
    begin, last = gap
    span = course.span(begin, last)
    lost_s = span[1] - span[0]
    draft.outside_beam_s += lost_s
    if option.branch[begin] != option.branch[last]:
        reason = Reason(FindingKind.UNWINDS, "no turn of the travel holds all of it")
    else:
        reason = reason_for(course, option.branch, span, serving.aim.mount)
    draft.find(reason.kind, f"{reason.words}: the target is given up for {lost_s:.0f} s", span)
