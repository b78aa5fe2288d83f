"""What the gate is told of the surroundings."""

import pytest

from trunnion.safety.emergency import EmergencyStop
from trunnion.service.link.status import LinkState, LinkStatus
from trunnion.service.surroundings import world_of

STOP = EmergencyStop("the cow", 1_796_083_217.3)


def test_stop_fault_and_lateness_are_passed_on() -> None:
    world = world_of(STOP, LinkStatus(LinkState.UP, fault="drive 2 too hot"), lateness_s=0.13)
    assert (world.emergency, world.mount_fault, world.lateness_s) == (STOP, "drive 2 too hot", 0.13)
    assert world.is_link_up


@pytest.mark.parametrize("state", [LinkState.CLOSED, LinkState.DOWN, LinkState.BROKEN])
def test_a_link_that_is_gone_is_down_at_once(state: LinkState) -> None:
    assert not world_of(None, LinkStatus(state, failures_in_row=1), lateness_s=0.0).is_link_up


def test_one_bad_exchange_is_no_reason_to_halt_and_several_are() -> None:
    once = LinkStatus(LinkState.SILENT, failures_in_row=1)
    assert world_of(None, once, lateness_s=0.0).is_link_up
    again = once._replace(failures_in_row=9)
    assert not world_of(None, again, lateness_s=0.0).is_link_up
