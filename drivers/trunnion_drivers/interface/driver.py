"""The contract of a driver: construct without hardware, open, read, move, halt, close.

The public methods here own the life cycle and the checks; a driver fills the hooks whose names
begin with an underscore. A driver is called from one thread at a time.
"""

from abc import ABC, abstractmethod
from collections.abc import Mapping
from math import isfinite
from typing import Self

from trunnion_drivers.interface.brake import Brake, BrakeTiming
from trunnion_drivers.interface.errors import Garbled, Refused, WrongState
from trunnion_drivers.interface.values import (
    Capabilities,
    Clock,
    DriverMotion,
    DriverReading,
    MountFacts,
)


class Driver(ABC):
    """One mount at the end of one link."""

    capabilities: Capabilities = Capabilities()
    """Told by the class, or by the instance where its settings decide."""
    brake_timing: BrakeTiming = BrakeTiming()
    """The times of the brake, where the capabilities tell of one."""

    def __init__(self, facts: MountFacts, clock: Clock) -> None:
        self._facts = facts
        self._clock = clock
        self._is_open = False
        self._stands_at: DriverReading | None = None
        self._brake: Brake | None = None

    @classmethod
    @abstractmethod
    def from_settings(cls, settings: Mapping[str, object], facts: MountFacts, clock: Clock) -> Self:
        """Build from the station file's `driver:` section less `kind`; touches no hardware.

        Raises BadSettings with every problem at once.
        """

    @property
    def is_open(self) -> bool:
        """Whether the link is open."""
        return self._is_open

    def open(self) -> None:
        """Open the link; orders no motion. Does nothing when open. Raises LinkLost."""
        if not self._is_open:
            self._open()
            self._is_open, self._stands_at = True, None
            self._brake = Brake(self.brake_timing) if self.capabilities.has_brake else None

    def close(self) -> None:
        """Close the link; idempotent, never raises for a link that is already gone."""
        if self._is_open:
            self._is_open = False
            self._close()

    def read(self) -> DriverReading:
        """Ask the mount where it is. Raises LinkLost, NoReply, Garbled, WrongState.

        Of a mount that rests after a halt the brake is engaged here.
        """
        self._must_be_open("read")
        reading = self._read()
        if not (isfinite(reading.first_deg) and isfinite(reading.second_deg)):
            raise Garbled(f"expected two finite joint angles, got {reading[1:3]}")
        self._stands_at = reading
        return self._held_at_rest(reading)

    def move(self, motion: DriverMotion) -> None:
        """Send the joints there. Raises LinkLost, NoReply, Garbled, Refused, WrongState.

        Angles outside the travel are refused here too, whoever asks; but a joint that stands
        outside may be sent anywhere between there and the travel. A brake is released first; what
        is ordered before it has let go is not sent, the next order is.
        """
        self._must_be_open("move")
        self._must_be_within_travel(motion)
        if self._has_let_go():
            self._move(motion)

    def halt(self) -> None:
        """Bring both joints to rest at full deceleration; may be repeated."""
        self._must_be_open("halt")
        if self._brake is not None:
            self._brake.note_halt()
        self._halt()

    def cut_power(self) -> None:
        """Remove power from the actuators, where the hardware has such an output.

        The brake is engaged behind it, whether the mount rests or not, and even if the power could
        not be cut.
        """
        if not self.capabilities.cuts_power:
            raise WrongState("this driver has no power-cut output")
        self._must_be_open("cut power")
        try:
            self._cut_power()
        finally:
            if self._brake is not None:
                self._brake.note_halt()
                self._engage(self._brake)

    def halt_at_once(self) -> bool:
        """Send the stop now, even while another call is under way in another thread.

        The one method that any thread may call. It waits for no answer and raises nothing, so
        `halt` must follow in the driver's own thread. Return whether the stop was sent.
        """
        try:
            return self._is_open and self._halt_at_once()
        except Exception:  # noqa: BLE001 - the port may be closed or reopened at this very moment
            return False

    def _halt_at_once(self) -> bool:
        """Send the stop without waiting for anybody; False for a driver that cannot."""
        return False

    @abstractmethod
    def _open(self) -> None: ...

    @abstractmethod
    def _close(self) -> None: ...

    @abstractmethod
    def _read(self) -> DriverReading: ...

    @abstractmethod
    def _move(self, motion: DriverMotion) -> None: ...

    @abstractmethod
    def _halt(self) -> None: ...

    def _cut_power(self) -> None:
        raise WrongState("this driver says it can cut power, and does not")

    def _engage_brake(self) -> None:
        raise WrongState("this driver says it has a brake, and does not engage it")

    def _release_brake(self) -> None:
        raise WrongState("this driver says it has a brake, and does not release it")

    def _has_let_go(self) -> bool:
        """Whether no brake holds a motion back; one that does is released."""
        brake = self._brake
        if brake is None:
            return True
        brake.note_motion()
        if brake.must_be_released:
            self._release_brake()
            brake.note_release(self._clock.monotonic_s())
        return brake.has_let_go(self._clock.monotonic_s())

    def _held_at_rest(self, reading: DriverReading) -> DriverReading:
        """Engage the brake of a mount that rests; a refusal is told as a fault, and tried again."""
        brake = self._brake
        if brake is not None and brake.is_due(reading):
            try:
                self._engage(brake)
            except Refused as error:
                return reading._replace(fault=reading.fault or f"the brake is not engaged: {error}")
        return reading

    def _engage(self, brake: Brake) -> None:
        """An order that failed may have been obeyed: whether it holds is not known then."""
        brake.note_doubt()
        self._engage_brake()
        brake.note_engagement()

    def _must_be_open(self, call: str) -> None:
        if not self._is_open:
            raise WrongState(f"{call}: expected an open driver, got a closed one")

    def _must_be_within_travel(self, motion: DriverMotion) -> None:
        if not all(isfinite(value) for value in motion):
            raise WrongState(f"move: expected finite values, got {motion}")
        last = self._stands_at
        for name, angle, stands, facts in (
            ("first", motion.first_deg, last and last.first_deg, self._facts.first),
            ("second", motion.second_deg, last and last.second_deg, self._facts.second),
        ):
            stands_deg = facts.lower_deg if stands is None else stands
            if not min(facts.lower_deg, stands_deg) <= angle <= max(facts.upper_deg, stands_deg):
                raise WrongState(
                    f"move: expected the {name} joint within "
                    f"{facts.lower_deg}…{facts.upper_deg}°, got {angle}°"
                )
