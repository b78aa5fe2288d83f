"""What the gate is told of the surroundings, from what the service knows of them."""

from trunnion.safety.emergency import EmergencyStop
from trunnion.safety.world import World
from trunnion.service.link.status import LinkStatus
from trunnion.service.senses import Sensed

_NOTHING = Sensed()

HARDWARE_STOP = "the hardware stop input is pressed, or its signal is lost"


def world_of(
    latched: EmergencyStop | None, link: LinkStatus, lateness_s: float, sensed: Sensed = _NOTHING
) -> World:
    """The surroundings at this turn."""
    return World(
        emergency=latched,
        is_link_up=link.is_up,
        lateness_s=lateness_s,
        mount_fault=link.fault,
        **sensed._asdict(),
    )
