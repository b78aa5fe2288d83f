"""What the service refuses, or cannot do, for a reason that the user can act on."""


class ServiceError(Exception):
    """The message says what was expected and what came, and needs nothing beside it."""
