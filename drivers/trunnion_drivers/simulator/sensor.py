"""What the mount believes of both joints: through gears, encoders, and their faults."""

from math import nan

from trunnion_drivers.simulator.encoder import Encoder
from trunnion_drivers.simulator.faults import EncoderFault, Faults
from trunnion_drivers.simulator.joint import JointState


class Sensor:
    """The encoder of one joint, on the motor's side of the gear or on the antenna's.

    `scale` is the gear ratio between what it should show and what it shows.
    """

    def __init__(self, encoder: Encoder, scale: float, *, is_on_motor: bool) -> None:
        self._encoder = encoder
        self._scale = scale
        self._is_on_motor = is_on_motor
        self._shown_deg: float | None = None

    def reading_deg(self, joint: JointState, fault: EncoderFault, offset_deg: float) -> float:
        """The angle as it would be read (deg); not a number from a dead encoder."""
        if fault is EncoderFault.DEAD:
            return nan
        if fault is not EncoderFault.FROZEN or self._shown_deg is None:
            angle_deg = joint.motor_deg if self._is_on_motor else joint.antenna_deg
            self._shown_deg = self._encoder.reading_deg(angle_deg * self._scale + offset_deg)
        return self._shown_deg


def both_deg(
    sensors: tuple[Sensor, Sensor], joints: tuple[JointState, JointState], faults: Faults
) -> tuple[float, float]:
    """Both angles as they would be read (deg)."""
    first, second = map(Sensor.reading_deg, sensors, joints, faults.encoders, faults.offsets_deg)
    return first, second
