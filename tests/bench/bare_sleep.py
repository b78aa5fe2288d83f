"""A bare loop that sleeps to absolute deadlines: the baseline for the control turn's lateness."""

import sys
import time


def main(start_s: float, period_s: float, count: int) -> None:
    """Print how late each wake-up was (s)."""
    late_s = []
    for number in range(count):
        due_s = start_s + number * period_s
        time.sleep(max(0.0, due_s - time.monotonic()))
        late_s.append(time.monotonic() - due_s)
    print(*late_s)


if __name__ == "__main__":
    main(float(sys.argv[1]), float(sys.argv[2]), int(sys.argv[3]))
