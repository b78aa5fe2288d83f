"""How a target is written: what can be told from the text alone."""

from pathlib import Path

from trunnion.sky.naming import has_meaning, meaning

_FILE = "file:"


def target_file(text: str) -> Path | None:
    """Return the path in a text like `file:orbits/quillon.oem`, or None for another text."""
    return Path(text[len(_FILE) :]) if text.casefold().startswith(_FILE) else None


def is_builtin(text: str) -> bool:
    """Whether the text means a target by itself, without anybody having named one."""
    return has_meaning(text) or target_file(text) is not None


def checked_target(text: str) -> str:
    """Return the text as it is; raises ValueError where the text alone shows that it cannot be."""
    meaning(text)
    if target_file(text) == Path():
        raise ValueError(f"expected a path after {_FILE}, got none")
    return text
