"""The main window: puts the panels around the canvas and hands actions to them."""

from __future__ import annotations

from pathlib import Path

from PySide6.QtCore import QSize, Qt
from PySide6.QtGui import QCloseEvent, QDragEnterEvent, QDropEvent, QGuiApplication
from PySide6.QtWidgets import (
    QDialog,
    QDockWidget,
    QFileDialog,
    QLabel,
    QMainWindow,
    QMessageBox,
    QVBoxLayout,
    QWidget,
)

from tauline.readouts import format_number
from tauline.scenario.units import LENGTH, TIME
from tauline_app.actions.files import changed_meanwhile, open_file, save_file
from tauline_app.banner import Banner
from tauline_app.canvas.canvas import Canvas
from tauline_app.dialogs.export_figure import ExportFigureDialog
from tauline_app.dialogs.export_table import ExportTableDialog
from tauline_app.menus import Menus
from tauline_app.panels.events import EventsPanel
from tauline_app.panels.objects import ObjectsPanel
from tauline_app.panels.problems import ProblemsPanel
from tauline_app.panels.properties import PropertiesPanel
from tauline_app.panels.readouts import ReadoutsPanel
from tauline_app.panels.viewbar import ViewBar
from tauline_app.session import Session
from tauline_app.settings import Settings
from tauline_app.theme import Scheme, apply_scheme

SCENARIOS = "Scenarios (*.toml);;All files (*)"
LAYOUT = "window/state-1"
GEOMETRY = "window/geometry"
POINTER_DIGITS = 4


