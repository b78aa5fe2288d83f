"""Keeps one kind of message from filling the log: a flood of requests must not fill a disk."""

import logging
from dataclasses import dataclass

BURST = 100
"""So many messages of one kind are logged at once,"""
REFILL_PER_S = 1.0
"""and then so many a second."""
_MOST_KINDS = 500

_Kind = tuple[str, object]


@dataclass(slots=True)
class _Allowance:
    left: float
    at_s: float
    withheld: int = 0


class Brevity(logging.Filter):
    """Lets through so much of each kind of message; what is critical always passes.

    Messages are of one kind when one line of the program wrote them, whatever they are about.
    """

    def __init__(self) -> None:
        super().__init__()
        self._allowances: dict[_Kind, _Allowance] = {}

    def filter(self, record: logging.LogRecord) -> bool:
        """Whether to log this one; it is told how many before it were not."""
        if record.levelno >= logging.CRITICAL:
            return True
        allowance = self._allowance(record)
        if allowance.left < 1.0:
            allowance.withheld += 1
            return False
        allowance.left -= 1.0
        if allowance.withheld:
            record.msg = f"{record.msg} (and {allowance.withheld} like it before)"
            allowance.withheld = 0
        return True

    def _allowance(self, record: logging.LogRecord) -> _Allowance:
        kind = (record.name, record.lineno)
        if len(self._allowances) >= _MOST_KINDS and kind not in self._allowances:
            self._allowances.clear()
        allowance = self._allowances.setdefault(kind, _Allowance(BURST, record.created))
        passed_s = max(0.0, record.created - allowance.at_s)
        allowance.left = min(BURST, allowance.left + REFILL_PER_S * passed_s)
        allowance.at_s = record.created
        return allowance
