"""Opening, saving and exporting; each returns "" or what went wrong."""

from __future__ import annotations

from pathlib import Path

from tauline.errors import TaulineError
from tauline.export.figure import figure_bytes
from tauline.export.tables import write_table
from tauline.export.text import write_text
from tauline.figure.view import DiagramView
from tauline.files import replace_file
from tauline.readouts import EventTable
from tauline.scenario.read import read
from tauline.scenario.write import save
from tauline_app.session import Session


def open_file(session: Session, path: Path) -> str:
    """Open a scenario; the document there was stays if that fails."""
    try:
        session.load(read(path))
    except TaulineError as error:
        return str(error)
    return ""


def save_file(session: Session, path: Path) -> str:
    """Save the document, keeping the author's comments and order."""
    try:
        session.saved(save(session.scenario, session.source, path))
    except TaulineError as error:
        return str(error)
    return ""


def export_figure(
    session: Session,
    view: DiagramView,
    path: Path,
    width_mm: float | None,
    height_mm: float | None,
) -> str:
    """Write a figure of a view."""
    kind = path.suffix.lower().removeprefix(".")
    try:
        data = figure_bytes(session.resolved, view, kind, width_mm=width_mm, height_mm=height_mm)
        replace_file(path, data)
    except TaulineError as error:
        return str(error)
    except OSError as error:
        return f"{path} cannot be written: {error.strerror or error}"
    return ""


def export_table(table: EventTable, form: str, path: Path) -> str:
    """Write an event table."""
    try:
        write_text(path, write_table(table, form))
    except TaulineError as error:
        return str(error)
    return ""