class MainWindow(QMainWindow):
    """One document in one window."""

    def __init__(self) -> None:
        super().__init__()
        self.session = Session(self)
        self.settings = Settings()
        self.canvas = Canvas(self.session, self)
        self.view_bar = ViewBar(self.session, self)
        self.banner = Banner(self)
        self.objects = ObjectsPanel(self.session, self)
        self.properties = PropertiesPanel(self.session, self)
        self.readouts = ReadoutsPanel(self.session, self)
        self.events = EventsPanel(self.session, self)
        self.problems = ProblemsPanel(self.session, self)
        self._lay_out()
        self.menus = Menus(self)
        self._pointer, self._status = QLabel(), QLabel()
        self._pointer.setContentsMargins(8, 0, 0, 0)
        self._pointer.setAccessibleName("Place under the pointer")
        self.statusBar().addWidget(self._pointer)
        self.statusBar().addPermanentWidget(self._status)
        self.canvas.pointed_at.connect(self._point_at)
        # what was under the pointer is not there any more
        self.session.view_changed.connect(self._pointer.clear)
        QGuiApplication.styleHints().colorSchemeChanged.connect(self._system_scheme_changed)
        self.setAcceptDrops(True)
        self.session.document_changed.connect(self._follow)
        self.session.selection_changed.connect(self._follow)
        self.set_scheme(self.settings.scheme)
        self._restore()
        self._follow()

    def _lay_out(self) -> None:
        middle = QWidget(self)
        layout = QVBoxLayout(middle)
        layout.setContentsMargins(0, 0, 0, 0)
        layout.setSpacing(0)
        layout.addWidget(self.view_bar)
        layout.addWidget(self.banner)
        layout.addWidget(self.canvas, 1)
        self.setCentralWidget(middle)
        left, right = Qt.DockWidgetArea.LeftDockWidgetArea, Qt.DockWidgetArea.RightDockWidgetArea
        bottom = Qt.DockWidgetArea.BottomDockWidgetArea
        self.docks = {
            name: self._dock(name, widget, area)
            for name, widget, area in (
                ("Objects", self.objects, left),
                ("Readouts", self.readouts, right),
                ("Properties", self.properties, right),
                ("Events", self.events, bottom),
                ("Problems", self.problems, bottom),
            )
        }
        self.tabifyDockWidget(self.docks["Events"], self.docks["Problems"])
        self.docks["Events"].raise_()
        self.setCorner(Qt.Corner.BottomLeftCorner, left)
        self.setCorner(Qt.Corner.BottomRightCorner, right)
        self.resize(QSize(1360, 860))
        self.resizeDocks(
            [self.docks["Objects"], self.docks["Readouts"]], [212, 368], Qt.Orientation.Horizontal
        )
        self.resizeDocks([self.docks["Events"]], [230], Qt.Orientation.Vertical)

    def _dock(self, name: str, widget: QWidget, area: Qt.DockWidgetArea) -> QDockWidget:
        dock = QDockWidget(name, self)
        dock.setObjectName(f"dock-{name.lower()}")
        dock.setWidget(widget)
        self.addDockWidget(area, dock)
        return dock

    def set_scheme(self, scheme: Scheme) -> None:
        """Colour everything light, dark, or as the system has it."""
        self.settings.scheme = scheme
        style = apply_scheme(scheme)
        for part in (self.canvas, self.view_bar, self.objects):
            part.set_style(style)

    def _system_scheme_changed(self) -> None:
        if self.settings.scheme is Scheme.SYSTEM:
            self.set_scheme(Scheme.SYSTEM)

    # --- files --------------------------------------------------------------------------------

    def open_path(self, path: Path) -> bool:
        """Open a file, once unsaved changes are dealt with; a message where that fails."""
        if not self._may_leave():
            return False
        fault = open_file(self.session, path)
        if fault:
            self.banner.say(fault)
            return False
        self.banner.hide()
        self.settings.opened(path)
        self.docks["Problems" if self.session.resolved.faults else "Events"].raise_()
        return True

    def ask_open(self) -> None:
        """Ask for a file to open."""
        folder = str(self.session.path.parent) if self.session.path else ""
        name, _ = QFileDialog.getOpenFileName(self, "Open scenario", folder, SCENARIOS)
        if name:
            self.open_path(Path(name))

    def save(self) -> bool:
        """Save to the document's file; ask for one if it has none."""
        return self.save_to(self.session.path) if self.session.path else self.ask_save()

    def ask_save(self) -> bool:
        """Ask where to save."""
        suggested = str(self.session.path or "scenario.toml")
        name, _ = QFileDialog.getSaveFileName(self, "Save scenario as", suggested, SCENARIOS)
        return bool(name) and self.save_to(Path(name))

    def save_to(self, path: Path) -> bool:
        """Save to a file; a message where that fails, or once if it has changed meanwhile."""
        warning = changed_meanwhile(self.session, path)
        if warning and warning != self.banner.message:
            self.banner.say(warning)
            return False
        fault = save_file(self.session, path)
        if fault:
            self.banner.say(fault)
            return False
        self.banner.hide()
        self.settings.opened(path)
        self.statusBar().showMessage(f"Saved {path.name}", 4000)
        return True

    def export_figure(self) -> None:
        """Ask how, and write a figure."""
        self._ask(ExportFigureDialog(self.session, self))

    def export_table(self) -> None:
        """Ask how, and write the event table."""
        reference = str(self.events.reference.currentData() or "")
        self._ask(ExportTableDialog(self.session, reference, self))

    def _ask(self, dialog: QDialog) -> None:
        dialog.setAttribute(Qt.WidgetAttribute.WA_DeleteOnClose)
        dialog.accepted.connect(lambda: self.statusBar().showMessage("Exported", 4000))
        dialog.open()

    def _may_leave(self) -> bool:
        """Ask what becomes of unsaved changes; False to stay."""
        if not self.session.is_modified:
            return True
        buttons = QMessageBox.StandardButton
        answer = QMessageBox.question(
            self,
            "Unsaved changes",
            "The scenario has changes that are not saved.",
            buttons.Save | buttons.Discard | buttons.Cancel,
            buttons.Save,
        )
        if answer == buttons.Save:
            return self.save()
        return answer == buttons.Discard

    # --- Qt -----------------------------------------------------------------------------------

    def closeEvent(self, event: QCloseEvent) -> None:  # noqa: N802 - Qt's
        """Keep the layout; ask about unsaved changes."""
        if not self._may_leave():
            event.ignore()
            return
        self.settings.keep_layout(LAYOUT, self.saveState())
        self.settings.keep_layout(GEOMETRY, self.saveGeometry())
        event.accept()

    def dragEnterEvent(self, event: QDragEnterEvent) -> None:  # noqa: N802 - Qt's
        """Take a dragged file."""
        if event.mimeData().hasUrls():
            event.acceptProposedAction()

    def dropEvent(self, event: QDropEvent) -> None:  # noqa: N802 - Qt's
        """Open a dropped file."""
        files = [Path(url.toLocalFile()) for url in event.mimeData().urls() if url.isLocalFile()]
        if files:
            event.acceptProposedAction()
            self.open_path(files[0])

    def _restore(self) -> None:
        geometry, layout = self.settings.layout(GEOMETRY), self.settings.layout(LAYOUT)
        if geometry is not None:
            self.restoreGeometry(geometry)
        if layout is not None:
            self.restoreState(layout)

    def _point_at(self, place: tuple[float, float] | None) -> None:
        """Say which event the pointer is at, in the viewing frame."""
        text = ""
        if place is not None:
            resolved, frame = self.session.resolved, self.session.view.frame
            units = resolved.units
            t = format_number(units.to_reader(place[1], TIME), POINTER_DIGITS)
            x = format_number(units.to_reader(place[0], LENGTH), POINTER_DIGITS)
            text = (
                f"t = {t} {units.symbol(TIME)}, x = {x} {units.symbol(LENGTH)}"
                f" in {frame.label or frame.id}"
            )
        self._pointer.setText(text)

    def _follow(self) -> None:
        session = self.session
        name = session.path.name if session.path else "untitled"
        title = f"{session.scenario.title} – {name}" if session.scenario.title else name
        self.setWindowTitle(f"{title}[*] – Tauline")
        self.setWindowModified(session.is_modified)
        resolved = session.resolved
        count = len(resolved.faults)
        faults = _counted(count, "fault") if count else "no faults"
        self._status.setText(
            f"{_counted(len(resolved.events), 'event')},"
            f" {_counted(len(resolved.worldlines), 'worldline')}, {faults}"
        )
        label = f"Problems ({count})" if count else "Problems"
        self.docks["Problems"].setWindowTitle(label)


def _counted(number: int, noun: str) -> str:
    return f"{number} {noun}" if number == 1 else f"{number} {noun}s"
