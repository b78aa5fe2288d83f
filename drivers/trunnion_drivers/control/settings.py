"""The `control:` section of a driver's settings: what is known of the mount's own controller."""

from typing import Annotated

from pydantic import Field

from trunnion_drivers.control.command import CommandMode
from trunnion_drivers.control.on_off import OnOffSettings
from trunnion_drivers.control.position import PositionSettings
from trunnion_drivers.control.rate import RateSettings
from trunnion_drivers.control.steering import (
    OnOffSteering,
    PositionSteering,
    RateSteering,
    Steering,
)
from trunnion_drivers.interface.values import MountFacts
from trunnion_drivers.settings import Settings

Seconds = Annotated[float, Field(ge=0.0, le=10.0)]
Degrees = Annotated[float, Field(ge=0.0, le=10.0)]
Gain = Annotated[float, Field(ge=0.0, le=20.0)]


class ControlSettings(Settings):
    """What the control laws need to know; every key optional, most of them of use in one mode.

    All modes: `latency_s` between an order and its effect. Position: `step_deg`, the least change
    it carries out. Rate: `gain_per_s`, `integral_per_s2`, `integral_limit_deg_s`,
    `least_rate_deg_s`. On–off: `threshold_deg`, `resolution_deg` of the encoder, `run_on_deg` as a
    first guess, `coasting_s`, `least_pulse_s`, `least_rest_s`.
    """

    latency_s: Seconds = 0.0
    step_deg: Degrees = 0.0
    gain_per_s: Gain = 2.0
    integral_per_s2: Gain = 0.4
    integral_limit_deg_s: Gain = 0.1
    least_rate_deg_s: Degrees = 0.0
    threshold_deg: Annotated[float, Field(gt=0.0, le=10.0)] = 0.5
    resolution_deg: Degrees = 0.0
    run_on_deg: Degrees = 0.0
    coasting_s: Seconds = 0.8
    least_pulse_s: Seconds = 0.1
    least_rest_s: Seconds = 0.3

    def steering(self, mode: CommandMode, facts: MountFacts, *, follows_rate: bool) -> Steering:
        """Build the laws for a mount that understands this mode."""
        match mode:
            case CommandMode.POSITION:
                return PositionSteering(
                    PositionSettings(self.latency_s, self.step_deg, follows_rate), facts
                )
            case CommandMode.RATE:
                return RateSteering(self._rate(), facts)
            case CommandMode.ON_OFF:
                return OnOffSteering(self._on_off(), facts)

    def _rate(self) -> RateSettings:
        return RateSettings(
            gain_per_s=self.gain_per_s,
            integral_per_s2=self.integral_per_s2,
            integral_limit_deg_s=self.integral_limit_deg_s,
            latency_s=self.latency_s,
            least_rate_deg_s=self.least_rate_deg_s,
        )

    def _on_off(self) -> OnOffSettings:
        return OnOffSettings(
            threshold_deg=self.threshold_deg,
            resolution_deg=self.resolution_deg,
            run_on_deg=self.run_on_deg,
            coasting_s=self.coasting_s,
            least_pulse_s=self.least_pulse_s,
            least_rest_s=self.least_rest_s,
        )
