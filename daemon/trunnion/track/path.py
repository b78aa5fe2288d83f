"""A path for the joints: where they should be at every instant of a contact."""

from dataclasses import dataclass
from typing import Protocol

from trunnion.mount.joints import Motion
from trunnion.sky.look import Look, Target


class Path(Protocol):
    """Joint angles as a function of time; picklable, since paths are planned in a child process."""

    def at(self, utc_s: float) -> Motion:
        """Joint angles and rates at this instant; raises NoPosition where the target has none."""
        ...

    def look(self, utc_s: float) -> Look:
        """Where the target itself stands at this instant: what the path tries to meet."""
        ...


@dataclass(frozen=True, slots=True, eq=False)
class Assignment:
    """One stretch of time in which one contact has the mount.

    Assignments of a programme are in order of time and do not overlap; a contact that gave way to a
    more wanted one may hold two. `begin_s` and `end_s` are UTC as POSIX seconds.
    """

    contact: str
    target: Target
    begin_s: float
    end_s: float
    path: Path
    priority: int
