"""Bytes as they come, into whole lines, within bounds. No I/O."""


class LineTooLong(Exception):  # noqa: N818 - named for what happened
    """More bytes came without an end of line than a line may have."""


class LineBuffer:
    """Keeps the beginning of a line until its end comes."""

    def __init__(self, longest_bytes: int) -> None:
        self._longest_bytes = longest_bytes
        self._kept = bytearray()

    def add(self, data: bytes) -> None:
        """Take in what came, in pieces of any size."""
        self._kept += data

    def next_line(self) -> bytes | None:
        """The next whole line without its end, None when there is none yet; raises LineTooLong."""
        end = self._kept.find(b"\n")
        if (end if end >= 0 else len(self._kept)) > self._longest_bytes:
            raise LineTooLong(f"a line of more than {self._longest_bytes} bytes")
        if end < 0:
            return None
        line = bytes(self._kept[:end])
        del self._kept[: end + 1]
        return line.removesuffix(b"\r")
