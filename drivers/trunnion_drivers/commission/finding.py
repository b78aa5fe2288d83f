"""What commissioning has found, and the report it makes."""

from collections.abc import Iterable
from dataclasses import dataclass


@dataclass(frozen=True, slots=True)
class Finding:
    """One thing found: good or bad, in a sentence; perhaps with what to write into which key."""

    is_good: bool
    sentence: str
    key: str | None = None
    value: float | str | None = None


def good(sentence: str, key: str | None = None, value: float | str | None = None) -> Finding:
    """Something that is as it should be."""
    return Finding(is_good=True, sentence=sentence, key=key, value=value)


def bad(sentence: str, key: str | None = None, value: float | str | None = None) -> Finding:
    """Something to put right."""
    return Finding(is_good=False, sentence=sentence, key=key, value=value)


def judged(sentence: str, *, is_good: bool) -> Finding:
    """Something that is one or the other."""
    return Finding(is_good, sentence)


def report(title: str, findings: Iterable[Finding]) -> str:
    """The findings in order, then the values they propose."""
    found = tuple(findings)
    lines = [title, "=" * len(title), ""]
    lines += [f"{'ok  ' if each.is_good else 'BAD '} {each.sentence}" for each in found]
    proposals = [each for each in found if each.key is not None]
    if proposals:
        lines += ["", "Proposed for the station file, or the dialect file it names:"]
        lines += [f"  {each.key}: {_shown(each.value)}" for each in proposals]
    wrong = sum(not each.is_good for each in found)
    lines += ["", f"{wrong} to put right" if wrong else "nothing to put right", ""]
    return "\n".join(lines)


def _shown(value: float | str | None) -> str:
    return f"{value:.4g}" if isinstance(value, float) else str(value)
