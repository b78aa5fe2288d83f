"""The settings of the simulated mount, all optional."""

from typing import Annotated

from pydantic import Field

from trunnion_drivers.brake import BrakeSettings
from trunnion_drivers.control.command import CommandMode
from trunnion_drivers.control.settings import ControlSettings
from trunnion_drivers.settings import Settings
from trunnion_drivers.simulator.episodes import EpisodeSettings

Degrees = Annotated[float, Field(ge=0.0, le=10.0)]
Share = Annotated[float, Field(ge=0.0, le=1.0)]


class MachineSettings(Settings):
    """What the simulated steel, its encoders and its controller are like.

    `start_deg` are the angles of both joints at first, by default the stow position.

    Steel: the limit switches stand `switches_deg` beyond the travel, the hard stops
    `overtravel_deg`. `backlash_deg` is the play of the gears; static friction holds a joint at rest
    against goals nearer than `breakaway_deg` and rates below `breakaway_rate_deg_s`; from its
    highest rate a joint coasts `run_on_deg`, 0 for full braking. Wind bends both joints by
    `bend_deg_s2_m2` times the square of its speed.

    Encoders: `encoder_resolution_deg` and `encoder_noise_deg` (standard deviation, seeded by
    `seed`), `encoder_scale` (1 for the right gear ratio), `encoder_on_motor` (behind the backlash).

    Controller: `latency_s` passes before an order takes effect; a motion not renewed for
    `watchdog_s` ends; without `follows_rate` it holds still between orders of position.
    """

    start_deg: tuple[float, float] | None = None
    switches_deg: Annotated[float, Field(gt=0.0, le=90.0)] = 0.5
    overtravel_deg: Annotated[float, Field(gt=0.0, le=90.0)] = 1.0
    backlash_deg: Degrees = 0.0
    breakaway_deg: Degrees = 0.0
    breakaway_rate_deg_s: Degrees = 0.0
    run_on_deg: Degrees = 0.0
    bend_deg_s2_m2: Annotated[float, Field(ge=0.0, le=0.1)] = 0.0
    encoder_resolution_deg: Degrees = 0.001
    encoder_noise_deg: Degrees = 0.0002
    seed: int = 1
    encoder_scale: Annotated[float, Field(gt=0.0, le=10.0)] = 1.0
    encoder_on_motor: bool = False
    latency_s: Annotated[float, Field(ge=0.0, le=5.0)] = 0.0
    watchdog_s: Annotated[float, Field(gt=0.0, le=60.0)] = 2.0
    follows_rate: bool = True


class SimulatorSettings(MachineSettings):
    """The `driver:` section of a station whose mount is simulated.

    `command` is what the mount understands, and `control` tunes the laws that steer it. `memory`
    names a file that keeps the angles while no daemon runs; with `brake` there is one, with its
    times. On the link, `order_loss` and
    `reply_loss` are the shares of orders and answers that vanish. `faults` is a list of episodes.
    """

    command: Annotated[CommandMode, Field(strict=False)] = CommandMode.POSITION
    control: ControlSettings = ControlSettings()
    memory: Annotated[str, Field(min_length=1)] | None = None
    brake: BrakeSettings | None = None
    order_loss: Share = 0.0
    reply_loss: Share = 0.0
    faults: tuple[EpisodeSettings, ...] = ()
