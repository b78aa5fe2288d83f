"""See that the tests of the gate's room go through every branch of it.

python -m tests.safety.branches

Prints what is missed, and exits with 1 where anything is.
"""

import sys
from pathlib import Path

import pytest
from coverage import Coverage

TESTS = Path(__file__).parent
ROOM = TESTS.parents[1] / "daemon" / "trunnion" / "safety"


def main() -> int:
    """Run the tests under coverage; 0 when all pass and nothing is missed."""
    measured = Coverage(branch=True, source=[str(ROOM)], data_file=None)
    with measured.collect():
        outcome = pytest.main(["-q", "-p", "no:cacheprovider", str(TESTS)])
    share = measured.report(show_missing=True, skip_covered=True)
    return int(outcome != pytest.ExitCode.OK or share < 100.0)


if __name__ == "__main__":
    sys.exit(main())
