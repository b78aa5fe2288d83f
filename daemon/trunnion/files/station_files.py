"""Station file: where the other files of the station are."""

from pathlib import Path
from typing import Annotated

from pydantic import BeforeValidator, Field, WithJsonSchema, field_validator

from trunnion.files.control_path import DEFAULT_CONTROL_SOCKET
from trunnion.files.fields import FilePath
from trunnion.files.section import Section

# sun_path of unix(7), less the byte that ends it, less the `.stop` of the stop's own socket
_LONGEST_SOCKET_PATH_BYTES = 107 - len(".stop")


def _one_or_many(value: object) -> object:
    return (value,) if isinstance(value, str) else value


class FilesSection(Section):
    """Paths of the station's other files; a relative one begins at the station file's folder."""

    plan: FilePath = Path("plan.yaml")
    """The pass plan."""
    elements: Annotated[
        tuple[FilePath, ...],
        BeforeValidator(_one_or_many),
        WithJsonSchema(
            {"anyOf": [{"type": "string"}, {"type": "array", "items": {"type": "string"}}]}
        ),
    ] = ()
    """Orbit elements: a file, a folder of them, or a list of both."""
    ephemeris: FilePath | None = None
    """A JPL ephemeris (SPK) for Sun, Moon and planets; without it the built-in series, which are
    good to 1 second of arc for the Sun, 15 for the Moon and 95 for Saturn."""
    records: FilePath = Path("records.sqlite3")
    """The database in which every contact leaves its summary and its samples."""
    records_keep_days: Annotated[float, Field(ge=1)] | None = None
    """Days for which contacts and events stay on record; forever where there is none."""
    records_most_mib: Annotated[int, Field(ge=16, le=1_048_576)] = 512
    """Size of the records in MiB beyond which the oldest samples go; the summaries of their
    contacts stay."""
    latch: FilePath = Path("emergency-stop.latch")
    """The file that remembers an emergency stop over a restart."""
    control_socket: FilePath = Path(DEFAULT_CONTROL_SOCKET)
    """The socket by which `trunnion status`, `stop` and the others reach the running daemon."""
    stop_request: FilePath | None = None
    """A file whose appearance is an emergency stop, which cannot be reset as long as the file is
    there; on a local disk, in a folder that is always there. It stops a controller, not a hazard:
    no substitute for a hard-wired emergency stop."""
    heartbeat: FilePath | None = None
    """A file that somebody outside touches as long as all is well there; on a local disk."""
    transmit_permit: FilePath | None = None
    """A file that says, turn by turn, whether transmitting is permitted, for a station to wire up;
    best on a file system in memory, such as /run. Not an interlock that protects people."""

    @field_validator("control_socket")
    @classmethod
    def _short_enough_for_a_socket(cls, control_socket: Path) -> Path:
        length = len(bytes(control_socket))
        if length > _LONGEST_SOCKET_PATH_BYTES:
            raise ValueError(
                f"expected a path of at most {_LONGEST_SOCKET_PATH_BYTES} bytes, the longest that "
                f"a socket can have, got {length}; give a shorter absolute path"
            )
        return control_socket
