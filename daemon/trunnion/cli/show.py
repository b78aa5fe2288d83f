"""`trunnion show`: a station file as the program understands it."""

from trunnion.cli.arguments import AsJson, Station
from trunnion.cli.output import print_json, print_text


def show(station: Station, *, as_json: AsJson = False) -> None:
    """Print every setting of a station with the value in force, defaults filled in."""
    from trunnion.files.station import effective_settings, load_station

    settings = effective_settings(load_station(station))
    if as_json:
        print_json(settings)
        return
    import yaml

    print_text(yaml.safe_dump(settings, sort_keys=False, allow_unicode=True))
