"""A contact to put on record: crooked numbers, nothing zero, nothing symmetric."""

from trunnion.mount.joints import Motion, Reading
from trunnion.service.records.values import ContactStart, Sample
from trunnion.sky.look import Look

UTC_S = 1_893_456_123.75


def start(contact: str = "A-17", utc_s: float = UTC_S) -> ContactStart:
    return ContactStart(utc_s, contact, "LANTERN-G", utc_s + 2.5, utc_s + 611.25)


def sample(turn: int = 0, utc_s: float = UTC_S) -> Sample:
    mono_s = 41.5 + 0.125 * turn
    return Sample(
        utc_s=utc_s + 0.125 * turn,
        mono_s=mono_s,
        phase="tracking",
        look=Look(211.7, 33.1, 1234.5, 0.31, 0.17, -5.9),
        error_deg=0.021,
        demand=Motion(-148.3, 33.2, 0.32, 0.18),
        order=Motion(-148.4, 33.15, 0.3, 0.16),
        reading=Reading(mono_s - 0.0625, -148.5, 33.05),
        rules=("rate",),
    )
