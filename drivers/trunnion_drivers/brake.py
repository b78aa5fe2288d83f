"""The settings of a brake's times, in the `driver:` section of the station file."""

from typing import Annotated

from pydantic import Field

from trunnion_drivers.interface.brake import BrakeTiming
from trunnion_drivers.settings import Settings


class BrakeSettings(Settings):
    """The times of a brake that holds what rests; see BrakeTiming."""

    settle_s: Annotated[float, Field(ge=0.0, le=5.0)] = 0.3
    still_deg: Annotated[float, Field(gt=0.0, le=1.0)] = 0.02
    still_s: Annotated[float, Field(ge=0.5, le=60.0)] = 2.0

    def timing(self) -> BrakeTiming:
        """The times it describes."""
        return BrakeTiming(self.settle_s, self.still_deg, self.still_s)
