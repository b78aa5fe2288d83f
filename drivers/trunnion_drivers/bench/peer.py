"""What sits at the far end of a wire: bytes in, bytes out, time as an argument."""

from typing import Protocol


class Peer(Protocol):
    """The controller's side of a conversation; pure but for the machine it drives."""

    def hear(self, mono_s: float, come: bytes) -> bytes:
        """Take in what has come at this second; return what to answer, perhaps nothing."""
        ...

    def says_unasked(self, mono_s: float) -> bytes:
        """What is to be said at this second without having been asked."""
        ...
