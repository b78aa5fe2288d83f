"""The permission to transmit as a file, for a station to wire up: it expires by itself.

The file holds one line: `forbidden`, or `permitted until_mono_s=1234.567`, seconds of the machine's
monotonic clock (those of `/proc/uptime` on a machine that is never suspended). Whoever reads it
takes a missing file, a past second, or anything else, as forbidden. An interlock that protects
people needs more than a file.
"""

from contextlib import suppress
from pathlib import Path

_RENEWALS_A_VALIDITY = 4
_FORBIDDEN = "forbidden\n"


class PermitFile:
    """Writes the permission; best on a file system in memory. No method raises.

    A permission is good for `validity_s` seconds and renewed in time while it holds; its end is
    written at once.
    """

    def __init__(self, path: Path, validity_s: float) -> None:
        self._path = path
        self._draft = path.with_name(path.name + ".new")
        self._validity_s = validity_s
        self._until_s: float | None = None
        self._trouble: str | None = None
        self._write(_FORBIDDEN)

    @property
    def trouble(self) -> str | None:
        """Why the file could not be written last time; then there is none, which forbids."""
        return self._trouble

    def tell(self, mono_s: float, *, is_permitted: bool) -> None:
        """Take in the permission as it stands at this instant; once a turn."""
        if is_permitted:
            self._permit(mono_s)
        elif self._until_s is not None or self._trouble is not None:
            self.forbid()

    def forbid(self) -> None:
        """Take the permission back now."""
        self._until_s = None
        self._write(_FORBIDDEN)

    def _permit(self, mono_s: float) -> None:
        renewal_s = self._validity_s * (1.0 - 1.0 / _RENEWALS_A_VALIDITY)
        if self._until_s is None or mono_s >= self._until_s - renewal_s:
            self._until_s = mono_s + self._validity_s
            self._write(f"permitted until_mono_s={self._until_s:.3f}\n")

    def _write(self, line: str) -> None:
        try:
            self._draft.write_text(line)
            self._draft.replace(self._path)
            self._trouble = None
        except OSError as error:
            self._trouble = f"cannot write {self._path}: {error.strerror or error}"
            self._until_s = None
            with suppress(OSError):
                self._path.unlink(missing_ok=True)
