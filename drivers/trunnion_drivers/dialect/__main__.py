"""Show a dialect: `trunnion dialect FILE [--first DEG …] [--captured TEXT]`."""

import argparse
import codecs
import sys
from collections.abc import Sequence
from pathlib import Path

from trunnion_drivers.dialect.load import load_dialect
from trunnion_drivers.dialect.numbers import DoesNotFit
from trunnion_drivers.dialect.show import read_lines, sent_lines
from trunnion_drivers.interface.errors import BadSettings
from trunnion_drivers.interface.values import DriverMotion


def main(arguments: Sequence[str] | None = None) -> int:
    """Print what would be sent, or how captured bytes are read; 1 for a file or bytes it cannot."""
    given = _parser().parse_args(arguments)
    try:
        dialect = load_dialect(given.file)
        if given.captured is not None or given.captured_hex is not None:
            lines = list(read_lines(dialect, _captured(given)))
        else:
            motion = DriverMotion(given.first, given.second, given.first_rate, given.second_rate)
            lines = list(sent_lines(dialect, motion))
    except BadSettings as bad:
        sys.stderr.write("".join(f"{problem.reason}\n" for problem in bad.problems))
        return 1
    except (DoesNotFit, ValueError) as error:
        sys.stderr.write(f"{error}\n")
        return 1
    sys.stdout.write("".join(f"{line}\n" for line in lines) or "not understood\n")
    return 0 if lines else 1


def _captured(given: argparse.Namespace) -> bytes:
    if given.captured_hex is not None:
        return bytes.fromhex(given.captured_hex)
    return codecs.decode(given.captured, "unicode_escape").encode("latin-1")


def _parser() -> argparse.ArgumentParser:
    parser = argparse.ArgumentParser(prog="trunnion dialect", description=__doc__)
    parser.add_argument("file", type=Path)
    for name, example in (("first", 12.5), ("second", 33.25)):
        parser.add_argument(f"--{name}", type=float, default=example, help="angle in degrees")
        parser.add_argument(f"--{name}-rate", type=float, default=0.25, help="degrees a second")
    parser.add_argument("--captured", help="an answer as text, with escapes such as \\r\\n")
    parser.add_argument("--captured-hex", help="an answer as bytes in hexadecimal")
    return parser


if __name__ == "__main__":
    sys.exit(main())
