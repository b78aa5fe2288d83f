"""How a target is written: what can be told from the text alone."""

from math import isfinite

SUN = "sun"
_FIXED = "fixed:"


def fixed_direction(text: str) -> tuple[float, float] | None:
    """Return azimuth and elevation (deg) of a text like `fixed:143.5,27`, or None for another text.

    Raises ValueError for a fixed direction that is none.
    """
    if not text.casefold().startswith(_FIXED):
        return None
    parts = text[len(_FIXED) :].split(",")
    try:
        azimuth_deg, elevation_deg = (float(part) for part in parts)
    except ValueError:
        raise _not_a_direction(text) from None
    if not (isfinite(azimuth_deg) and abs(azimuth_deg) <= 360 and abs(elevation_deg) <= 90):
        raise _not_a_direction(text)
    return azimuth_deg, elevation_deg


def is_sun(text: str) -> bool:
    """Whether the text names the Sun."""
    return text.casefold() == SUN


def is_builtin(text: str) -> bool:
    """Whether the text means a target by itself, without anybody having named one."""
    return is_sun(text) or text.casefold().startswith(_FIXED)


def checked_target(text: str) -> str:
    """Return the text as it is; raises ValueError where the text alone shows that it cannot be."""
    fixed_direction(text)
    return text


def _not_a_direction(text: str) -> ValueError:
    return ValueError(
        "expected fixed:AZIMUTH,ELEVATION in degrees, as in fixed:143.5,27, "
        f"with an elevation of -90 to 90, got {text[:60]!r}"
    )
