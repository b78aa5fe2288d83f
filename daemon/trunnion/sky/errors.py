"""What can be wrong with a target."""


class SkyError(ValueError):
    """A target, a site or an instant that cannot be used; the message says expected and got."""


class NoPosition(SkyError):  # noqa: N818 - it is a finding about the target, named like one
    """The target has no position at this instant (decayed orbit, outside an ephemeris)."""
