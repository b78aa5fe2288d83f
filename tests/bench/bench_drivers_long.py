"""Half an hour of tracking on the wire: `python -m tests.bench drivers_long`, by its name only."""

import sys

from tests.bench.bench_drivers import stale_ticks
from tests.bench.row import Row
from trunnion.cli.run import SWITCH_INTERVAL_S

HALF_AN_HOUR_S = 1800.0


def rows() -> list[Row]:
    """Measure in real time, threads giving way to each other as those of `run` do."""
    sys.setswitchinterval(SWITCH_INTERVAL_S)
    return [stale_ticks(HALF_AN_HOUR_S)]
