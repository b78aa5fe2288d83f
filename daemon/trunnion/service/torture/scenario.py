"""One scenario, drawn from a seed: a station, its contacts, and what goes wrong."""

from collections.abc import Sequence
from dataclasses import dataclass, replace
from random import Random
from typing import NamedTuple

from trunnion.mount.clearance import Clearance, Sector
from trunnion.mount.hinges import Hinges
from trunnion.mount.horizon import HorizonMask
from trunnion.mount.joints import Joints
from trunnion.mount.mount import JointLimits, Mount
from trunnion.mount.sphere import separation_deg
from trunnion.service.torture.contact import Arc
from trunnion.service.torture.mishap import Mishap, MishapKind
from trunnion.track.transit import NoWay, transit, transit_time_s

START_UTC_S = 1_796_083_217.3
MARGIN_DEG = 1.0
"""Contacts keep so far from everything; who strays is somebody else."""

SHARE_OUTSIDE = 0.03
"""So many flights begin with the mount outside its travel."""

SUN_ROOM_DEG = 5.0
SHARE_IN_THE_SUN = 0.6

PAUSE_S = 12.0
LONGEST_MISHAP_S = 25.0


class Sun(NamedTuple):
    """Where the Sun stands (deg) for the short time of a flight, and how far the beam keeps off."""

    azimuth_deg: float
    elevation_deg: float
    keep_out_deg: float

    def apart_deg(self, azimuth_deg: float, elevation_deg: float) -> float:
        """How far (deg) a direction is from the Sun."""
        return separation_deg(self.azimuth_deg, self.elevation_deg, azimuth_deg, elevation_deg)


@dataclass(frozen=True, slots=True)
class Scenario:
    """Everything a flight depends on, but for the gate: the same scenario, the same flight."""

    seed: int
    mount: Mount
    clearance: Clearance
    start: Joints
    machine: dict[str, float]
    contacts: tuple[Arc, ...]
    mishaps: tuple[Mishap, ...]
    sun: Sun | None = None

    @property
    def end_s(self) -> float:
        """Seconds from the start until all is over."""
        last_s = max((arc.end_s for arc in self.contacts), default=START_UTC_S)
        return last_s - START_UTC_S + PAUSE_S

    def without(self, mishap: Mishap) -> "Scenario":
        """The same with one thing less going wrong."""
        return replace(self, mishaps=tuple(each for each in self.mishaps if each is not mishap))


def draw(seed: int) -> Scenario:
    """The scenario of this seed."""
    chance = Random(seed)  # noqa: S311 - a drawn scenario, no secret
    mount, clearance = _draw_station(chance)
    contacts = tuple(_draw_contacts(chance, mount, clearance))
    start = mount.stow if chance.random() > SHARE_OUTSIDE else _outside(chance, mount)
    machine, sun = _draw_machine(chance, seed), _draw_sun(seed, mount, contacts)
    scenario = Scenario(seed, mount, clearance, start, machine, contacts, (), sun)
    count = chance.choice((0, 1, 1, 2, 2, 3, 5))
    mishaps = [_draw_mishap(chance, scenario.end_s) for _ in range(count)]
    if start != mount.stow:
        mishaps.append(Mishap(MishapKind.RECOVER, chance.uniform(2.0, 30.0), 0.0, 1.0, 0))
    return replace(scenario, mishaps=tuple(sorted(mishaps, key=lambda each: each.at_s)))


def _draw_station(chance: Random) -> tuple[Mount, Clearance]:
    hinges = chance.choice(
        (
            Hinges.azimuth_elevation(),
            Hinges.azimuth_elevation(),
            Hinges.x_y_north_south(),
            Hinges.x_y_east_west(),
            Hinges.hour_angle_declination(chance.uniform(-60.0, 60.0)),
        )
    )
    clearance = Clearance(chance.uniform(0.0, 9.0), _draw_mask(chance), _draw_keep_outs(chance))
    for _ in range(1000):
        mount = Mount(hinges, *_draw_joints(chance, hinges), Joints(0.0, 0.0))
        stow = _draw_place(chance, mount, clearance)
        if stow is not None:
            return replace(mount, stow=stow), clearance
    raise AssertionError("expected a stow position in a thousand attempts, got none")


