"""Whether each joint turns the way and as far as it is told, by somebody's own eyes."""

from collections.abc import Iterator

from trunnion_drivers.commission.bay import JOINT_NAMES, Bay
from trunnion_drivers.commission.finding import Finding, bad, good
from trunnion_drivers.commission.samples import moved_deg, step_deg

_TURN_DEG = 2.0
_ORDER_SLACK = 0.25
_SCALE_SLACK = 0.02
_POSITIVE = ("clockwise, seen from above", "upwards")


def sense_and_scale(bay: Bay) -> Iterator[Finding]:
    """Creep a little with each joint, and ask how far it really went."""
    for number, name in enumerate(JOINT_NAMES):
        here = bay.mover.place()
        by_deg = bay.room_deg(number, here[number], _TURN_DEG)
        way = _POSITIVE[number]
        if not bay.operator.agrees(f"The {name} joint shall creep by {by_deg:+g}°; + is {way}."):
            yield bad(f"{name} joint: sense and scale were passed over")
            continue
        samples = bay.mover.creep(here.by(number, by_deg), number)
        seen_deg = bay.operator.number(f"By how many degrees has it really turned? + is {way}.")
        yield from order_against_reading(name, by_deg, moved_deg(samples))
        yield reading_against_eyes(name, moved_deg(samples), seen_deg)
        step = step_deg(samples)
        if step is not None:
            yield good(f"{name} joint: readings differ by {step:.4f}° at least")
        bay.mover.creep(here, number)


def order_against_reading(name: str, ordered_deg: float, read_deg: float) -> Iterator[Finding]:
    """Nothing where both belong together."""
    if abs(read_deg - ordered_deg) > _ORDER_SLACK * abs(ordered_deg):
        text = f"{name} joint: ordered {ordered_deg:+.3f}°, and read {read_deg:+.3f}°"
        yield bad(f"{text}: order and reading do not belong together")


def reading_against_eyes(name: str, read_deg: float, seen_deg: float | None) -> Finding:
    """Right, or wrong in sense, or wrong in scale, and then what to change."""
    if seen_deg is None:
        return bad(f"{name} joint: nobody has looked where it went")
    text = f"{name} joint: read {read_deg:+.3f}°, and it went {seen_deg:+.3f}°"
    if seen_deg * read_deg <= 0.0:
        return bad(f"{text}: wrong sense", f"{name}.reversed", "the other value")
    share = read_deg / seen_deg
    if abs(share - 1.0) > _SCALE_SLACK:
        return bad(f"{text}: wrong scale", f"{name}.units_per_deg", f"{share:.4g} times what it is")
    return good(f"{name} joint: it goes the right way and as far as it is read")
