"""What is put on record: the beginning and the end of a contact, its samples, events."""

from collections.abc import Mapping
from enum import Enum
from typing import TYPE_CHECKING, NamedTuple

from trunnion.mount.joints import Motion, Reading

if TYPE_CHECKING:
    from trunnion.sky.look import Look  # brings numpy, which reading the records needs not


class Outcome(Enum):
    """How a contact ended, or that it has not."""

    UNDER_WAY = "under way"
    DONE = "done"
    CUT_SHORT = "cut short"
    INTERRUPTED = "interrupted"


class EventKind(Enum):
    """What an event is about."""

    STATE = "state"
    INTERVENTION = "intervention"
    STOP = "stop"
    RESET = "reset"
    REQUEST = "request"
    TROUBLE = "trouble"
    TRANSMIT = "transmit"


class ContactStart(NamedTuple):
    """A contact at the moment its record begins; planned times as the plan has them, UTC."""

    utc_s: float
    contact: str
    target: str
    planned_begin_s: float
    planned_end_s: float


class Sample(NamedTuple):
    """One control turn of a contact.

    `mono_s` is the same instant as `utc_s` on the clock of the reading; `order` None means a halt;
    `rules` are the names of the gate's rules that changed the demand.
    """

    utc_s: float
    mono_s: float
    phase: str
    look: "Look | None"
    error_deg: float | None
    demand: Motion | None
    order: Motion | None
    reading: Reading | None
    rules: tuple[str, ...] = ()


class ContactEnd(NamedTuple):
    """A contact at its end; the summary is what JSON can hold."""

    utc_s: float
    outcome: Outcome
    summary: Mapping[str, object]


class Event(NamedTuple):
    """Something worth a sentence."""

    utc_s: float
    kind: EventKind
    sentence: str


Entry = ContactStart | Sample | ContactEnd | Event
