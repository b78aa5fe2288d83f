"""The operator's standing wish, kept over a restart.

Whoever sent the antenna to stow to work on it must find it there after a power cut, too. A file
that cannot be understood means: hold still.
"""

from pathlib import Path

from trunnion.pilot.phase import Wish
from trunnion.service.durable_file import write_durably


class StandingWish:
    """The wish in force; assigning it keeps it on disk."""

    def __init__(self, path: Path) -> None:
        self._path = path
        self._wish = self._read()

    @property
    def wish(self) -> Wish:
        """What the operator last asked for; to follow the plan when nobody asked for anything."""
        return self._wish

    def set(self, wish: Wish) -> str | None:
        """Take up a wish at once, and keep it; what went wrong on disk, if anything did."""
        self._wish = wish
        try:
            write_durably(self._path, f"{wish.value}\n")
        except OSError as error:
            return f"{self._path}: {error.strerror}"
        return None

    def _read(self) -> Wish:
        try:
            return Wish(self._path.read_text(encoding="utf-8").strip())
        except FileNotFoundError:
            return Wish.FOLLOW_PLAN
        except (OSError, ValueError):
            return Wish.HOLD
