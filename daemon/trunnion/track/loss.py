"""What a pointing error costs in received power."""

from typing import overload

from trunnion.mount.arrays import FloatArray

MOST_LOSS_DB = 60.0
"""A target is not more lost than that."""


@overload
def loss_db(error_deg: float, half_power_deg: float) -> float: ...
@overload
def loss_db(error_deg: FloatArray, half_power_deg: float) -> FloatArray: ...
def loss_db(error_deg: float | FloatArray, half_power_deg: float) -> float | FloatArray:
    """Decibels below the beam's middle, 12 (error / half-power beamwidth)².

    The law of the main lobe in ITU Resolution 553 (WRC-15), which holds to half the beamwidth, that
    is to 3 dB; beyond, a true antenna loses more.
    """
    share = error_deg / half_power_deg
    return 12.0 * share * share
