"""What may be wrong with look angles, in words for the operator."""

from collections.abc import Mapping, Sequence

from trunnion.sky.look import Target
from trunnion.sky.trust import doubts, expected_error_deg
from trunnion.sky.viewpoint import Viewpoint


def models_in_use(viewpoint: Viewpoint) -> Mapping[str, object]:
    """The models behind the numbers: refraction, Earth orientation, light time."""
    return {
        "refraction": viewpoint.refraction.model,
        "earth_orientation": viewpoint.earth.source,
        "light_time_and_aberration": viewpoint.is_apparent,
    }


def doubts_of(target: Target, instants: Sequence[float]) -> Mapping[str, object]:
    """The expected error (deg) at the worst of the instants, and its parts."""
    found = max((doubts(target, utc_s) for utc_s in instants), key=expected_error_deg)
    return {
        "expected_error_deg": expected_error_deg(found),
        "doubts": [each._asdict() for each in found],
    }
