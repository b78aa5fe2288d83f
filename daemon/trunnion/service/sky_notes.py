"""What the sky does to the contacts of a plan: trust, the Sun's noise, the Earth's shadow.

Nothing here keeps a contact from being flown; an operator wants to know of it before.
"""

from collections.abc import Iterator, Mapping
from math import asin, degrees

from trunnion.files.station import StationFile
from trunnion.files.station_sky import RefractionModel
from trunnion.mount.sphere import unit_vector
from trunnion.service.antenna import mount_of
from trunnion.service.briefing import Briefing
from trunnion.service.targets import TargetBook
from trunnion.service.viewpoint import viewpoint_of
from trunnion.sky.errors import NoPosition
from trunnion.sky.events import Span, in_shadow, sun_near
from trunnion.sky.instants import format_utc
from trunnion.sky.look import Target
from trunnion.sky.sun import Sun
from trunnion.sky.trust import doubts, expected_error_deg
from trunnion.sky.viewpoint import Viewpoint

ECLIPTIC_DEG = 23.44
"""Obliquity of the ecliptic (IAU 2006, in this century)."""

SUN_RADIUS_DEG = 0.27
"""Of its disc: it makes noise from half a beam and that much off the boresight (geometry)."""


def sky_notes(briefing: Briefing) -> Mapping[str, tuple[str, ...]]:
    """Sentences about each contact that will be flown, by its id; raises FileProblems, SkyError."""
    station = briefing.station
    viewpoint = viewpoint_of(station)
    seen, straight = (TargetBook(station, each) for each in (viewpoint, viewpoint.geometric()))
    notes = {}
    for each in briefing.contacts:
        forecast = each.forecast
        if forecast is None or forecast.begin_s is None or forecast.end_s is None:
            continue
        span = Span(forecast.begin_s, forecast.end_s)
        name = each.contact.target
        notes[each.contact.id] = (
            *_trust(seen.resolve(name), span, station),
            *_sun(seen.resolve(name), span, viewpoint, station),
            *_shadow(straight.resolve(name), span, viewpoint, station),
        )
    return notes


def _trust(target: Target, span: Span, station: StationFile) -> Iterator[str]:
    """Whether the target may be further off than the antenna should point."""
    middle_s = 0.5 * (span.begin_s + span.end_s)
    found = max(
        (doubts(target, utc_s) for utc_s in (span.begin_s, middle_s, span.end_s)),
        key=expected_error_deg,
    )
    error_deg, tolerance_deg = expected_error_deg(found), station.antenna.pointing_tolerance_deg
    if error_deg > tolerance_deg:
        largest = max(found, key=lambda doubt: doubt.angle_deg)
        beam_deg = station.antenna.half_power_beamwidth_deg
        yield (
            f"the target may be {error_deg:.2f}° off, more than the tolerance of "
            f"{tolerance_deg:g}° in a beam of {beam_deg:g}°: {largest.what} ({largest.source})"
        )


def sun_over_stow(station: StationFile) -> Iterator[str]:
    """Whether the Sun's circle covers the stow position at some time of the year.

    In a year the Sun comes to every declination as far from the equator as the ecliptic is.
    """
    kept_deg = station.safety.sun_keep_out_deg
    if kept_deg is None:
        return
    mount = mount_of(station)
    azimuth_deg, elevation_deg = mount.hinges.boresight(mount.stow)
    pole = unit_vector(0.0, station.site.latitude_deg)
    stow = unit_vector(azimuth_deg, elevation_deg)
    declination_deg = degrees(asin(sum(a * b for a, b in zip(pole, stow, strict=True))))
    if abs(declination_deg) <= ECLIPTIC_DEG + kept_deg and elevation_deg >= -kept_deg:
        yield (
            f"the Sun comes within {kept_deg:g}° of the stow position at some time of the year; "
            "then the mount cannot stay there or go there: choose another stow position, "
            f"of a declination beyond {ECLIPTIC_DEG + kept_deg:.1f}°"
        )


def _sun(target: Target, span: Span, view: Viewpoint, station: StationFile) -> Iterator[str]:
    if isinstance(target, Sun):
        return
    within_deg = 0.5 * station.antenna.half_power_beamwidth_deg + SUN_RADIUS_DEG
    for each in sun_near(target, view, span.begin_s, span.end_s, within_deg):
        yield f"the Sun is within {within_deg:.1f}° of the boresight {_from_until(each)}"
    kept_deg = station.safety.sun_keep_out_deg
    if kept_deg is None:
        return
    for each in sun_near(target, view, span.begin_s, span.end_s, kept_deg):
        lost_s = each.end_s - each.begin_s
        yield (
            f"about {lost_s:.0f} s are lost to the circle of {kept_deg:g}° round the Sun, "
            f"{_from_until(each)}"
        )


def _shadow(target: Target, span: Span, view: Viewpoint, station: StationFile) -> Iterator[str]:
    """For those who look: a spacecraft in the Earth's shadow does not shine."""
    is_near = (target.look(span.begin_s).range_km or 1e9) < 1e6
    if station.sky.refraction is not RefractionModel.OPTICAL or not is_near:
        return
    try:
        found = in_shadow(target, view, span.begin_s, span.end_s)
    except NoPosition:
        return
    for each in found:
        yield f"in the Earth's shadow {_from_until(each)}"


def _from_until(span: Span) -> str:
    begin, end = (format_utc(each, 0)[11:19] for each in (span.begin_s, span.end_s))
    return f"from {begin} to {end}"
