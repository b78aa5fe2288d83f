"""The operator's standing wish, kept over a restart.

Whoever sent the antenna to stow to work on it must find it there after a power cut, too. A file
that cannot be understood means: stand still. So does a draft that was left behind, by a power cut
or on a full disk: somebody wished for something, and nobody knows what.
"""

from pathlib import Path

from trunnion.pilot.phase import Wish
from trunnion.service.durable_file import draft_of, write_durably


class StandingWish:
    """The wish in force; assigning it keeps it on disk."""

    def __init__(self, path: Path) -> None:
        self._path = path
        self._wish = self.kept
        self._trouble: str | None = None

    @property
    def wish(self) -> Wish:
        """What the operator last asked for; to follow the plan when nobody asked for anything."""
        return self._wish

    @property
    def trouble(self) -> str | None:
        """Why a restart would have another wish; None while it would not."""
        return self._trouble

    @property
    def kept(self) -> Wish:
        """What a restart would find."""
        try:
            if draft_of(self._path).exists():
                return Wish.STAND
            return Wish(self._path.read_text(encoding="utf-8").strip())
        except FileNotFoundError:
            return Wish.FOLLOW_PLAN
        except (OSError, ValueError):
            return Wish.STAND

    def set(self, wish: Wish) -> str | None:
        """Take up a wish at once, and keep it; what went wrong on disk, if anything did."""
        self._wish, self._trouble = wish, None
        try:
            write_durably(self._path, f"{wish.value}\n")
        except OSError as error:
            if (kept := self.kept) is not wish:
                cannot = f"cannot write {self._path}: {error.strerror or error}"
                self._trouble = f"a restart would {kept.value}: {cannot}"
        return self._trouble