def _draw_joints(chance: Random, hinges: Hinges) -> tuple[JointLimits, JointLimits]:
    rates = chance.uniform(3.0, 9.0), chance.uniform(2.0, 7.0)
    accelerations = chance.uniform(1.5, 6.0), chance.uniform(1.5, 6.0)
    if hinges.is_upright:
        around_deg, centre_deg = chance.choice((360.0, 450.0, 540.0)), chance.uniform(-90.0, 200.0)
        first = centre_deg - around_deg / 2.0, centre_deg + around_deg / 2.0
        second = chance.uniform(-5.0, 2.0), chance.choice((90.0, 180.0))
    else:
        first = -chance.uniform(75.0, 100.0), chance.uniform(75.0, 100.0)
        second = -chance.uniform(75.0, 90.0), chance.uniform(75.0, 90.0)
    return (
        JointLimits(*first, rates[0], accelerations[0]),
        JointLimits(*second, rates[1], accelerations[1]),
    )


def _draw_mask(chance: Random) -> HorizonMask | None:
    if chance.random() < 0.3:
        return None
    azimuths = sorted(chance.uniform(0.0, 359.9) for _ in range(chance.randint(1, 9)))
    return HorizonMask(tuple((each, chance.uniform(0.0, 25.0)) for each in azimuths))


def _draw_keep_outs(chance: Random) -> tuple[Sector, ...]:
    if chance.random() < 0.5:
        return ()
    begin_deg, lower_deg = chance.uniform(0.0, 359.0), chance.uniform(0.0, 40.0)
    width_deg, height_deg = chance.uniform(2.0, 20.0), chance.uniform(5.0, 35.0)
    end_deg = (begin_deg + width_deg) % 360.0
    return (Sector("the mast", begin_deg, end_deg, lower_deg, lower_deg + height_deg),)


def _draw_place(chance: Random, mount: Mount, clearance: Clearance) -> Joints | None:
    """A place of the joints with room around it."""
    for _ in range(200):
        place = Joints(
            chance.uniform(mount.first.lower_deg + MARGIN_DEG, mount.first.upper_deg - MARGIN_DEG),
            chance.uniform(
                mount.second.lower_deg + MARGIN_DEG, mount.second.upper_deg - MARGIN_DEG
            ),
        )
        if _has_room(place, mount, clearance):
            return place
    return None


def _has_room(place: Joints, mount: Mount, clearance: Clearance) -> bool:
    azimuth_deg, elevation_deg = mount.hinges.boresight(place)
    return all(
        clearance.is_clear((azimuth_deg + aside_deg) % 360.0, elevation_deg + above_deg)
        for aside_deg in (-MARGIN_DEG, MARGIN_DEG)
        for above_deg in (-MARGIN_DEG, MARGIN_DEG)
    )


def _outside(chance: Random, mount: Mount) -> Joints:
    beyond_deg = chance.uniform(0.3, 2.0)
    return chance.choice(
        (
            mount.stow._replace(first_deg=mount.first.upper_deg + beyond_deg),
            mount.stow._replace(second_deg=mount.second.lower_deg - beyond_deg),
        )
    )


def _draw_contacts(chance: Random, mount: Mount, clearance: Clearance) -> list[Arc]:
    contacts: list[Arc] = []
    place, free_s = mount.stow, START_UTC_S + 3.0
    for number in range(chance.choice((1, 2, 2, 3))):
        arc = _draw_contact(chance, f"pass {number + 1}", place, free_s, mount, clearance)
        if arc is not None:
            contacts.append(arc)
            place, free_s = arc.goal, arc.end_s
    return contacts


