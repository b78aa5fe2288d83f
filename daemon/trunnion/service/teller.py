"""Tells what happened outside the turns: to the log and to the records, from any thread."""

import logging

from trunnion.service.clock import Clock
from trunnion.service.records.values import EventKind
from trunnion.service.records.writer import RecordWriter

_log = logging.getLogger(__name__)


class Teller:
    """One sentence, told twice; no method blocks or raises."""

    def __init__(self, records: RecordWriter, clock: Clock) -> None:
        self._records = records
        self._clock = clock

    def record(self, kind: EventKind, sentence: str) -> None:
        """For the records alone."""
        self._records.event(self._clock.utc_s(), kind, sentence)

    def state(self, sentence: str) -> None:
        """Something has changed, as it should."""
        _log.info("%s", sentence)
        self.record(EventKind.STATE, sentence)

    def permission(self, sentence: str) -> None:
        """The permission to transmit came or went."""
        _log.info("%s", sentence)
        self.record(EventKind.TRANSMIT, sentence)

    def trouble(self, sentence: str) -> None:
        """Something is not as it should be."""
        _log.warning("%s", sentence)
        self.record(EventKind.TROUBLE, sentence)

    def stop(self, sentence: str) -> None:
        """An emergency stop came, stays, or was lifted."""
        _log.critical("%s", sentence)
        self.record(EventKind.STOP, sentence)
