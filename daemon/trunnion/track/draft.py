"""One contact while the day is being planned: when it can be had, and what is found about it."""

from collections.abc import Sequence
from dataclasses import dataclass, field, replace

import numpy as np

from trunnion.mount.clearance import Clearance
from trunnion.mount.hinges import Hinges
from trunnion.sky.errors import SkyError
from trunnion.track.beam import Beam
from trunnion.track.course import Course, sample_course
from trunnion.track.loss import MOST_LOSS_DB, loss_db
from trunnion.track.outcome import Lost, Outcome
from trunnion.track.path import Assignment
from trunnion.track.programme import Finding, FindingKind, Forecast
from trunnion.track.reasons import Reason
from trunnion.track.sharing import without
from trunnion.track.stretches import Stretch, clear_stretches, grid
from trunnion.track.wanted import Wanted


@dataclass(eq=False)
class Draft:
    """What is known so far of a wanted contact."""

    wanted: Wanted
    stretches: list[Stretch] = field(default_factory=list)
    assignments: list[Assignment] = field(default_factory=list)
    findings: list[Finding] = field(default_factory=list)
    worst_error_deg: float = 0.0
    outside_beam_s: float = 0.0
    _lost: list[Lost] = field(default_factory=list)

    def look_for_stretches(self, clearance: Clearance, now_s: float) -> None:
        """When it can be had, from now on, if it had the mount for itself."""
        wanted = self.wanted
        if not wanted.from_s < wanted.until_s:
            self.find(FindingKind.EMPTY, "it ends before it begins")
        elif wanted.until_s <= now_s:
            self.find(FindingKind.PAST, "the contact is in the past")
        else:
            from_now = replace(wanted, from_s=max(wanted.from_s, now_s))
            try:
                self.stretches = list(clear_stretches(from_now, clearance))
            except SkyError as error:
                self.find(FindingKind.NO_POSITION, str(error))
                return
            if not self.stretches:
                by = f" by {wanted.margin_deg:g}°" if wanted.margin_deg else ""
                sentence = "the target never stands clear of floor, horizon mask and keep-outs"
                self.find(FindingKind.NEVER_VISIBLE, sentence + by)

    def courses(self, hinges: Hinges) -> list[tuple[Stretch, Course]]:
        """Each stretch, and where the target takes the joints in it."""
        try:
            return [
                (each, sample_course(self.wanted.target, *each, hinges)) for each in self.stretches
            ]
        except SkyError as error:
            self.find(FindingKind.NO_POSITION, str(error))
            return []

    def give_way(self, other: "Draft") -> None:
        """Leave the time that a more wanted contact has taken."""
        left = without(self.stretches, other.stretches)
        if left != self.stretches:
            whole_s = _length_s(self.stretches)
            self.find(
                FindingKind.GIVES_WAY,
                f"it gives way to {other.wanted.contact} (priority {other.wanted.priority}) "
                f"for {whole_s - _length_s(left):.0f} s of {whole_s:.0f} s",
            )
        self.stretches = left

    def end_early(self, early: Assignment, other: str) -> None:
        """End the last assignment early, so that a more wanted contact begins in time."""
        lost_s = self.assignments[-1].end_s - early.end_s
        span = (early.end_s, self.assignments[-1].end_s)
        self.assignments[-1] = early
        self.outside_beam_s += lost_s
        sentence = f"it ends {lost_s:.0f} s early, for the mount to be at {other} in time"
        self.find(FindingKind.GIVES_WAY, sentence, span)

    def find(
        self,
        kind: FindingKind,
        sentence: str,
        span: tuple[float, float] | None = None,
        *,
        is_failure: bool = True,
    ) -> None:
        """Note something that will not be as wished; for the whole contact unless told when."""
        begin_s, end_s = span or (self.wanted.from_s, self.wanted.until_s)
        self.findings.append(Finding(kind, begin_s, end_s, sentence, is_failure))

    def note(self, comes: Outcome, beam: Beam) -> None:
        """Take the outcome of a part of the contact into account."""
        self.worst_error_deg = max(self.worst_error_deg, comes.worst_error_deg)
        self.outside_beam_s += comes.outside_s(beam)
        self._lost.extend(comes.lost(beam))

    def take_lost(self) -> list[Lost]:
        """The stretches noted as lost since this was last asked."""
        lost, self._lost = self._lost, []
        return lost

    def find_lost(self, lost: Lost, reason: Reason, beam: Beam) -> None:
        """Say why a stretch is lost, with numbers."""
        loss = loss_db(lost.worst_error_deg, beam.half_power_deg)
        text = f"{loss:.1f} dB" if loss <= MOST_LOSS_DB else f"over {MOST_LOSS_DB:g} dB"
        self.find(
            reason.kind,
            f"{reason.words}: error up to {lost.worst_error_deg:.2f}°, {text}, "
            f"{lost.outside_beam_s:.0f} s outside the beam",
            (lost.begin_s, lost.end_s),
            is_failure=lost.outside_beam_s > 0.0,
        )

    def forecast(self, beam: Beam) -> Forecast:
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
            self.worst_error_deg,
            self.outside_beam_s,
            tuple(self.findings),
            loss_db(self.worst_error_deg, beam.half_power_deg),
        )


def _length_s(stretches: Sequence[Stretch]) -> float:
    return sum(each.end_s - each.begin_s for each in stretches)


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
