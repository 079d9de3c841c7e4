"""Numbers for the reader: readouts with their working, and the event table."""

from tauline.readouts.event_table import EventTable, chosen_frames, event_table
from tauline.readouts.inspection import diagnosis_line, has_fault, inspection
from tauline.readouts.readout import Readout, Working, format_number
from tauline.readouts.select import find, readouts_for

__all__ = [
    "EventTable",
    "Readout",
    "Working",
    "chosen_frames",
    "diagnosis_line",
    "event_table",
    "find",
    "format_number",
    "has_fault",
    "inspection",
    "readouts_for",
]
