"""Everything that can be known of a plan before it is flown.

`check` prints it, `rehearse`, `demo` and `run` fly it. A contact that cannot be prepared does not
keep the others from being served; it is told with its reason.
"""

from collections.abc import Callable, Iterable
from dataclasses import dataclass
from typing import TypeVar

from trunnion.files.plan import Contact, load_plan
from trunnion.files.problems import FileProblems, Problem
from trunnion.files.station import StationFile, load_station
from trunnion.service.antenna import beam_of, flown_mount_of, objective_of
from trunnion.service.briefing_order import BriefingOrder
from trunnion.service.clearance import clearance_of
from trunnion.service.errors import ServiceError
from trunnion.service.standing_correction import CorrectionInForce
from trunnion.service.targets import TargetBook
from trunnion.service.viewpoint import viewpoint_of
from trunnion.sky.elements import Satellite
from trunnion.sky.errors import SkyError
from trunnion.sky.look import Target
from trunnion.track.corrected import Corrected
from trunnion.track.day import plan_day
from trunnion.track.path import Assignment
from trunnion.track.programme import Forecast, Programme
from trunnion.track.replan import corrected
from trunnion.track.wanted import Wanted

Content = TypeVar("Content")

MARGIN_DEG = 0.2
"""Contacts begin and end this far from floor, mask and keep-outs (common practice, no source)."""


@dataclass(frozen=True, slots=True)
class ContactBriefing:
    """One contact of the plan: what it will be like, or why there is none.

    `element_age_days` is the largest age of the target's orbit elements during the contact.
    """

    contact: Contact
    forecast: Forecast | None
    trouble: str | None
    element_age_days: float | None = None

    @property
    def is_served(self) -> bool:
        """Whether nothing that was asked for will be missed."""
        return self.forecast is not None and self.forecast.is_served

    @property
    def sentences(self) -> tuple[str, ...]:
        """Everything that needs to be said of it."""
        if self.forecast is None:
            return (self.trouble or "not prepared",)
        return tuple(finding.sentence for finding in self.forecast.findings)


@dataclass(frozen=True, slots=True)
class Briefing:
    """All contacts in the order of the plan, and who has the mount when."""

    station: StationFile
    contacts: tuple[ContactBriefing, ...]
    programme: Programme

    @property
    def assignments(self) -> tuple[Assignment, ...]:
        """Who has the mount when."""
        return self.programme.assignments


def brief(order: BriefingOrder, strength: float = 1.0) -> Briefing:
    """Prepare a plan, for joints of so many times the rate and acceleration that they have.

    Raises FileProblems with all that is wrong with plan, horizon mask and orbit elements together;
    a station file that cannot be read does not tell where those are, and comes first.
    """
    station = load_station(order.station)
    targets = TargetBook(station, viewpoint_of(station))
    problems: list[Problem] = []
    plan = _read(lambda: load_plan(order.plan or station.files.plan), problems)
    clearance = _read(lambda: clearance_of(station), problems)
    _read(lambda: targets.elements, problems)
    if plan is None or clearance is None or problems:
        raise FileProblems(problems)
    drafts = [
        (contact, _as_corrected(wanted, order.correction))
        for contact, wanted in (
            _draft(each, station, targets) for each in plan.contacts if order.wants(each.from_s)
        )
    ]
    mount = flown_mount_of(station).with_reserve(strength, strength)
    programme = plan_day(
        [wanted for _, wanted in drafts if isinstance(wanted, Wanted)],
        mount,
        clearance,
        beam_of(station),
        order.place or mount.stow,
        order.now_s,
        objective_of(station),
    )
    return Briefing(station, tuple(_told(drafts, programme.forecasts)), programme)


def _read(load: Callable[[], Content], problems: list[Problem]) -> Content | None:
    """What a file holds; None, and its problems with those of the other files, where it is bad."""
    try:
        return load()
    except FileProblems as found:
        problems.extend(found.problems)
        return None


def _draft(
    contact: Contact, station: StationFile, targets: TargetBook
) -> tuple[Contact, Wanted | str]:
    """The contact and what it asks for, or the reason why it cannot be had."""
    try:
        target = targets.resolve(contact.target)
    except (ServiceError, SkyError) as error:
        return contact, str(error)
    age_days = _age_days(target, contact)
    if age_days is not None and age_days > station.safety.element_max_age_days:
        return contact, (
            f"expected orbit elements of at most {station.safety.element_max_age_days:g} days, "
            f"got {age_days:.1f} days"
        )
    lowest_deg = contact.wishes.minimum_elevation_deg
    return contact, Wanted(
        contact.id,
        target,
        contact.from_s,
        contact.until_s,
        contact.priority,
        -90.0 if lowest_deg is None else lowest_deg,
        MARGIN_DEG,
    )


def _as_corrected(wanted: Wanted | str, given: CorrectionInForce | None) -> Wanted | str:
    if given is None or isinstance(wanted, str) or not given.holds_for(wanted.contact):
        return wanted
    return corrected(wanted, given.correction)


def _told(
    drafts: Iterable[tuple[Contact, Wanted | str]], forecasts: Iterable[Forecast]
) -> Iterable[ContactBriefing]:
    remaining = iter(forecasts)
    for contact, wanted in drafts:
        if isinstance(wanted, str):
            yield ContactBriefing(contact, None, wanted)
        else:
            yield ContactBriefing(contact, next(remaining), None, _age_days(wanted.target, contact))


def _age_days(target: Target, contact: Contact) -> float | None:
    """Largest distance in time between the contact and the epoch of the target's elements."""
    if isinstance(target, Corrected):
        target = target.target
    if not isinstance(target, Satellite):
        return None
    elements = target.element_set
    return max(abs(elements.age_days(utc_s)) for utc_s in (contact.from_s, contact.until_s))
