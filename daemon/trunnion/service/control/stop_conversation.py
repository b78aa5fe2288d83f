"""The stop lane's side of the talk: the halt first, everything else after it. No I/O.

Whoever connects sends `stop`, and may add a cause on the same line: `stop smoke from the drive`.
That is all, so that a shell and a tool that writes to sockets will do when nothing else is at hand.
"""

import logging
from collections.abc import Callable

from trunnion.service.control.peer import Peer

_log = logging.getLogger(__name__)

WORD = b"stop"
_LONGEST_CAUSE = 200


class StopConversation:
    """Stops as soon as the word is there; does not wait for the end of the line."""

    def __init__(self, stop: Callable[[str], None], peer: Peer) -> None:
        self._stop = stop
        self._peer = peer
        self._heard = b""
        self._is_over = False

    @property
    def is_over(self) -> bool:
        """Whether to hang up once everything said has been sent."""
        return self._is_over

    def hear(self, data: bytes) -> bytes:
        """Take in what came; stop, then say so."""
        if self._is_over:
            return b""
        self._heard += data
        if self._heard.startswith(WORD):
            self._is_over = True
            return self._stopped(_cause(self._heard, self._peer))
        self._is_over = not WORD.startswith(self._heard)
        return b"expected stop\n" if self._is_over else b""

    def _stopped(self, cause: str) -> bytes:
        try:
            self._stop(cause)
        except Exception:  # noqa: BLE001 - whoever asked for a stop must get an answer
            _log.exception("the emergency stop could not be taken in whole: %s", cause)
            return b"stop taken in, but not whole: see the log\n"
        return b"stopped\n"


def _cause(heard: bytes, peer: Peer) -> str:
    line = heard.removeprefix(WORD).partition(b"\n")[0]
    said = line.decode("utf-8", errors="replace").strip()
    printable = "".join(letter for letter in said if letter.isprintable())[:_LONGEST_CAUSE]
    return f"asked for by {peer}" + (f": {printable}" if printable else "")
