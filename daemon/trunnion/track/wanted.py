"""What the plan asks for: a target for a stretch of time."""

from dataclasses import dataclass

from trunnion.sky.look import Target


@dataclass(frozen=True, slots=True, eq=False)
class Wanted:
    """One contact as it is wished: who, from when until when (UTC, POSIX seconds), how badly.

    `minimum_elevation_deg` asks for the target only while it is at least this high, and
    `margin_deg` only while it is that far from floor, horizon mask and keep-outs: a mount that
    waits at the very limit has no room for its own last wobble.
    """

    contact: str
    target: Target
    from_s: float
    until_s: float
    priority: int
    minimum_elevation_deg: float = -90.0
    margin_deg: float = 0.0
