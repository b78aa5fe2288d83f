"""The daemon's log: one line an event, `key=value`, quiet unless something happens."""

import logging
import os
import sys
from collections.abc import Mapping
from typing import Any, TextIO

from trunnion.service.brevity import Brevity
from trunnion.sky.instants import format_utc

_SYSLOG_PRIORITY = (
    (logging.CRITICAL, 2),
    (logging.ERROR, 3),
    (logging.WARNING, 4),
    (logging.INFO, 6),
)  # RFC 5424, table 2
_DEBUG_PRIORITY = 7
_ROOT = "trunnion"


def configure(stream: TextIO = sys.stderr, level: int = logging.INFO) -> None:
    """Send what the daemon's rooms log to this stream, in the form its reader wants."""
    handler = logging.StreamHandler(stream)
    handler.setFormatter(LineFormatter(is_for_journal=leads_to_journal(stream)))
    handler.addFilter(Brevity())
    logger = logging.getLogger(_ROOT)
    logger.handlers[:] = [handler]
    logger.setLevel(level)
    logger.propagate = False


def fields(**values: object) -> dict[str, Any]:
    """Values to log beside a message: `log.info("begins", extra=fields(contact="A-17"))`."""
    return {"fields": values}


def leads_to_journal(stream: TextIO, environment: Mapping[str, str] = os.environ) -> bool:
    """Whether this stream is the one systemd connected to its journal (systemd.exec(5))."""
    try:
        status = os.fstat(stream.fileno())
    except (OSError, ValueError):
        return False
    return environment.get("JOURNAL_STREAM") == f"{status.st_dev}:{status.st_ino}"


class LineFormatter(logging.Formatter):
    """`time=… level=… from=… say="…" key=value`; for the journal a priority instead of the time."""

    def __init__(self, *, is_for_journal: bool) -> None:
        super().__init__()
        self._is_for_journal = is_for_journal

    def format(self, record: logging.LogRecord) -> str:
        """One line, whatever the message holds."""
        said: dict[str, object] = {
            "level": record.levelname.lower(),
            "from": record.name.removeprefix(_ROOT + "."),
            "say": record.getMessage(),
            **getattr(record, "fields", {}),
        }
        if record.exc_info:
            said["trace"] = self.formatException(record.exc_info)
        line = " ".join(f"{key}={_quoted(str(value))}" for key, value in said.items())
        return self._prefix(record) + line

    def _prefix(self, record: logging.LogRecord) -> str:
        if self._is_for_journal:
            return f"<{_priority(record.levelno)}>"
        return f"time={format_utc(record.created)} "


def _priority(level: int) -> int:
    return next((number for least, number in _SYSLOG_PRIORITY if level >= least), _DEBUG_PRIORITY)


def _quoted(text: str) -> str:
    escaped = text.replace("\\", "\\\\").replace('"', '\\"').replace("\n", "\\n")
    printable = "".join(each if each.isprintable() else "\ufffd" for each in escaped)
    is_plain = printable and not any(each in printable for each in ' "=\\')
    return printable if is_plain else f'"{printable}"'
