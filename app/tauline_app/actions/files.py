"""Opening, saving and exporting; each says "" or what went wrong."""

from __future__ import annotations

from collections.abc import Callable
from functools import partial
from pathlib import Path

from tauline.errors import TaulineError
from tauline.export.figure import figure_bytes
from tauline.export.tables import write_table
from tauline.export.text import write_text
from tauline.figure.view import DiagramView
from tauline.files import replace_file
from tauline.readouts import EventTable
from tauline.resolve import Resolved
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


def changed_meanwhile(session: Session, path: Path) -> str:
    """Say so if another program has changed the document's file since it was read; else ""."""
    source = session.source
    if source is None or source.path is None or path != source.path:
        return ""
    try:
        now = path.read_bytes()
    except OSError:
        # nothing there to lose, or saving will say what is the matter
        return ""
    if now == source.text.encode():
        return ""
    return (
        f"{path.name} has been changed by another program since it was opened."
        " Save under another name, or save once more to replace it."
    )


def save_file(session: Session, path: Path) -> str:
    """Save the document, keeping the author's comments and order."""
    try:
        session.saved(save(session.scenario, session.source, path))
    except TaulineError as error:
        return str(error)
    return ""


def figure_task(
    resolved: Resolved,
    view: DiagramView,
    path: Path,
    width_mm: float | None,
    height_mm: float | None,
) -> Callable[[], bytes]:
    """The drawing of a figure file of a view, to be done beside the window."""
    kind = path.suffix.lower().removeprefix(".")
    return partial(figure_bytes, resolved, view, kind, width_mm=width_mm, height_mm=height_mm)


def write_figure(data: bytes, path: Path) -> str:
    """Write a figure file."""
    try:
        replace_file(path, data)
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
