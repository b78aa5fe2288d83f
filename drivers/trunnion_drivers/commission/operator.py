"""The person beside the mount, as the steps see them."""

import os
import select
import sys
import termios
import tty
from typing import Protocol

_KEYS = 64


class Operator(Protocol):
    """Tells what only somebody who stands there can tell, and may stop everything at any time."""

    def tell(self, words: str) -> None:
        """Say something that needs no answer."""
        ...

    def agrees(self, question: str) -> bool:
        """Whether the answer is yes; anything else is no."""
        ...

    def number(self, question: str) -> float | None:
        """A number; None to pass over."""
        ...

    def wants_stop(self) -> bool:
        """Whether a key has been pressed since the last question; never waits."""
        ...


class AtTerminal:
    """Somebody at this terminal."""

    def tell(self, words: str) -> None:
        """Print it."""
        sys.stdout.write(f"{words}\n")
        sys.stdout.flush()

    def agrees(self, question: str) -> bool:
        """Ask for a typed yes."""
        return self._answer(f"{question} Type yes to go on: ").lower() == "yes"

    def number(self, question: str) -> float | None:
        """Ask until it is a number, or nothing."""
        while True:
            answer = self._answer(f"{question} A number, or nothing to pass over: ")
            try:
                return float(answer) if answer else None
            except ValueError:
                self.tell(f"expected a number, got {answer!r}")

    def wants_stop(self) -> bool:
        """Look for a key; it needs no return key."""
        if not sys.stdin.isatty():
            return False
        keys = sys.stdin.fileno()
        before = termios.tcgetattr(keys)
        try:
            tty.setcbreak(keys, termios.TCSANOW)
            is_pressed = bool(select.select([keys], [], [], 0.0)[0])
            return is_pressed and bool(os.read(keys, _KEYS))
        finally:
            termios.tcsetattr(keys, termios.TCSANOW, before)

    def _answer(self, question: str) -> str:
        sys.stdout.write(question)
        sys.stdout.flush()
        return sys.stdin.readline().strip()
