"""Small files that are replaced whole, and are on the disk before the call returns."""

import os
from pathlib import Path


def draft_of(path: Path) -> Path:
    """Where the next content of this file is written before it takes the file's place."""
    return path.with_name(path.name + ".new")


def write_durably(path: Path, text: str) -> None:
    """Replace the file's content; raises OSError, and may then leave a draft behind."""
    draft = draft_of(path)
    with draft.open("wb") as file:
        file.write(text.encode(errors="replace"))
        file.flush()
        os.fsync(file.fileno())
    draft.replace(path)
    _flush_folder(path.parent)


def remove_durably(path: Path) -> None:
    """Remove the file and any draft of it, where they are; raises OSError."""
    draft_of(path).unlink(missing_ok=True)
    path.unlink(missing_ok=True)
    _flush_folder(path.parent)


def _flush_folder(folder: Path) -> None:
    opened = os.open(folder, os.O_RDONLY | os.O_DIRECTORY)
    try:
        os.fsync(opened)
    finally:
        os.close(opened)
