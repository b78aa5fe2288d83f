"""An emergency stop as a value, and as the text that keeps it on disk."""

from hashlib import sha256
from typing import NamedTuple

FORMAT = "trunnion emergency stop 1"
"""First line of the text; another number means another program wrote it."""

_DAMAGED = "the file that keeps an emergency stop is damaged or of another version"


class EmergencyStop(NamedTuple):
    """Why the mount was stopped, and when (UTC, POSIX seconds)."""

    cause: str
    utc_s: float


def encode(stop: EmergencyStop) -> str:
    """The text for the disk; whatever the cause holds, it stays on one line."""
    body = f"{FORMAT}\n{stop.utc_s!r}\n{' '.join(stop.cause.split())}\n"
    return f"{body}{_digest(body)}\n"


def decode(text: str) -> EmergencyStop:
    """The stop that a text keeps; a text that is damaged, empty or of a later version is a stop."""
    body, _, digest = text.removesuffix("\n").rpartition("\n")
    lines = body.split("\n")
    if digest != _digest(f"{body}\n") or len(lines) != 3 or lines[0] != FORMAT:
        return EmergencyStop(_DAMAGED, 0.0)
    try:
        return EmergencyStop(lines[2], float(lines[1]))
    except ValueError:
        return EmergencyStop(_DAMAGED, 0.0)


def _digest(body: str) -> str:
    return sha256(body.encode("utf-8", errors="replace")).hexdigest()
