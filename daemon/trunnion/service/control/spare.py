"""A file descriptor kept for the moment when the process has no other left."""

import os
from contextlib import suppress


class SpareDescriptor:
    """Held until given away; taken again when one is free."""

    def __init__(self) -> None:
        self._descriptor: int | None = None
        self.take()

    def take(self) -> None:
        """Hold one, where there is one."""
        if self._descriptor is None:
            with suppress(OSError):
                self._descriptor = os.open(os.devnull, os.O_RDONLY | os.O_CLOEXEC)

    def give(self) -> bool:
        """Let go of it, for the next call that needs one; whether there was one."""
        if self._descriptor is None:
            return False
        os.close(self._descriptor)
        self._descriptor = None
        return True
