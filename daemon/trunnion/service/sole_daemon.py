"""One daemon a mount, whatever socket it listens at: who holds the lock beside the latch has it.

Two station files of one mount may name two sockets. They share the latch, or no stop would hold.
"""

import fcntl
import os
from collections.abc import Iterator
from contextlib import contextmanager
from pathlib import Path

from trunnion.service.errors import ServiceError


class MountInUse(ServiceError):  # noqa: N818 - named for what it means
    """Another daemon has this mount, or nobody can tell."""


@contextmanager
def sole_daemon(latch: Path) -> Iterator[None]:
    """Have the mount of this latch to oneself; the kernel lifts the lock when its holder dies.

    Raises MountInUse.
    """
    path = latch.with_name(latch.name + ".lock")
    try:
        descriptor = os.open(path, os.O_RDONLY | os.O_CREAT | os.O_CLOEXEC, 0o600)
    except OSError as error:
        raise MountInUse(f"cannot keep an emergency stop: {path}: {error.strerror}") from error
    with os.fdopen(descriptor):
        try:
            fcntl.flock(descriptor, fcntl.LOCK_EX | fcntl.LOCK_NB)
        except BlockingIOError:
            raise MountInUse(f"another daemon has this mount: it holds {path}") from None
        yield
