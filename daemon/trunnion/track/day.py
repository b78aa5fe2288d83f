"""All contacts of a plan together: who gets the mount when, and on which turn."""

from collections.abc import Sequence
from dataclasses import replace

import numpy as np

from trunnion.mount.clearance import Clearance
from trunnion.mount.joints import Joints, Motion
from trunnion.mount.mount import Mount
from trunnion.sky.errors import SkyError
from trunnion.track.beam import Beam
from trunnion.track.flight import Flown, fly
from trunnion.track.path import Assignment
from trunnion.track.programme import Finding, FindingKind, Forecast, Programme
from trunnion.track.sharing import without
from trunnion.track.stretches import Stretch, clear_stretches, grid
from trunnion.track.transit import NoWay, transit, transit_time_s
from trunnion.track.turns import Leg, plan_legs
from trunnion.track.wanted import Wanted


def plan_day(
    wanted: Sequence[Wanted],
    mount: Mount,
    clearance: Clearance,
    beam: Beam,
    start: Joints,
    now_s: float,
) -> Programme:
    """Give each contact its time, its turn and its forecast.

    Where contacts overlap, the one of higher priority has the mount, of equal ones the earlier; the
    other keeps what is left before and after. `start` is where the mount stands at `now_s`.
    """
    drafts = [_Draft(each, clearance, now_s) for each in wanted]
    _share_out(drafts)
    place, free_s = start, now_s
    pieces = sorted(
        ((stretch, draft) for draft in drafts for stretch in draft.stretches),
        key=lambda piece: piece[0].begin_s,
    )
    for stretch, draft in pieces:
        place, free_s = draft.fly(stretch, mount, clearance, beam, place, free_s)
    assignments = (each for draft in drafts for each in draft.assignments)
    return Programme(
        tuple(sorted(assignments, key=lambda each: each.begin_s)),
        tuple(draft.forecast() for draft in drafts),
    )


class _Draft:
    """One contact while the day is being planned."""

    def __init__(self, wanted: Wanted, clearance: Clearance, now_s: float) -> None:
        self.wanted = wanted
        self.stretches: list[Stretch] = []
        self.assignments: list[Assignment] = []
        self.findings: list[Finding] = []
        self._worst_deg = 0.0
        self._outside_s = 0.0
        if wanted.until_s <= now_s:
            self._find(FindingKind.PAST, "the contact is in the past", is_failure=True)
            return
        begin_s = max(wanted.from_s, now_s)
        try:
            self.stretches = list(clear_stretches(replace(wanted, from_s=begin_s), clearance))
        except SkyError as error:
            self._find(FindingKind.NO_POSITION, str(error), is_failure=True)
            return
        if not self.stretches:
            sentence = "the target never stands clear of floor, horizon mask and keep-outs"
            self._find(FindingKind.NEVER_VISIBLE, sentence, is_failure=True)

    def give_way(self, other: "_Draft") -> None:
        """Leave the time that a more wanted contact has taken."""
        left = without(self.stretches, other.stretches)
        if left != self.stretches:
            self._find(
                FindingKind.GIVES_WAY,
                f"it gives way to {other.wanted.contact} (priority {other.wanted.priority})",
                is_failure=True,
            )
        self.stretches = left

    def fly(
        self,
        stretch: Stretch,
        mount: Mount,
        clearance: Clearance,
        beam: Beam,
        place: Joints,
        free_s: float,
    ) -> tuple[Joints, float]:
        """Plan one stretch from where the mount stands; where and when it is free again."""
        legs = plan_legs(self.wanted.target, stretch, mount, place)
        self._note_travel(legs)
        for leg in legs:
            begins = leg.path.at(leg.begin_s).joints
            try:
                way = transit(place, begins, mount, clearance)
            except NoWay as none:
                self._find(FindingKind.NO_WAY, str(none), is_failure=True)
                continue
            arrives_s = free_s + transit_time_s(place, way, mount)
            is_late = arrives_s > leg.begin_s
            first = Motion(*(place if is_late else begins))
            flown = fly(leg.path, leg.begin_s, leg.end_s, first, mount, beam)
            self._note_flight(flown, leg.begin_s, arrives_s)
            self.assignments.append(
                Assignment(
                    self.wanted.contact,
                    self.wanted.target,
                    leg.begin_s,
                    leg.end_s,
                    leg.path,
                    self.wanted.priority,
                )
            )
            place, free_s = flown.last.joints, leg.end_s
        return place, free_s

    def forecast(self) -> Forecast:
        """What was found."""
        if not self.assignments:
            nothing = (None,) * 6
            return Forecast(self.wanted.contact, *nothing, 0.0, 0.0, tuple(self.findings))
        begin, end = self.assignments[0], self.assignments[-1]
        culmination_s, highest_deg = _culmination(self.assignments)
        return Forecast(
            self.wanted.contact,
            begin.begin_s,
            culmination_s,
            end.end_s,
            highest_deg,
            begin.path.at(begin.begin_s).first_deg,
            end.path.at(end.end_s).first_deg,
            self._worst_deg,
            self._outside_s,
            tuple(self.findings),
        )

    def _note_travel(self, legs: Sequence[Leg]) -> None:
        if not legs:
            sentence = "no turn of the mount's travel reaches the target"
            self._find(FindingKind.OFF_TRAVEL, sentence, is_failure=True)
        elif len(legs) > 1:
            sentence = f"no turn holds all of it: the mount unwinds {len(legs) - 1} times"
            self._find(FindingKind.UNWINDS, sentence, is_failure=True)

    def _note_flight(self, flown: Flown, begin_s: float, arrives_s: float) -> None:
        self._worst_deg = max(self._worst_deg, flown.worst_error_deg)
        self._outside_s += flown.outside_beam_s
        if arrives_s > begin_s:
            sentence = f"the mount arrives {arrives_s - begin_s:.0f} s late"
            self._find(FindingKind.LATE, sentence, is_failure=True)
        if flown.lost is not None:
            self.findings.append(
                Finding(
                    FindingKind.TOO_FAST,
                    *flown.lost,
                    f"the target is faster than the mount: error up to "
                    f"{flown.worst_error_deg:.2f}°, {flown.outside_beam_s:.0f} s outside the beam",
                    is_failure=flown.outside_beam_s > 0.0,
                )
            )

    def _find(self, kind: FindingKind, sentence: str, *, is_failure: bool) -> None:
        self.findings.append(
            Finding(kind, self.wanted.from_s, self.wanted.until_s, sentence, is_failure)
        )


def _share_out(drafts: Sequence[_Draft]) -> None:
    """Let each draft give way to all that come before it in the order of who is wanted more."""
    ranked = sorted(drafts, key=lambda each: (-each.wanted.priority, each.wanted.from_s))
    for rank, draft in enumerate(ranked):
        for other in ranked[:rank]:
            draft.give_way(other)


def _culmination(assignments: Sequence[Assignment]) -> tuple[float, float]:
    """When the target stands highest while it is followed, and how high."""
    best_s, best_deg = assignments[0].begin_s, -90.0
    for each in assignments:
        times = grid(each.begin_s, each.end_s)
        elevations_deg = each.target.looks(times).elevation_deg
        highest = int(np.argmax(elevations_deg))
        if elevations_deg[highest] > best_deg:
            best_s, best_deg = float(times[highest]), float(elevations_deg[highest])
    return best_s, best_deg
