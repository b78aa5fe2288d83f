"""The permission to transmit: judged every turn, told in the status and by a file."""

from collections.abc import Callable

from trunnion.files.station import StationFile
from trunnion.safety.limits import SafetyLimits
from trunnion.safety.transmit import VALIDITY_S, TransmitJudge, TransmitPermit
from trunnion.service.permit_file import PermitFile
from trunnion.service.turn import Turn

_NOT_YET = TransmitPermit(None, "no turn was done yet")
_ENDED = TransmitPermit(None, "the program ends")
_EXPIRED = TransmitPermit(None, "the permission was not renewed in time")


class Transmission:
    """Observes the turns; keeps the permission of the last one."""

    def __init__(
        self, judge: TransmitJudge, file: PermitFile | None, tell: Callable[[str], None]
    ) -> None:
        self._judge = judge
        self._file = file
        self._tell = tell
        self._permit = _NOT_YET

    @property
    def trouble(self) -> str | None:
        """Why the file could not be written, if so."""
        return self._file.trouble if self._file is not None else None

    def permit_at(self, mono_s: float) -> TransmitPermit:
        """The permission as it stands at this monotonic second; one not renewed expires."""
        permit = self._permit
        has_expired = permit.until_s is not None and not permit.is_good_at(mono_s)
        return _EXPIRED if has_expired else permit

    def note(self, turn: Turn) -> None:
        """Take in one turn."""
        error_deg = turn.decision.error_deg
        self._take(self._judge.judge(turn.mono_s, error_deg, turn.reading, turn.verdict))
        if self._file is not None:
            self._file.tell(turn.mono_s, is_permitted=self._permit.is_good_at(turn.mono_s))

    def end(self) -> None:
        """Take any permission back."""
        self._take(_ENDED)
        if self._file is not None:
            self._file.forbid()

    def _take(self, permit: TransmitPermit) -> None:
        had_one, has_one = (each.until_s is not None for each in (self._permit, permit))
        self._permit = permit
        if has_one and not had_one:
            self._tell("transmitting is permitted")
        elif had_one and not has_one:
            self._tell(f"transmitting is forbidden: {permit.reason}")


def transmission_of(
    station: StationFile,
    limits: SafetyLimits,
    tolerance_deg: float,
    tell: Callable[[str], None] = lambda _: None,
) -> Transmission:
    """What the station file asks for; a file that it names says "forbidden" from now on.

    `tell` is told whenever the permission comes or goes.
    """
    judge = TransmitJudge(limits, tolerance_deg, station.safety.transmit_settle_s)
    path = station.files.transmit_permit
    return Transmission(judge, None if path is None else PermitFile(path, VALIDITY_S), tell)
