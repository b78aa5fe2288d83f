"""What is wrong with a file: every problem at once, each with its file, line and key."""

from collections.abc import Iterable
from dataclasses import dataclass
from difflib import get_close_matches


@dataclass(frozen=True, slots=True)
class Problem:
    """One thing wrong with a file.

    `line` counts from 1, and is None where no line is to blame (a file that cannot be read); `key`
    is the dotted key, empty where none is to blame; `message` says what was expected and what came.
    """

    file: str
    line: int | None
    key: str
    message: str

    def __str__(self) -> str:
        place = self.file if self.line is None else f"{self.file}:{self.line}"
        return ": ".join(part for part in (place, self.key, self.message) if part)


class FileProblems(Exception):  # noqa: N818 - it carries problems, and is named for them
    """A file that cannot be used, with all that is wrong with it, in the order of its lines."""

    def __init__(self, problems: Iterable[Problem]) -> None:
        self.problems = tuple(sorted(problems, key=lambda problem: problem.line or 0))
        super().__init__("\n".join(map(str, self.problems)))

    def __reduce__(self) -> tuple[type["FileProblems"], tuple[tuple[Problem, ...]]]:
        return type(self), (self.problems,)


def did_you_mean(word: str, known: Iterable[str]) -> str:
    """Return the end of a sentence that names the nearest known word, or nothing if none is near.

    A word that lacks only its ending (`rate` for `rate_deg_s`) is near; upper and lower case do not
    matter.
    """
    spelt = {name.casefold(): name for name in known}
    begun = [name for name in spelt if name.startswith(f"{word.casefold()}_")]
    near = begun or get_close_matches(word.casefold(), spelt, n=1, cutoff=0.75)
    return f"; did you mean {spelt[near[0]]!r}?" if near else ""
