"""Find a driver by its name among the installed ones, and build it from the station file."""

from importlib.metadata import EntryPoint, entry_points

from trunnion.files.problems import did_you_mean
from trunnion.files.station import StationFile, driver_problems
from trunnion_drivers.interface.driver import Driver
from trunnion_drivers.interface.errors import BadSettings
from trunnion_drivers.interface.values import Clock, JointFacts, MountFacts

GROUP = "trunnion.drivers"
"""The entry-point group in which drivers, ours and other people's, announce themselves."""

SIMULATOR = "simulator"
MEMORY = "memory"


def build_driver(station: StationFile, clock: Clock) -> Driver:
    """Build the station's driver; touches no hardware. Raises FileProblems."""
    driver_class = _load(_entry_point(station))
    try:
        return driver_class.from_settings(station.driver.settings, mount_facts(station), clock)
    except BadSettings as bad:
        raise driver_problems(station, bad.problems) from bad


def build_simulator(station: StationFile, clock: Clock) -> Driver:
    """Build a simulated mount with this station's limits, whatever its own driver is.

    The settings of a station that runs on the simulator apply to it as well, but for its memory:
    what is only rehearsed moves no mount that somebody else is looking after.
    """
    driver_class = _load(next(iter(entry_points(group=GROUP, name=SIMULATOR))))
    is_simulated = station.driver.kind == SIMULATOR
    settings = {
        key: value
        for key, value in (station.driver.settings if is_simulated else {}).items()
        if key != MEMORY
    }
    try:
        return driver_class.from_settings(settings, mount_facts(station), clock)
    except BadSettings as bad:
        raise driver_problems(station, bad.problems) from bad


def mount_facts(station: StationFile) -> MountFacts:
    """What a driver may know of the mount."""
    first, second = (
        JointFacts(*joint.travel_deg, joint.rate_deg_s, joint.acceleration_deg_s2)
        for joint in (station.mount.first, station.mount.second)
    )
    return MountFacts(first, second, *station.mount.stow_deg, station.path.absolute().parent)


def _entry_point(station: StationFile) -> EntryPoint:
    known = {each.name: each for each in entry_points(group=GROUP)}
    kind = station.driver.kind
    if kind not in known:
        installed = ", ".join(sorted(known))
        reason = f"expected an installed driver ({installed}), got {kind!r}"
        raise driver_problems(station, [("kind", reason + did_you_mean(kind, known))])
    return known[kind]


def _load(found: EntryPoint) -> type[Driver]:
    driver_class = found.load()
    if not (isinstance(driver_class, type) and issubclass(driver_class, Driver)):
        raise TypeError(f"{found.value}: expected a Driver class, got {driver_class!r}")
    return driver_class
