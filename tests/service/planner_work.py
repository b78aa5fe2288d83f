"""Work for the planner's child: it must be importable there."""

import os
import time
from pathlib import Path


def double(order: float) -> float:
    return 2.0 * order


def refuse(order: float) -> float:
    raise ValueError(f"expected less than {order}")


def die(order: float) -> float:
    os._exit(3)


def dawdle(order: float) -> float:
    time.sleep(order)
    return order


def sign_and_dawdle(order: str) -> None:
    """Leave the child's number in a file, and take long."""
    Path(order).write_text(str(os.getpid()))
    time.sleep(300.0)
