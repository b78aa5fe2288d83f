"""Sun, Moon and planets by a JPL ephemeris file (SPK), read by jplephem: an optional extra."""

from collections.abc import Iterable
from dataclasses import dataclass
from functools import lru_cache, partial
from pathlib import Path
from typing import Any
from weakref import finalize

import numpy as np

from trunnion.sky.bodies import MOON_NODE_DAYS, SLOW_NODE_DAYS
from trunnion.sky.errors import SkyError
from trunnion.sky.light import as_seen
from trunnion.sky.look import FloatArray
from trunnion.sky.naming import Body
from trunnion.sky.place import AU_KM, J2000_JD, check_span

_SUN, _EARTH, _BARYCENTRE = 10, 399, 0
NAIF_CODES = {
    Body.SUN: (_SUN,),
    Body.MOON: (301,),
    Body.MERCURY: (199, 1),
    Body.VENUS: (299, 2),
    Body.MARS: (499, 4),
    Body.JUPITER: (599, 5),
    Body.SATURN: (699, 6),
    Body.URANUS: (799, 7),
    Body.NEPTUNE: (899, 8),
}
"""NAIF's integer codes: the planet itself and, where a file lacks it, its system's barycentre."""


class SpkFile:
    """An open ephemeris file: the positions of what it holds."""

    def __init__(self, path: str) -> None:
        self.path = path
        kernel = _kernel(path)
        finalize(self, kernel.close)
        segments = kernel.segments
        self._segment_to = {segment.target: segment for segment in segments}
        days = [(segment.start_jd - J2000_JD, segment.end_jd - J2000_JD) for segment in segments]
        self.first_day, self.last_day = max(day[0] for day in days), min(day[1] for day in days)

    def code(self, codes: Iterable[int]) -> int:
        """The first of these bodies that the file holds; raises SkyError where it holds none."""
        for code in codes:
            if code in self._segment_to:
                return code
        raise SkyError(f"{self.path}: expected an ephemeris of body {max(codes)}, got none")

    def barycentric_km(self, code: int, tt_days: float) -> FloatArray:
        """Of one body, on the axes of the ICRS, shape (3,)."""
        position_km = np.zeros(3)
        while code != _BARYCENTRE:
            segment = self._segment_to[self.code((code,))]
            position_km = position_km + segment.compute(J2000_JD, tt_days)
            code = segment.center
        return position_km

    def geocentric_au(self, code: int, tt_days: float) -> FloatArray:
        """Of one body, from the Earth's centre."""
        earth_km = self.barycentric_km(_EARTH, tt_days)
        return (self.barycentric_km(code, tt_days) - earth_km) / AU_KM


@lru_cache(maxsize=8)
def spk_file(path: str) -> SpkFile:
    """Open an ephemeris file once; raises SkyError for one that cannot be used."""
    return SpkFile(path)


@dataclass(frozen=True, slots=True)
class SpkBody:
    """A body by an ephemeris file: a Place. Raises SkyError where the file does not hold it."""

    body: Body
    path: str

    def __post_init__(self) -> None:
        spk_file(self.path).code(NAIF_CODES[self.body])

    @property
    def name(self) -> str:
        """The body's name."""
        return self.body.value

    @property
    def has_range(self) -> bool:
        """A body is somewhere."""
        return True

    @property
    def node_days(self) -> float:
        """The Moon is fast."""
        return MOON_NODE_DAYS if self.body is Body.MOON else SLOW_NODE_DAYS

    def at(self, tt_days: float, *, is_apparent: bool) -> FloatArray:
        """From the Earth's centre, shape (3,); raises NoPosition outside the file's span."""
        file = spk_file(self.path)
        code = file.code(NAIF_CODES[self.body])
        check_span(self.name, tt_days, file.first_day + 1.0, file.last_day)
        if not is_apparent:
            return AU_KM * file.geocentric_au(code, tt_days)
        earth_from_sun_au = -file.geocentric_au(_SUN, tt_days)
        return AU_KM * as_seen(partial(file.geocentric_au, code), tt_days, earth_from_sun_au)


def _kernel(path: str) -> Any:
    """The open file, with segments of Chebyshev series, one a body."""
    try:
        from jplephem.spk import SPK
    except ImportError:
        raise SkyError(
            f"{path}: expected the package jplephem to read it, got none; install "
            "trunnion[ephemeris]"
        ) from None
    if not Path(path).is_file():
        raise SkyError(f"{path}: no such file")
    try:
        kernel = SPK.open(path)
    except (ValueError, OSError) as error:
        raise SkyError(f"{path}: expected a JPL ephemeris (SPK): {error}") from None
    if not kernel.segments or any(each.data_type not in {2, 3} for each in kernel.segments):
        kernel.close()
        raise SkyError(f"{path}: expected segments of type 2 or 3, got others or none")
    return kernel
