"""The operator's correction on disk, so that a restart in mid-contact points where it did before.

Beside the correction stands until when it may be of use: a contact of the same name on another day
is another contact.
"""

import json
import logging
from dataclasses import asdict
from pathlib import Path
from typing import NamedTuple

from trunnion.service.durable_file import remove_durably, write_durably
from trunnion.track.correction import Correction

_log = logging.getLogger(__name__)


class CorrectionInForce(NamedTuple):
    """A correction, and the contact that it is for; None for all until it is cleared."""

    correction: Correction
    contact: str | None

    def holds_for(self, contact: str) -> bool:
        """Whether this contact's target is corrected."""
        return self.contact is None or self.contact == contact


class StandingCorrection:
    """One small file; no method raises. A file that cannot be understood corrects nothing."""

    def __init__(self, path: Path) -> None:
        self._path = path

    def read(self, utc_s: float) -> CorrectionInForce | None:
        """The correction that is still of use at this second, if there is one."""
        try:
            given, until_s = _understood(self._path.read_text(encoding="utf-8"))
        except FileNotFoundError:
            return None
        except (OSError, ValueError, TypeError, KeyError) as error:
            _log.warning(
                "%s: nothing is corrected, as this is no correction: %s", self._path, error
            )
            return None
        return given if until_s is None or utc_s < until_s else None

    def keep(self, given: CorrectionInForce, until_s: float | None) -> str | None:
        """Keep it over a restart, until then; what went wrong, if anything did."""
        kept = {
            "correction": asdict(given.correction),
            "contact": given.contact,
            "until_utc_s": until_s,
        }
        try:
            write_durably(self._path, json.dumps(kept) + "\n")
        except OSError as error:
            return f"a restart would forget the correction: {self._path}: {error.strerror}"
        return None

    def clear(self) -> str | None:
        """Keep none; what went wrong, if anything did."""
        try:
            remove_durably(self._path)
        except OSError as error:
            return f"a restart would correct again: {self._path}: {error.strerror}"
        return None


def _understood(text: str) -> tuple[CorrectionInForce, float | None]:
    """The correction, and until when; raises ValueError, TypeError or KeyError."""
    kept = json.loads(text)
    contact, until_s = kept["contact"], kept["until_utc_s"]
    if not (contact is None or isinstance(contact, str)):
        raise TypeError(f"expected the name of a contact, got {contact!r}")
    given = CorrectionInForce(Correction(**kept["correction"]), contact)
    return given, None if contact is None else float(until_s)
