"""An invented ephemeris: a circular orbit in the standard's words, nodes a minute apart."""

from math import cos, pi, radians, sin, sqrt

MU = 398_600.4418
RADIUS_KM = 6878.137
INCLINATION = radians(97.4)
RATE = sqrt(MU / RADIUS_KM**3)
BEGIN = "2026-03-01T12:00:00.000"
NODES = 9
"""The first node is at BEGIN, the last eight minutes later."""


def on_circle(seconds: float) -> tuple[tuple[float, ...], tuple[float, ...]]:
    """Position (km) and velocity (km/s) this long after the begin."""
    u, speed = RATE * seconds, RATE * RADIUS_KM
    ci, si = cos(INCLINATION), sin(INCLINATION)
    position = (RADIUS_KM * cos(u), RADIUS_KM * sin(u) * ci, RADIUS_KM * sin(u) * si)
    return position, (-speed * sin(u), speed * cos(u) * ci, speed * cos(u) * si)


def epoch(minute: int) -> str:
    return f"2026-03-01T12:{minute:02d}:00.000"


def state_line(minute: int) -> str:
    position, velocity = on_circle(60.0 * minute)
    return " ".join(
        (epoch(minute), *(f"{x:.6f}" for x in position), *(f"{v:.9f}" for v in velocity))
    )


HEADER = "CCSDS_OEM_VERS = 3.0\nCREATION_DATE = 2026-03-01T00:00:00\nORIGINATOR = EXAMPLE\n"
METADATA = {
    "OBJECT_NAME": "TESTSAT",
    "OBJECT_ID": "2026-999A",
    "CENTER_NAME": "EARTH",
    "REF_FRAME": "GCRF",
    "TIME_SYSTEM": "UTC",
    "START_TIME": epoch(0),
    "STOP_TIME": epoch(NODES - 1),
    "INTERPOLATION": "LAGRANGE",
    "INTERPOLATION_DEGREE": "7",
}


def kvn(minutes: range = range(NODES), **changes: str) -> str:
    """The message; a change to an empty text leaves a keyword out."""
    return HEADER + segment(minutes, **changes)


def segment(minutes: range = range(NODES), **changes: str) -> str:
    metadata = {**METADATA, **changes}
    lines = [f"{key} = {value}" for key, value in metadata.items() if value]
    return "\n".join(["META_START", *lines, "META_STOP", *map(state_line, minutes), ""])


def xml(**changes: str) -> str:
    metadata = {**METADATA, **changes}
    lines = "".join(f"<{key}>{value}</{key}>" for key, value in metadata.items() if value)
    return (
        '<?xml version="1.0" encoding="UTF-8"?>\n<oem id="CCSDS_OEM_VERS" version="3.0">'
        "<header><COMMENT>invented</COMMENT><CREATION_DATE>2026-03-01T00:00:00</CREATION_DATE>"
        f"<ORIGINATOR>EXAMPLE</ORIGINATOR></header><body><segment><metadata>{lines}</metadata>"
        f"<data>{''.join(map(state_xml, range(NODES)))}</data></segment></body></oem>"
    )


def state_xml(minute: int) -> str:
    position, velocity = on_circle(60.0 * minute)
    names = [("X", "km"), ("Y", "km"), ("Z", "km")]
    names += [(f"{axis}_DOT", "km/s") for axis in "XYZ"]
    values = [f"{x:.6f}" for x in position] + [f"{v:.9f}" for v in velocity]
    body = "".join(
        f'<{name} units="{unit}">{value}</{name}>'
        for (name, unit), value in zip(names, values, strict=True)
    )
    return f"<stateVector><EPOCH>{epoch(minute)}</EPOCH>{body}</stateVector>"


PERIOD_S = 2.0 * pi / RATE
