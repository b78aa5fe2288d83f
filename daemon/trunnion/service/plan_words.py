"""What the planned paths are like, in words: which turn and solution, what a faster mount gains."""

from collections.abc import Iterator, Mapping

from trunnion.mount.joints import Joints
from trunnion.mount.mount import JointLimits
from trunnion.service.antenna import mount_of
from trunnion.service.briefing import Briefing, ContactBriefing
from trunnion.track.programme import Forecast

FASTER = 2.0
"""The mount that a contact is compared with has this many times the rate and acceleration."""

TOLD_S = 1.0
TOLD_DEG = 0.01
"""A smaller gain, of time outside the beam or of error, is not worth a sentence."""


def plan_words(briefing: Briefing, faster: Briefing | None = None) -> Mapping[str, tuple[str, ...]]:
    """Sentences about each contact that will be flown, by its id.

    `faster` is the same plan with a mount that is `FASTER` times as fast, where it was made.
    """
    gains = {each.contact.id: each for each in faster.contacts} if faster else {}
    return {
        each.contact.id: (*_way(each, briefing), *_gain(each, gains.get(each.contact.id)))
        for each in briefing.contacts
    }


def is_worth_comparing(briefing: Briefing) -> bool:
    """Whether any contact is flown worse than the target could be seen."""
    tolerance_deg = briefing.station.antenna.pointing_tolerance_deg
    return any(
        each.forecast is not None
        and (
            each.forecast.outside_beam_s >= TOLD_S or each.forecast.worst_error_deg > tolerance_deg
        )
        for each in briefing.contacts
    )


def _way(each: ContactBriefing, briefing: Briefing) -> Iterator[str]:
    """Where the first joint begins, where else it could, and whether the antenna is tipped over."""
    mount = mount_of(briefing.station)
    begins = [
        assignment.path.at(assignment.begin_s).joints
        for assignment in briefing.assignments
        if assignment.contact == each.contact.id
    ]
    for begin in begins:
        others = _other_turns(begin, mount.first)
        is_tipped = not -90.0 <= begin.second_deg <= 90.0
        if others or is_tipped:
            over = ", with the antenna over the top" if is_tipped else ""
            could = f", where {' and '.join(others)} would point alike" if others else ""
            yield f"the first joint begins at {begin.first_deg:.0f}°{could}{over}"


def _other_turns(begin: Joints, limits: JointLimits) -> list[str]:
    """The angles of the first joint, whole turns away and within what plans use."""
    angles = (begin.first_deg + 360.0 * turns for turns in range(-6, 7) if turns)
    return [
        f"{angle_deg:.0f}°"
        for angle_deg in angles
        if limits.soft_lower_deg <= angle_deg <= limits.soft_upper_deg
    ]


def _gain(each: ContactBriefing, faster: ContactBriefing | None) -> Iterator[str]:
    now, then = each.forecast, faster.forecast if faster else None
    if now is None or then is None or now.begin_s is None or then.begin_s is None:
        return
    gains = list(_gains(now, then))
    if gains:
        yield f"joints {FASTER:g} times as fast: {', '.join(gains)}"


def _gains(now: Forecast, then: Forecast) -> Iterator[str]:
    """What becomes better, each with both numbers."""
    if then.outside_beam_s <= now.outside_beam_s - TOLD_S:
        yield f"{then.outside_beam_s:.0f} s outside the beam instead of {now.outside_beam_s:.0f} s"
    if then.worst_error_deg < now.worst_error_deg - TOLD_DEG:
        yield (
            f"error up to {then.worst_error_deg:.2f}° ({then.worst_loss_db:.1f} dB) instead of "
            f"{now.worst_error_deg:.2f}° ({now.worst_loss_db:.1f} dB)"
        )
