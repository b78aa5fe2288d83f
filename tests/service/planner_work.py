"""Work for the planner's child: it must be importable there."""

import os
import time


def double(order: float) -> float:
    return 2.0 * order


def refuse(order: float) -> float:
    raise ValueError(f"expected less than {order}")


def die(order: float) -> float:
    os._exit(3)


def dawdle(order: float) -> float:
    time.sleep(order)
    return order
