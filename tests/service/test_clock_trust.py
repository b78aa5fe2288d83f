"""How far the clock may be wrong, from the kernel's values and from the kernel."""

import ctypes
import sys
from math import inf

import pytest

from trunnion.service.clock_trust import admitted_error_s, clock_error_s

UNSYNCHRONISED, CLOCK_FAILED = 0x0040, 0x1000
"""STA_UNSYNC and STA_CLOCKERR of linux/timex.h."""


@pytest.mark.parametrize(
    ("maxerror_us", "status", "error_s"),
    [
        (37_250, 0x0001, 0.03725),
        (37_250, UNSYNCHRONISED, 0.03725),
        (15_999_999, 0, 15.999999),
        (16_000_000, UNSYNCHRONISED, inf),
        (37_250, CLOCK_FAILED, inf),
    ],
)
def test_the_bound_counts_and_not_the_flag(maxerror_us: int, status: int, error_s: float) -> None:
    assert admitted_error_s(maxerror_us, status) == pytest.approx(error_s)


@pytest.mark.skipif(sys.platform != "linux", reason="adjtimex is a call of Linux")
def test_the_kernel_says_the_same_by_another_way() -> None:
    """The C library's `ntp_adjtime` on plain memory: maxerror is the fourth word (x86-64)."""
    words = (ctypes.c_long * 40)()
    assert ctypes.CDLL(None).ntp_adjtime(ctypes.byref(words)) >= 0
    told_s, expected_s = clock_error_s(), words[3] * 1e-6
    assert told_s is not None
    assert told_s == pytest.approx(expected_s if expected_s < 16.0 else inf, abs=0.01)
