"""A mount as two hinges: the direction of the boresight from the joint angles, and back."""

from dataclasses import dataclass


@dataclass(frozen=True, slots=True)
class Hinges:
    """A fixed first axis, and a second one at a right angle that the first carries."""
