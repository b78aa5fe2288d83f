"""Find a wind input by its name among the installed ones, and build it from the station file."""

from importlib.metadata import entry_points

from trunnion.files.problems import FileProblems, did_you_mean
from trunnion.files.station import StationFile
from trunnion.service.clock import Clock
from trunnion_drivers.interface.errors import BadSettings
from trunnion_drivers.interface.wind import WindInput

GROUP = "trunnion.winds"
"""The entry-point group in which wind inputs, ours and other people's, announce themselves."""


def build_wind(station: StationFile, clock: Clock) -> WindInput | None:
    """Build the station's wind input, if it has one; opens nothing. Raises FileProblems."""
    section = station.wind
    if section is None:
        return None
    known = {each.name: each for each in entry_points(group=GROUP)}
    if section.kind not in known:
        reason = f"expected an installed wind input ({', '.join(sorted(known))}), "
        reason += f"got {section.kind!r}{did_you_mean(section.kind, known)}"
        raise FileProblems([station.problem(("wind", "kind"), reason)])
    wind_class: type[WindInput] = known[section.kind].load()
    folder = station.path.absolute().parent
    try:
        return wind_class.from_settings(section.settings, folder, clock)
    except BadSettings as bad:
        raise FileProblems(
            station.problem(("wind", *(each.key.split(".") if each.key else ())), each.reason)
            for each in bad.problems
        ) from bad
