"""What can go wrong with a driver, split by blame. Standard library only."""

from typing import NamedTuple


class DriverError(Exception):
    """Anything a driver raises on purpose; the message says expected and got."""


class LinkLost(DriverError):  # noqa: N818 - named for what happened
    """The way to the mount is gone: port closed, adapter pulled, connection refused."""


class NoReply(DriverError):  # noqa: N818 - named for what happened
    """The mount did not answer in time."""


class Garbled(DriverError):  # noqa: N818 - named for what happened
    """The mount answered, but not with anything that can be trusted."""


class Refused(DriverError):  # noqa: N818 - named for what happened
    """The mount understood, and would not."""


class WrongState(DriverError):  # noqa: N818 - named for what happened
    """Our own mistake: a call on a driver that is not open, or a value that is not finite."""


class SettingProblem(NamedTuple):
    """One thing wrong with the driver's settings: the key (dotted) and the reason."""

    key: str
    reason: str


class BadSettings(DriverError):  # noqa: N818 - named for what happened
    """The user's mistake: the settings in the station file do not describe a usable driver."""

    def __init__(self, problems: tuple[SettingProblem, ...]) -> None:
        super().__init__("; ".join(f"{p.key}: {p.reason}" for p in problems))
        self.problems = problems
