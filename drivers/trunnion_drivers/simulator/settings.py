"""The settings of the simulated mount, all optional."""

from typing import Annotated

from pydantic import Field

from trunnion_drivers.settings import Settings

Degrees = Annotated[float, Field(ge=0.0, le=10.0)]


class SimulatorSettings(Settings):
    """The `driver:` section of a station whose mount is simulated.

    `start_deg` are the angles of both joints at first, by default the stow position.
    `overtravel_deg` is how far beyond the travel the hard stops stand. `latency_s` passes before an
    order takes effect; a motion not renewed for `watchdog_s` ends. `memory` names a file that keeps
    the angles while no daemon runs.
    """

    start_deg: tuple[float, float] | None = None
    encoder_resolution_deg: Degrees = 0.001
    encoder_noise_deg: Degrees = 0.0002
    seed: int = 1
    overtravel_deg: Annotated[float, Field(gt=0.0, le=90.0)] = 1.0
    latency_s: Annotated[float, Field(ge=0.0, le=5.0)] = 0.0
    watchdog_s: Annotated[float, Field(gt=0.0, le=60.0)] = 2.0
    memory: Annotated[str, Field(min_length=1)] | None = None
