"""Text files as text: of bounded size, in UTF-8, with a typed error for everything else."""

from pathlib import Path

from trunnion.files.problems import FileProblems, Problem

_BYTE_ORDER_MARK = "\ufeff"


def read_text(path: Path, limit_bytes: int) -> str:
    """Return the text of a regular file of at most `limit_bytes`, without a byte order mark.

    Raises FileProblems for anything that cannot be read, is larger, or is not UTF-8.
    """
    raw = _read_bytes(path, limit_bytes)
    try:
        return raw.decode("utf-8").removeprefix(_BYTE_ORDER_MARK)
    except UnicodeDecodeError as error:
        line = raw.count(b"\n", 0, error.start) + 1
        got = f"expected text in UTF-8, got the byte 0x{raw[error.start]:02x}"
        raise FileProblems([Problem(str(path), line, "", got)]) from None


def _read_bytes(path: Path, limit_bytes: int) -> bytes:
    if path.exists() and not path.is_file():
        what = "a folder" if path.is_dir() else "a device or a pipe"
        raise FileProblems([Problem(str(path), None, "", f"expected a file, got {what}")])
    try:
        with path.open("rb") as stream:
            raw = stream.read(limit_bytes + 1)
    except FileNotFoundError:
        raise FileProblems([Problem(str(path), None, "", "no such file")]) from None
    except (OSError, ValueError) as error:
        reason = getattr(error, "strerror", None) or str(error)
        raise FileProblems([Problem(str(path), None, "", f"cannot be read: {reason}")]) from None
    if len(raw) > limit_bytes:
        message = f"expected a file of at most {limit_bytes} bytes, got a larger one"
        raise FileProblems([Problem(str(path), None, "", message)])
    return raw