def _draw_contact(
    chance: Random, name: str, place: Joints, free_s: float, mount: Mount, clearance: Clearance
) -> Arc | None:
    for _ in range(50):
        start = _draw_place(chance, mount, clearance)
        goal = _draw_place(chance, mount, clearance)
        if start is None or goal is None:
            continue
        share = min(
            1.0,
            90.0 / max(abs(goal.first_deg - start.first_deg), 1e-3),
            50.0 / max(abs(goal.second_deg - start.second_deg), 1e-3),
        )
        goal = Joints(
            start.first_deg + share * (goal.first_deg - start.first_deg),
            start.second_deg + share * (goal.second_deg - start.second_deg),
        )
        if not _is_free_way(start, goal, mount, clearance):
            continue
        try:
            away_s = transit_time_s(place, transit(place, start, mount, clearance), mount)
        except NoWay:
            continue
        begin_s = free_s + 1.4 * away_s + PAUSE_S
        return Arc(name, mount.hinges, start, goal, begin_s, begin_s + chance.uniform(60.0, 110.0))
    return None


def _is_free_way(start: Joints, goal: Joints, mount: Mount, clearance: Clearance) -> bool:
    return all(
        _has_room(
            Joints(
                start.first_deg + step / 80 * (goal.first_deg - start.first_deg),
                start.second_deg + step / 80 * (goal.second_deg - start.second_deg),
            ),
            mount,
            clearance,
        )
        for step in range(81)
    )


def _draw_sun(seed: int, mount: Mount, contacts: Sequence[Arc]) -> Sun | None:
    """Near no contact, for those must not be lost; drawn apart, so that nothing else changes."""
    chance = Random(f"Sun of {seed}")  # noqa: S311 - a drawn scenario, no secret
    sun = Sun(chance.uniform(0.0, 360.0), chance.uniform(3.0, 70.0), chance.uniform(2.0, 12.0))
    places = [mount.stow] + [
        arc.at(arc.begin_s + step / 40 * (arc.end_s - arc.begin_s)).joints
        for arc in contacts
        for step in range(41)
    ]
    nearest_deg = min(sun.apart_deg(*mount.hinges.boresight(place)) for place in places)
    has_room = nearest_deg > sun.keep_out_deg + SUN_ROOM_DEG
    return sun if has_room and chance.random() < SHARE_IN_THE_SUN else None


def _draw_machine(chance: Random, seed: int) -> dict[str, float]:
    return {
        "encoder_noise_deg": chance.choice((0.0, 0.0002, 0.005)),
        "encoder_resolution_deg": chance.choice((0.0, 0.001, 0.02)),
        "latency_s": chance.choice((0.0, 0.0, 0.05)),
        "seed": seed,
    }


def _draw_mishap(chance: Random, end_s: float) -> Mishap:
    kind = chance.choice(_ANYWHERE)
    lasts_s = chance.choice((0.15, 1.0, 4.0, LONGEST_MISHAP_S)) * chance.uniform(0.7, 1.0)
    if kind in _LONG:
        lasts_s *= 10.0
    amount = chance.choice((-1.0, 1.0)) * chance.uniform(0.3, 1.0) * _MOST.get(kind, 1.0)
    return Mishap(kind, chance.uniform(1.0, end_s), lasts_s, amount, chance.randint(0, 1))


_ANYWHERE = tuple(kind for kind in MishapKind if kind is not MishapKind.RECOVER)

_LONG = frozenset({MishapKind.WIND, MishapKind.WIND_UNKNOWN, MishapKind.HEARTBEAT_LOST})

_MOST = {
    MishapKind.OFFSET: 30.0,
    MishapKind.WIND_PUSH: 0.6,
    MishapKind.CLOCK_STEP: 20.0,
    MishapKind.OLD_READINGS: 5.0,
    MishapKind.SLOW_CALLS: 0.9,
}
