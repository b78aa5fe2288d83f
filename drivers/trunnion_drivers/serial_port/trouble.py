"""What is wrong with a port, in words that say what to do about it."""

import errno
import grp
import termios
from contextlib import suppress
from pathlib import Path


def in_words(url: str, error: Exception) -> str:
    """Say why this port cannot be used."""
    number = getattr(error, "errno", None)
    if isinstance(error, termios.error):
        return (
            f"{url}: expected a port with this speed, parity, data and stop bits: {error.args[1]}"
        )
    if number in (errno.EACCES, errno.EPERM):
        return f"{url}: no permission to open it{_group_to_join(url)}"
    if number in (errno.EAGAIN, errno.EBUSY):
        return f"{url}: expected a free port, and another program has it open"
    if number in (errno.ENOENT, errno.ENXIO, errno.ENODEV):
        return f"{url}: expected a serial port, and there is none; is the adapter plugged in?"
    return f"{url}: the port cannot be used: {error}"


def _group_to_join(url: str) -> str:
    with suppress(OSError, KeyError):
        group = grp.getgrgid(Path(url).stat().st_gid).gr_name
        return f"; the user who runs this must be in the group {group!r}"
    return ""
