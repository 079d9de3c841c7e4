"""Asks how large a figure should be, from which frame, and which times it shows."""

from __future__ import annotations

from pathlib import Path

import msgspec
from PySide6.QtCore import Qt
from PySide6.QtWidgets import (
    QComboBox,
    QDialog,
    QDialogButtonBox,
    QDoubleSpinBox,
    QFileDialog,
    QFormLayout,
    QHBoxLayout,
    QLabel,
    QLineEdit,
    QPushButton,
    QVBoxLayout,
    QWidget,
)

from tauline.export.figure import DEFAULT_WIDTH, FORMATS, GREATEST_SIDE, LEAST_SIDE
from tauline.figure.drawing import Window
from tauline.figure.view import DiagramView, default_view
from tauline.scenario.units import TIME
from tauline_app.actions.files import figure_task, write_figure
from tauline_app.dialogs.overwrite import OverwriteGuard
from tauline_app.session import Session
from tauline_app.viewing import frame_names
from tauline_app.worker import Work

AS_SHOWN = "as shown"


class ExportFigureDialog(QDialog):
    """Writes the figure when accepted, and stays open with a message when that fails."""

    def __init__(self, session: Session, parent: QWidget | None = None) -> None:
        super().__init__(parent)
        self.setWindowTitle("Export figure")
        self._session = session
        resolved = session.resolved
        self.frame = QComboBox()
        self.frame.addItem(f"{session.view.frame.label or 'base'} ({AS_SHOWN})", None)
        for frame_id, name in frame_names(resolved).items():
            self.frame.addItem(name, frame_id)
        self.first, self.last = self._number(), self._number()
        self.width_box, self.height_box = _millimetres(DEFAULT_WIDTH), _millimetres(0.0)
        self.file = QLineEdit(self._suggestion())
        self.file.setAccessibleName("File")
        self._guard = OverwriteGuard(session.path)
        self._work: Work | None = None
        self.message = QLabel()
        self.message.setTextFormat(Qt.TextFormat.PlainText)
        self.message.setAccessibleName("Message")
        self.message.setWordWrap(True)
        self._lay_out()
        self._fill_times()
        self.frame.currentIndexChanged.connect(self._fill_times)

    def _lay_out(self) -> None:
        browse = QPushButton("Browse…")
        browse.clicked.connect(self._browse)
        times = QHBoxLayout()
        times.addWidget(self.first)
        times.addWidget(QLabel("to"))
        times.addWidget(self.last)
        file = QHBoxLayout()
        file.addWidget(self.file, 1)
        file.addWidget(browse)
        form = QFormLayout()
        form.addRow("Seen from", self.frame)
        form.addRow("Time window", times)
        form.addRow("Width", self.width_box)
        form.addRow("Height", self.height_box)
        form.addRow("File", file)
        standard = QDialogButtonBox.StandardButton
        self.buttons = QDialogButtonBox(standard.Save | standard.Cancel)
        self.buttons.accepted.connect(self.accept)
        self.buttons.rejected.connect(self.reject)
        layout = QVBoxLayout(self)
        layout.addLayout(form)
        layout.addWidget(
            QLabel("The ending names the format: " + ", ".join(f".{f}" for f in FORMATS))
        )
        layout.addWidget(self.message)
        layout.addWidget(self.buttons)
        self.setMinimumWidth(460)

    def chosen_view(self) -> DiagramView:
        """The view that will be written."""
        session = self._session
        frame_id = self.frame.currentData()
        if frame_id is None:
            view = session.view.diagram_view(session.resolved)
        else:
            view = default_view(session.resolved, frame_id)
            shown = session.view.diagram_view(session.resolved)
            axes = tuple(frame for frame in shown.axes if frame.id != frame_id)
            view = msgspec.structs.replace(view, axes=axes, layers=shown.layers)
        units, w = session.resolved.units, view.window
        t0, t1 = (units.from_reader(box.value(), TIME) for box in (self.first, self.last))
        return msgspec.structs.replace(view, window=Window(w.x0, w.x1, t0, t1))

    def accept(self) -> None:
        """Draw the figure beside the window, then write it; Cancel stops it before that."""
        if self._work is not None:
            return
        view, path = self.chosen_view(), Path(self.file.text()).expanduser()
        fault = self._objection(view, path)
        self.message.setText(fault)
        if fault:
            return
        width, height = (
            box.value() if box.value() >= LEAST_SIDE else None
            for box in (self.width_box, self.height_box)
        )
        self.path = path
        self._wait(Work(figure_task(self._session.resolved, view, path, width, height)))

    def _objection(self, view: DiagramView, path: Path) -> str:
        if view.window.height <= 0.0:
            return "The time window ends before it begins."
        if path.suffix.lower().removeprefix(".") not in FORMATS:
            return "The file's name must end in " + ", ".join(f".{kind}" for kind in FORMATS) + "."
        return self._guard.objection(path)

    def _wait(self, work: Work) -> None:
        self._work = work
        work.done.connect(self._drawn)
        work.failed.connect(self._stay)
        self.buttons.button(QDialogButtonBox.StandardButton.Save).setEnabled(False)
        self.message.setText("Drawing…")
        work.start()

    def _drawn(self, data: bytes) -> None:
        # whoever cancelled wants no file
        if not self.isVisible():
            return
        fault = write_figure(data, self.path)
        if fault:
            self._stay(fault)
            return
        self._work = None
        super().accept()

    def _stay(self, fault: str) -> None:
        self._work = None
        self.buttons.button(QDialogButtonBox.StandardButton.Save).setEnabled(True)
        self.message.setText(fault)

    def _fill_times(self) -> None:
        frame_id = self.frame.currentData()
        resolved = self._session.resolved
        window = (
            self._session.view.window
            if frame_id is None
            else default_view(resolved, frame_id).window
        )
        for box, value in ((self.first, window.t0), (self.last, window.t1)):
            box.setValue(resolved.units.to_reader(value, TIME))

    def _number(self) -> QDoubleSpinBox:
        box = QDoubleSpinBox()
        box.setRange(-1e12, 1e12)
        box.setDecimals(4)
        box.setSuffix(f" {self._session.resolved.units.time}")
        return box

    def _suggestion(self) -> str:
        path = self._session.path
        return str((path or Path("diagram")).with_suffix(".pdf"))

    def _browse(self) -> None:
        kinds = ";;".join(f"{kind.upper()} (*.{kind})" for kind in FORMATS)
        name, _ = QFileDialog.getSaveFileName(self, "Export figure", self.file.text(), kinds)
        if name:
            self.file.setText(name)
            self._guard.agree(Path(name))


def _millimetres(value: float) -> QDoubleSpinBox:
    box = QDoubleSpinBox()
    box.setDecimals(1)
    box.setSuffix(" mm")
    box.setRange(LEAST_SIDE - 1.0, GREATEST_SIDE)
    box.setSpecialValueText("follows from the other")
    box.setValue(value)
    return box
