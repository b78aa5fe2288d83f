"""The daemon's log."""

import io
import logging
import os
import sys
from pathlib import Path

import pytest
from hypothesis import given
from hypothesis import strategies as st

from trunnion.service.log import LineFormatter, configure, fields, leads_to_journal


def record(message: str, level: int = logging.WARNING, **values: object) -> logging.LogRecord:
    made = logging.makeLogRecord(
        {"name": "trunnion.service.link", "msg": message, "levelno": level, "created": 1e9 + 0.25}
    )
    made.levelname = logging.getLevelName(level)
    vars(made).update(fields(**values))
    return made


def test_a_line_has_time_level_place_sentence_and_values() -> None:
    line = LineFormatter(is_for_journal=False).format(
        record("the mount is silent", failures=3, last_error='expected "ok"')
    )
    assert line == (
        "time=2001-09-09T01:46:40.250Z level=warning from=service.link "
        'say="the mount is silent" failures=3 last_error="expected \\"ok\\""'
    )


@pytest.mark.parametrize(
    ("level", "priority"),
    [(logging.CRITICAL, 2), (logging.ERROR, 3), (logging.WARNING, 4), (logging.INFO, 6), (5, 7)],
)
def test_the_journal_gets_a_priority(level: int, priority: int) -> None:
    line = LineFormatter(is_for_journal=True).format(record("x", level))
    assert line.startswith(f"<{priority}>level=")


@given(st.text(), st.text())
def test_whatever_is_said_stays_one_printable_line(message: str, value: str) -> None:
    line = LineFormatter(is_for_journal=False).format(record(message, cause=value))
    assert line.isprintable()


def test_a_traceback_stays_one_line() -> None:
    try:
        float("expected rest")
    except ValueError:
        made = record("failed")
        made.exc_info = sys.exc_info()
    line = LineFormatter(is_for_journal=False).format(made)
    assert "\n" not in line
    assert "ValueError: could not convert" in line


def test_the_journal_is_known_by_its_device_and_inode(tmp_path: Path) -> None:
    with (tmp_path / "journal").open("w") as stream:
        status = os.fstat(stream.fileno())
        ours = {"JOURNAL_STREAM": f"{status.st_dev}:{status.st_ino}"}
        assert leads_to_journal(stream, ours)
        assert not leads_to_journal(stream, {"JOURNAL_STREAM": f"{status.st_dev}:1"})
        assert not leads_to_journal(stream, {})
    assert not leads_to_journal(io.StringIO(), ours)


def test_configuring_twice_says_everything_once() -> None:
    logger = logging.getLogger("trunnion")
    before = logger.handlers[:], logger.level, logger.propagate
    try:
        stream = io.StringIO()
        configure(io.StringIO())
        configure(stream)
        logging.getLogger("trunnion.service.test").info("once")
        logging.getLogger("trunnion.service.test").debug("never")
        assert stream.getvalue().count("say=once") == 1
        assert "never" not in stream.getvalue()
    finally:
        logger.handlers[:], logger.level, logger.propagate = before
