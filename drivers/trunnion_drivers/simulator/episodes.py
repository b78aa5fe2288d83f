"""Faults written down in the station file, so that anybody can rehearse a bad day."""

from typing import Annotated

from pydantic import Field

from trunnion_drivers.settings import Settings
from trunnion_drivers.simulator.faults import (
    EncoderFault,
    Episode,
    Faults,
    JointFault,
    LinkFault,
)

Seconds = Annotated[float, Field(ge=0.0, le=1e6)]
AnyJoint = Annotated[JointFault, Field(strict=False)]
AnyEncoder = Annotated[EncoderFault, Field(strict=False)]


class EpisodeSettings(Settings):
    """One episode: what is wrong from `after_s` seconds after the driver was built, for `for_s`."""

    after_s: Seconds
    for_s: Seconds
    link: Annotated[LinkFault, Field(strict=False)] = LinkFault.NONE
    joints: tuple[AnyJoint, AnyJoint] = (JointFault.NONE, JointFault.NONE)
    encoders: tuple[AnyEncoder, AnyEncoder] = (EncoderFault.NONE, EncoderFault.NONE)
    offsets_deg: tuple[float, float] = (0.0, 0.0)
    reading_age_s: Annotated[float, Field(ge=0.0, le=60.0)] = 0.0
    call_lasts_s: Annotated[float, Field(ge=0.0, le=60.0)] = 0.0
    stop_pressed: bool = False
    has_no_power: bool = False
    words: str | None = None
    wind_m_s: Annotated[float, Field(ge=0.0, le=100.0)] = 0.0

    def episode(self, built_s: float) -> Episode:
        """The episode of a driver built at this monotonic second."""
        begin_s = built_s + self.after_s
        kept = {name: getattr(self, name) for name in Faults.__dataclass_fields__}
        return Episode(begin_s, begin_s + self.for_s, Faults(**kept))
