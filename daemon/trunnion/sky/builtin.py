"""Targets that need no file to say where they are."""

from trunnion.sky.bodies import SeriesBody
from trunnion.sky.celestial import Celestial
from trunnion.sky.direction import IcrsDirection
from trunnion.sky.fixed import FixedDirection
from trunnion.sky.look import Target
from trunnion.sky.naming import Body, FixedName, Meaning
from trunnion.sky.spk import SpkBody
from trunnion.sky.sun import Sun
from trunnion.sky.viewpoint import Viewpoint


def builtin_target(meant: Meaning, viewpoint: Viewpoint, ephemeris: str | None = None) -> Target:
    """The target, seen from a viewpoint; bodies by an ephemeris file (SPK) where there is one.

    Raises SkyError for a file that cannot be used, or a direction out of bounds.
    """
    if isinstance(meant, FixedName):
        return FixedDirection(*meant)
    if not isinstance(meant, Body):
        return Celestial(IcrsDirection(*meant), viewpoint)
    if ephemeris is not None:
        return Celestial(SpkBody(meant, ephemeris), viewpoint)
    return Sun(viewpoint) if meant is Body.SUN else Celestial(SeriesBody(meant), viewpoint)
