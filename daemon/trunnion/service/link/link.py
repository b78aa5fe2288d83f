"""What the control turn sees of the way to the mount."""

from typing import Protocol

from trunnion.mount.joints import Reading
from trunnion.safety.verdict import Order
from trunnion.service.link.status import LinkStatus


class Link(Protocol):
    """Orders go out, readings come in; no call raises, none waits for a thread that hangs.

    A motion counts only for the connection whose reading `newest()` handed out last before it was
    submitted: after a reconnect nothing but a halt leaves until somebody has seen where the mount
    is now, and has ordered anew.
    """

    def newest(self) -> Reading | None:
        """The newest reading; None before the first one. It may be old: see `taken_s`."""
        ...

    @property
    def status(self) -> LinkStatus:
        """How the link fares, and what the mount says beside its angles."""
        ...

    def submit(self, order: Order) -> None:
        """Send this order next; an older one that has not left yet is forgotten."""
        ...

    def emergency_halt(self) -> None:
        """Halt before anything else, and send nothing but halts until released.

        May be called from any thread, again and again.
        """
        ...

    def cut_power(self) -> None:
        """Take the power from the motors where the mount can, until released.

        Does nothing while no emergency halt is in force; may be called again and again.
        """
        ...

    def release(self) -> None:
        """Let motion pass again; sends nothing, and nothing submitted before counts.

        Power that was taken comes back when the link is opened anew, which follows by itself.
        """
        ...

    def close(self) -> None:
        """Halt the mount and let go of it; idempotent."""
        ...
