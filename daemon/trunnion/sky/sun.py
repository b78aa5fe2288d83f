"""The Sun as a target: for the noise it makes, and for keeping away from it."""

from trunnion.sky.bodies import SeriesBody
from trunnion.sky.celestial import Celestial
from trunnion.sky.naming import Body
from trunnion.sky.viewpoint import Viewpoint


class Sun(Celestial):
    """The centre of the Sun's disc by the built-in series, good to 1″: a Target."""

    __slots__ = ()

    def __init__(self, viewpoint: Viewpoint) -> None:
        super().__init__(SeriesBody(Body.SUN), viewpoint)
