"""What the faults of a scenario excuse: steel that obeys nobody cannot be held to the limits."""

from trunnion.service.torture.mishap import MishapKind as Kind
from trunnion.service.torture.scenario import Scenario

ENCODER_ERROR_DEG = 0.05
BENT_S = 3.0
"""A bent antenna is brought back within its limits so long after, where it can be."""

RUNNING = frozenset({Kind.REVERSED, Kind.RUNNING_AWAY, Kind.UNSTOPPABLE})
"""Steel that moves otherwise than it is told, whatever it is told."""

UNRULY = RUNNING | {Kind.SLIPPING}
"""The same, and steel that does not rest when told to."""

BLINDING = frozenset({Kind.CABLE_PULLED, Kind.SILENT, Kind.GARBLED, Kind.DEAD})
"""While one of these lasts nobody knows where the mount is."""

DEAFENING = frozenset({Kind.CABLE_PULLED, Kind.SILENT, Kind.DEAF, Kind.SLOW_CALLS, Kind.DEATH})
"""While one of these lasts not even a halt gets through; the mount's own watchdog ends motion."""

HINDERING = DEAFENING | {Kind.TORN_LATCH, Kind.STALL, Kind.SLIPPING}
"""While one of these lasts, and a time after it, the motors may have power all the same, or the
antenna moves without."""

STOWING = frozenset({Kind.WIND, Kind.WIND_UNKNOWN, Kind.HEARTBEAT_LOST})

HARMLESS = frozenset(
    {
        Kind.CABLE_PULLED,
        Kind.SILENT,
        Kind.GARBLED,
        Kind.DEAD,
        Kind.OLD_READINGS,
        Kind.SLOW_CALLS,
        Kind.FAULT_REPORTED,
        Kind.CLOCK_STEP,
        Kind.CLOCK_UNTRUSTED,
        Kind.STALL,
        Kind.DEATH,
        Kind.DISK_FULL,
        Kind.NEW_PLAN,
        Kind.RECOVER,
        Kind.SUN_UNKNOWN,
        *STOWING,
    }
)
"""What may cost time, and never more: nothing has to be reset afterwards."""


def excused_deg(scenario: Scenario, since_s: float) -> float:
    """How far (deg) the true joints may be from what the readings allow."""
    offsets_deg = [
        abs(each.amount)
        for each in scenario.mishaps
        if each.kind is Kind.OFFSET and each.at_s <= since_s
    ]
    return ENCODER_ERROR_DEG + sum(offsets_deg) + bent_deg(scenario, since_s)


def bent_deg(scenario: Scenario, since_s: float, grace_s: float = BENT_S) -> float:
    """How far the wind bends the antenna, at most, or has within the last `grace_s` seconds."""
    return max(
        (
            abs(each.amount)
            for each in scenario.mishaps
            if each.kind is Kind.WIND_PUSH and each.is_on(since_s, grace_s)
        ),
        default=0.0,
    )


def is_unruly(scenario: Scenario, since_s: float) -> bool:
    """Whether any steel has begun to disobey."""
    return any(each.kind in UNRULY and each.at_s <= since_s for each in scenario.mishaps)


def has_only(scenario: Scenario, kinds: frozenset[Kind]) -> bool:
    """Whether nothing else than these goes wrong."""
    return all(each.kind in kinds for each in scenario.mishaps)


def is_any_on(
    scenario: Scenario, kinds: frozenset[Kind], since_s: float, grace_s: float = 0.0
) -> bool:
    """Whether any of these is going on, or has been within the last `grace_s` seconds."""
    return any(each.kind in kinds and each.is_on(since_s, grace_s) for each in scenario.mishaps)


def lasts_since(scenario: Scenario, kinds: frozenset[Kind], since_s: float) -> float:
    """For how long (s) one of these has been going on without a break; 0 for none."""
    return max(
        (
            since_s - each.at_s
            for each in scenario.mishaps
            if each.kind in kinds and each.is_on(since_s)
        ),
        default=0.0,
    )
