"""Records: what happened in every contact, in one file, written off the control turn."""

from trunnion.service.records.export import csv_lines
from trunnion.service.records.queries import (
    ContactRecord,
    EventRecord,
    NoRecords,
    Records,
    SampleRecord,
)
from trunnion.service.records.store import Retention
from trunnion.service.records.values import ContactStart, EventKind, Outcome, Sample
from trunnion.service.records.writer import RecordWriter

__all__ = [
    "ContactRecord",
    "ContactStart",
    "EventKind",
    "EventRecord",
    "NoRecords",
    "Outcome",
    "RecordWriter",
    "Records",
    "Retention",
    "Sample",
    "SampleRecord",
    "csv_lines",
]
