"""What goes into one turn of the pilot and what comes out: two plain values."""

from collections.abc import Sequence
from typing import NamedTuple

from trunnion.mount.joints import Joints, Motion, Reading
from trunnion.pilot.phase import Phase, Wish
from trunnion.sky.look import Look
from trunnion.track.path import Assignment


class Situation(NamedTuple):
    """Everything the pilot may know in one turn.

    `utc_s` and `mono_s` are the same instant on both clocks; `ordered` is the motion that really
    went to the mount in the turn before (None when it was halted or nothing was ordered);
    `assignments` are in order of time and do not overlap; `way_back` is the place inside to which a
    mount may go that was found outside its limits, None without an operator's leave
    and while the Sun is out of the beam. `sun` is the Sun's azimuth and elevation (deg), if known.
    """

    utc_s: float
    mono_s: float
    reading: Reading | None
    ordered: Motion | None
    assignments: Sequence[Assignment]
    wish: Wish = Wish.FOLLOW_PLAN
    must_stow: bool = False
    is_stopped: bool = False
    way_back: Joints | None = None
    sun: tuple[float, float] | None = None


class Decision(NamedTuple):
    """What the pilot wants in this turn, and why.

    `demand` is where the joints should be at this very instant, None for rest without holding.
    `assignment` is the contact that is on, served or not, or else the one being prepared; `look`
    where its target stands now and `error_deg` the angle on the sky between it and the boresight,
    both None outside a contact.
    `departure_s` is the UTC second at which the mount leaves for the next contact, where known.
    """

    phase: Phase
    demand: Motion | None
    assignment: Assignment | None = None
    look: Look | None = None
    error_deg: float | None = None
    departure_s: float | None = None
    trouble: str | None = None
