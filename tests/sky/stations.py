"""What the tests of this room look at, and from where: invented satellites, crooked places."""

from pathlib import Path

from trunnion.sky.earth import EarthOrientation
from trunnion.sky.elements import ElementSet, Satellite
from trunnion.sky.instants import parse_utc
from trunnion.sky.refraction import NoRefraction, Refraction
from trunnion.sky.site import Site
from trunnion.sky.viewpoint import Viewpoint

EARTH = EarthOrientation.packaged()
NORTH = Site(52.347, 4.913, 27.4)
EPOCH_S = parse_utc("2026-11-30T18:00:00Z")
DAY_S = 86400.0

_EXAMPLE = Path(__file__).parents[2] / "config" / "elements.tle"


def example_sets() -> dict[str, ElementSet]:
    """The invented satellites of the example, by name: low, high, eccentric and geostationary."""
    lines = _EXAMPLE.read_text(encoding="ascii").splitlines()
    return {
        name: ElementSet(name, int(first[2:7]), EPOCH_S, first, second)
        for name, first, second in zip(lines[::3], lines[1::3], lines[2::3], strict=True)
    }


def satellite(
    name: str,
    site: Site = NORTH,
    refraction: Refraction | None = None,
    *,
    is_apparent: bool = False,
) -> Satellite:
    """One of them, seen from a site; geometric unless said otherwise."""
    viewpoint = Viewpoint(site, EARTH, refraction or NoRefraction(), is_apparent)
    return Satellite(example_sets()[name], viewpoint)
