"""The way to the simulated mount, with all that can be wrong with it."""

from random import Random

from trunnion_drivers.interface.errors import Garbled, LinkLost, NoReply, Refused
from trunnion_drivers.interface.values import Clock
from trunnion_drivers.simulator.faults import Faults, LinkFault


class SimulatedLine:
    """Raises what a real line would; the shares of orders and answers lost are seeded."""

    def __init__(self, clock: Clock, order_loss: float, reply_loss: float, seed: int) -> None:
        self._clock = clock
        self._order_loss = order_loss
        self._reply_loss = reply_loss
        self._random = Random(f"{seed}, line")  # noqa: S311 - chance, no secret

    def connect(self, faults: Faults) -> None:
        """Open the line. Raises LinkLost."""
        if faults.link is LinkFault.LOST:
            raise LinkLost("simulated mount: expected a connection, and the cable is pulled")

    def carries_order(self, faults: Faults, *, is_motion: bool) -> bool:
        """Whether an order gets there. Raises LinkLost, NoReply, Refused."""
        self._pass(faults)
        if faults.link is LinkFault.REFUSING and is_motion:
            raise Refused("simulated mount: expected to be obeyed, got a refusal")
        return faults.link is not LinkFault.DEAF and not self._is_lost(self._order_loss)

    def carry_reply(self, faults: Faults) -> None:
        """Let an answer come back. Raises LinkLost, NoReply, Garbled."""
        self._pass(faults)
        if self._is_lost(self._reply_loss):
            raise NoReply("simulated mount: expected an answer, which was lost on the way")
        if faults.link is LinkFault.GARBLED:
            raise Garbled("simulated mount: expected two angles, got noise")

    def _pass(self, faults: Faults) -> None:
        if faults.call_lasts_s > 0.0:
            self._clock.sleep(faults.call_lasts_s)
        if faults.link is LinkFault.LOST:
            raise LinkLost("simulated mount: the cable was pulled")
        if faults.link is LinkFault.SILENT:
            raise NoReply("simulated mount: expected an answer, got none")

    def _is_lost(self, share: float) -> bool:
        return share > 0.0 and self._random.random() < share
