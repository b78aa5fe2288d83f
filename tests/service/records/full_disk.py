"""A process whose files may not grow: what a full disk looks like from inside, without one."""

import resource
import sys
from pathlib import Path

from tests.service.records.story import UTC_S, sample, start
from trunnion.service.clock import VirtualClock
from trunnion.service.records.values import EventKind, Outcome
from trunnion.service.records.writer import RecordWriter

FULL_AT_BYTES = 400_000


def main(path: Path) -> None:
    """Write until nothing goes any more, make room, end the contact; tell what happened."""
    writer = RecordWriter(path, VirtualClock(UTC_S))
    writer.begin_contact(start())
    writer.flush()
    unlimited = resource.getrlimit(resource.RLIMIT_FSIZE)
    resource.setrlimit(resource.RLIMIT_FSIZE, (FULL_AT_BYTES, unlimited[1]))
    for batch in range(20):
        for turn in range(1000):
            writer.sample(sample(1000 * batch + turn))
        writer.flush()
    print(writer.trouble)
    writer.event(UTC_S + 5.5, EventKind.TROUBLE, "while the disk was full")
    writer.flush()
    resource.setrlimit(resource.RLIMIT_FSIZE, unlimited)
    writer.end_contact(UTC_S + 611.5, Outcome.DONE, {"rms_error_deg": 0.07})
    writer.flush()
    print(writer.trouble)
    print(writer.dropped)
    writer.close()


main(Path(sys.argv[1]))
