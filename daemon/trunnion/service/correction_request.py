"""A correction as the control socket carries it: from the request, and in words and plain data."""

from collections.abc import Mapping
from dataclasses import asdict

from trunnion.service.control.protocol import BadArguments
from trunnion.service.standing_correction import CorrectionInForce
from trunnion.track.correction import Correction

_VALUES = ("time_bias_s", "azimuth_deg", "elevation_deg", "along_deg", "across_deg")
_UNITS = {
    "time_bias_s": ("time", "s"),
    "azimuth_deg": ("azimuth", "°"),
    "elevation_deg": ("elevation", "°"),
    "along_deg": ("along the track", "°"),
    "across_deg": ("across it", "°"),
}


def clears(arguments: Mapping[str, object]) -> bool:
    """Whether the request asks for no correction any more; raises BadArguments."""
    if unknown := arguments.keys() - {*_VALUES, "keep", "clear"}:
        raise BadArguments(f"expected no other arguments, got {sorted(unknown)}")
    is_clearing = _flag(arguments, "clear")
    if is_clearing and len(arguments) > 1:
        raise BadArguments("expected clear alone, got other arguments beside it")
    return is_clearing


def correction_in(arguments: Mapping[str, object]) -> Correction:
    """The correction that a request asks for; raises BadArguments."""
    values = {key: _number(key, arguments[key]) for key in _VALUES if key in arguments}
    try:
        correction = Correction(**values)
    except ValueError as error:
        raise BadArguments(str(error)) from None
    if correction.is_none:
        raise BadArguments("expected something to correct, got nothing; clear takes one back")
    return correction


def is_kept_in(arguments: Mapping[str, object]) -> bool:
    """Whether it outlasts the contact; raises BadArguments."""
    return _flag(arguments, "keep")


def plain_correction(given: CorrectionInForce | None) -> dict[str, object] | None:
    """A correction as JSON holds it; `contact` is null where it is kept for all."""
    return None if given is None else {**asdict(given.correction), "contact": given.contact}


def told(given: CorrectionInForce) -> str:
    """A correction in words, with the contact that it is for."""
    values = asdict(given.correction)
    parts = [
        f"{name} {values[key]:+g} {unit}" for key, (name, unit) in _UNITS.items() if values[key]
    ]
    for_whom = "until cleared" if given.contact is None else f"for contact {given.contact}"
    return f"{', '.join(parts)} {for_whom}".replace(" °", "°")


def _number(key: str, value: object) -> float:
    if isinstance(value, bool) or not isinstance(value, int | float):
        raise BadArguments(f"expected {key} to be a number, got {value!r}")
    return float(value)


def _flag(arguments: Mapping[str, object], key: str) -> bool:
    value = arguments.get(key, False)
    if not isinstance(value, bool):
        raise BadArguments(f"expected {key} to be true or false, got {value!r}")
    return value
