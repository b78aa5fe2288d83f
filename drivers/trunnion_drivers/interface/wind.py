"""The contract of a wind input, and what makes mean and gust of its readings. Standard library.

Mean and gust as the World Meteorological Organization defines them (Guide to Instruments and
Methods of Observation, WMO-No. 8, part I, chapter 5): the mean over ten minutes, and the highest
value of the mean over three seconds within that time.
"""

from abc import ABC, abstractmethod
from collections import deque
from collections.abc import Mapping
from math import isfinite
from pathlib import Path
from typing import NamedTuple, Self

from trunnion_drivers.interface.errors import Garbled, WrongState
from trunnion_drivers.interface.values import Clock

STRONGEST_M_S = 150.0
"""More than any wind measured at the ground; a reading above it is a mistake."""

_MEAN_OVER_S = 600.0
_GUST_OVER_S = 3.0


class WindReading(NamedTuple):
    """Speed (m/s) as measured at a monotonic second; gust and direction where the input has them.

    The direction is where the wind comes from, in degrees from the sensor's north mark.
    """

    taken_s: float
    speed_m_s: float
    gust_m_s: float | None = None
    direction_deg: float | None = None


class WindInput(ABC):
    """One anemometer at the end of one link; called from one thread at a time."""

    def __init__(self, clock: Clock) -> None:
        self._clock = clock
        self._is_open = False

    @classmethod
    @abstractmethod
    def from_settings(cls, settings: Mapping[str, object], folder: Path, clock: Clock) -> Self:
        """Build from the settings less `kind`; relative paths begin at `folder`.

        Touches no hardware. Raises BadSettings with every problem at once.
        """

    @property
    def is_open(self) -> bool:
        """Whether the link is open."""
        return self._is_open

    def open(self) -> None:
        """Open the link. Does nothing when open. Raises LinkLost."""
        if not self._is_open:
            self._open()
            self._is_open = True

    def close(self) -> None:
        """Close the link; idempotent."""
        if self._is_open:
            self._is_open = False
            self._close()

    def read(self) -> WindReading:
        """The newest reading, which may be old. Raises LinkLost, NoReply, Garbled, WrongState."""
        if not self._is_open:
            raise WrongState("read: expected an open wind input, got a closed one")
        reading = self._read()
        for speed in (reading.speed_m_s, reading.gust_m_s or 0.0):
            if not (isfinite(speed) and 0.0 <= speed <= STRONGEST_M_S):
                raise Garbled(f"expected a wind of 0 to {STRONGEST_M_S:g} m/s, got {speed}")
        return reading

    @abstractmethod
    def _open(self) -> None: ...

    @abstractmethod
    def _close(self) -> None: ...

    @abstractmethod
    def _read(self) -> WindReading: ...


class WindRecord:
    """The readings of the last ten minutes; seconds given to it never go back."""

    def __init__(self) -> None:
        self._kept: deque[WindReading] = deque()

    def note(self, reading: WindReading) -> None:
        """Take in a reading; one that is not newer than the last is known already."""
        if self._kept and reading.taken_s <= self._kept[-1].taken_s:
            return
        self._kept.append(reading)
        while self._kept[0].taken_s < reading.taken_s - _MEAN_OVER_S:
            self._kept.popleft()

    def mean_m_s(self) -> float | None:
        """The mean of what was read within ten minutes of the newest reading; None for nothing."""
        return _mean([each.speed_m_s for each in self._kept])

    def gust_m_s(self) -> float | None:
        """The strongest gust in that time, as told by the input or as read; None for nothing."""
        told = [each.gust_m_s for each in self._kept if each.gust_m_s is not None]
        return max([*told, *self._short_means()], default=None)

    def _short_means(self) -> list[float]:
        means = []
        window: deque[WindReading] = deque()
        for each in self._kept:
            window.append(each)
            while window[0].taken_s < each.taken_s - _GUST_OVER_S:
                window.popleft()
            means.append(sum(one.speed_m_s for one in window) / len(window))
        return means


def _mean(values: list[float]) -> float | None:
    return sum(values) / len(values) if values else None
