"""How far the system's clock may be wrong, by the kernel's own account (Linux, adjtimex(2)).

The kernel keeps a bound of the clock's error, which whoever synchronises the clock lowers and which
otherwise grows by half a millisecond a second, up to 16 s. The flag "not synchronised" beside it
says less: some services that keep a good clock leave it set.
"""

import ctypes
from math import inf

_NEVER_SYNCHRONISED_S = 16.0
_CLOCK_FAILED = 0x1000  # STA_CLOCKERR of linux/timex.h
_SIZE_OF_TIMEX = 208


class _Timex(ctypes.Structure):
    """The begin of `struct timex`; the rest is room for what the kernel fills in."""

    _fields_ = (
        ("modes", ctypes.c_uint),
        ("offset", ctypes.c_long),
        ("freq", ctypes.c_long),
        ("maxerror", ctypes.c_long),
        ("esterror", ctypes.c_long),
        ("status", ctypes.c_int),
        ("_rest", ctypes.c_byte * _SIZE_OF_TIMEX),
    )


def clock_error_s() -> float | None:
    """The largest error (s) of UTC that the kernel admits; infinite where nothing bounds it.

    None where the kernel cannot be asked. Asking changes nothing and needs no privilege.
    """
    try:
        timex = _Timex(modes=0)
        answer = ctypes.CDLL(None).adjtimex(ctypes.byref(timex))
    except (AttributeError, OSError):
        return None
    return None if answer < 0 else admitted_error_s(timex.maxerror, timex.status)


def admitted_error_s(maxerror_us: int, status: int) -> float:
    """What these values of the kernel's mean; microseconds in, seconds out."""
    error_s = maxerror_us * 1e-6
    if status & _CLOCK_FAILED or error_s >= _NEVER_SYNCHRONISED_S:
        return inf
    return error_s
