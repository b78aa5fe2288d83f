"""Samples of a contact as comma-separated values (RFC 4180, with plain line ends)."""

import csv
import io
from collections.abc import Iterable, Iterator

from trunnion.service.records.queries import SampleRecord
from trunnion.sky.instants import format_utc


def csv_lines(samples: Iterable[SampleRecord]) -> Iterator[str]:
    """A line of names, then a line a sample, each without its end.

    The first column is UTC in ISO 8601; nothing stands where there was no value.
    """
    yield _line(("utc", *SampleRecord._fields[1:]))
    for sample in samples:
        yield _line((format_utc(sample.utc_s), *sample[1:]))


def _line(values: Iterable[object]) -> str:
    line = io.StringIO()
    csv.writer(line, lineterminator="").writerow(values)
    return line.getvalue()
