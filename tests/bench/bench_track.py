"""Planned paths: how well they point, how fast they are found and evaluated."""

import tracemalloc
from collections.abc import Callable, Iterator
from itertools import product
from time import perf_counter

from tests.bench.passes import (
    CLEARANCE,
    chase_errors_deg,
    fine,
    flown,
    linear_programme_deg,
    machine,
    planned_errors_deg,
)
from tests.bench.row import Row
from tests.track.skies import START_S, Overflight
from trunnion.mount.arrays import joint_errors_deg
from trunnion.mount.joints import Joints
from trunnion.mount.mount import Mount
from trunnion.track.beam import Beam
from trunnion.track.day import plan_day
from trunnion.track.objective import Objective
from trunnion.track.wanted import Wanted

NARROW = Beam(1.0, 0.1)
WIDE = Beam(20.0, 2.0)
HIGHEST_DEG = (80.0, 85.0, 88.0, 89.5, 89.9)
START = Joints(0.0, 45.0)


def rows() -> list[Row]:
    """Every figure of planning."""
    return [*_against_programme(), *_over_the_top(), *_against_chase(), *_prediction(), *_speeds()]


def _against_programme() -> Iterator[Row]:
    for rate, acceleration, limit in ((5.0, 3.0, 1.0), (10.0, 1.0, 1.02), (6.0, 0.5, 1.02)):
        mount = machine(rate, acceleration)
        for highest_deg in HIGHEST_DEG:
            target = Overflight(highest_deg)
            ours = float(planned_errors_deg(target, mount, Objective.WORST_ERROR, NARROW).max())
            theirs = linear_programme_deg(target, mount)
            # where the mount can follow both are nothing, to 1e-5°
            ratio = ours / theirs if theirs > 1e-5 else float(ours > 1e-5)
            yield Row(
                f"worst error, highest {highest_deg:g}°, {rate:g}°/s and {acceleration:g}°/s²",
                f"{ours:.4f}°",
                f"linear programme {theirs:.4f}°",
                ratio,
                limit,
                is_at_least=False,
            )


def _over_the_top() -> Iterator[Row]:
    for highest_deg in HIGHEST_DEG[2:]:
        target = Overflight(highest_deg)
        mount = machine(5.0, 3.0, upper_deg=180.0)
        ours = float(planned_errors_deg(target, mount, Objective.WORST_ERROR, NARROW).max())
        miss_deg = 90.0 - highest_deg
        figure = f"worst error over the top, highest {highest_deg:g}°"
        yield Row(figure, f"{ours:.4f}°", f"miss {miss_deg:.2f}°", ours / miss_deg, 1.05, False)


def _against_chase() -> Iterator[Row]:
    for beam, limit in ((NARROW, 1.0), (WIDE, 0.5)):
        for highest_deg in HIGHEST_DEG[1:]:
            target, mount = Overflight(highest_deg), machine(5.0, 3.0)
            ours, theirs = (
                float((errors > beam.half_width_deg).sum()) * 0.1
                for errors in (
                    planned_errors_deg(target, mount, Objective.TIME_OUTSIDE_BEAM, beam),
                    chase_errors_deg(target, mount),
                )
            )
            yield Row(
                f"time outside a beam of {beam.half_power_deg:g}°, highest {highest_deg:g}°",
                f"{ours:.1f} s",
                f"chase {theirs:.1f} s",
                ours / theirs if theirs else ours,
                limit,
                is_at_least=False,
            )


def _prediction() -> Iterator[Row]:
    for highest_deg, mount in product(HIGHEST_DEG[1:], (machine(5.0, 3.0), machine(6.0, 0.5))):
        target = Overflight(highest_deg)
        span = target.culmination_s - 290.0, target.culmination_s + 290.0
        programme = plan_day([Wanted("c", target, *span, 1)], mount, CLEARANCE, NARROW, START, 0.0)
        course = fine(target, mount)
        path = programme.assignments[0].path
        places = flown([path.at(utc_s) for utc_s in course.utc_s.tolist()], mount)
        achieved_deg = float(joint_errors_deg(*places, course.motions).max())
        predicted_deg = programme.forecasts[0].worst_error_deg
        yield Row(
            f"predicted against achieved, highest {highest_deg:g}°, {mount.first.rate_deg_s:g}°/s",
            f"{predicted_deg:.4f}°",
            f"achieved {achieved_deg:.4f}°",
            abs(predicted_deg - achieved_deg),
            0.02,
            is_at_least=False,
        )


def _speeds() -> Iterator[Row]:
    mount = machine(5.0, 3.0, upper_deg=180.0)
    one = [_wanted(0, 89.0)]
    seconds = _best(lambda: _plan(one, mount))
    yield Row("one contact planned", f"{seconds:.3f} s", "1 s", seconds, 0.25, False)
    day = [_wanted(index, 20.0 + 69.9 * (index * 0.618 % 1.0)) for index in range(40)]
    seconds = _best(lambda: _plan(day, mount), 1)
    yield Row("a day of 40 contacts planned", f"{seconds:.2f} s", "1 s", seconds, 5.0, False)
    tracemalloc.start()
    _plan(day, mount)
    peak_mib = tracemalloc.get_traced_memory()[1] / 2**20
    tracemalloc.stop()
    yield Row("memory for that day", f"{peak_mib:.0f} MiB", "1 MiB", peak_mib, 100.0, False)
    path = plan_day(one, mount, CLEARANCE, NARROW, START, START_S - 600.0).assignments[0].path
    count, at_s = 20_000, START_S + 333.3
    micros = _best(lambda: [path.at(at_s) for _ in range(count)]) / count * 1e6
    yield Row("a planned path on the tick", f"{micros:.2f} µs", "1 µs", micros, 5.0, False)


def _wanted(index: int, highest_deg: float) -> Wanted:
    culmination_s = START_S + 400.0 + 2000.0 * index
    target = Overflight(highest_deg, (37.0 * index) % 360.0, culmination_s=culmination_s)
    return Wanted(f"c{index}", target, culmination_s - 400.0, culmination_s + 400.0, 1)


def _plan(wanted: list[Wanted], mount: Mount) -> None:
    plan_day(wanted, mount, CLEARANCE, NARROW, START, START_S - 600.0)


def _best(work: Callable[[], object], times: int = 3) -> float:
    best = float("inf")
    for _ in range(times):
        begin = perf_counter()
        work()
        best = min(best, perf_counter() - begin)
    return best
