"""What has to be so before a mount may be commissioned: nobody else has it, and no stop holds."""

from collections.abc import Iterator
from contextlib import contextmanager
from pathlib import Path

from trunnion.service.commands import StopInForce
from trunnion.service.latch import EmergencyLatch
from trunnion.service.sole_daemon import sole_daemon


@contextmanager
def free_to_commission(latch: Path) -> Iterator[None]:
    """Keep daemons away from the mount of this latch; raises MountInUse or StopInForce."""
    with sole_daemon(latch):
        stop = EmergencyLatch(latch).read()
        if stop is not None:
            raise StopInForce(
                f"an emergency stop is in force ({stop.cause}): reset it with the daemon first"
            )
        yield
