"""Asks for the frames and the format of an event table."""

from __future__ import annotations

from pathlib import Path

from PySide6.QtCore import Qt
from PySide6.QtWidgets import (
    QComboBox,
    QDialog,
    QDialogButtonBox,
    QFileDialog,
    QFormLayout,
    QHBoxLayout,
    QLabel,
    QLineEdit,
    QListWidget,
    QListWidgetItem,
    QPushButton,
    QVBoxLayout,
    QWidget,
)

from tauline.readouts import chosen_frames, event_table
from tauline_app.actions.files import export_table
from tauline_app.dialogs.overwrite import OverwriteGuard
from tauline_app.session import Session
from tauline_app.viewing import frame_names

FORMATS = {
    "csv": ("CSV (spreadsheet)", ".csv"),
    "md": ("Markdown", ".md"),
    "latex": ("LaTeX (booktabs, siunitx)", ".tex"),
    "html": ("HTML", ".html"),
    "json": ("JSON (all digits)", ".json"),
}


class ExportTableDialog(QDialog):
    """Writes the table when accepted, and stays open with a message when that fails."""

    def __init__(self, session: Session, reference: str, parent: QWidget | None = None) -> None:
        super().__init__(parent)
        self.setWindowTitle("Export event table")
        self._session = session
        self._reference = reference
        self.frames = QListWidget()
        self.frames.setAccessibleName("Frames with columns")
        resolved = session.resolved
        for frame_id, name in frame_names(resolved).items():
            item = QListWidgetItem(name, self.frames)
            item.setData(Qt.ItemDataRole.UserRole, frame_id)
            declared = frame_id in resolved.frames
            item.setCheckState(Qt.CheckState.Checked if declared else Qt.CheckState.Unchecked)
        self.form = QComboBox()
        for name, (label, _) in FORMATS.items():
            self.form.addItem(label, name)
        self.file = QLineEdit(str((session.path or Path("events")).with_suffix(".csv")))
        self.file.setAccessibleName("File")
        self._guard = OverwriteGuard(session.path)
        self.message = QLabel()
        self.message.setTextFormat(Qt.TextFormat.PlainText)
        self.message.setAccessibleName("Message")
        self.message.setWordWrap(True)
        self._lay_out()
        self.form.currentIndexChanged.connect(self._end_in)

    def _lay_out(self) -> None:
        browse = QPushButton("Browse…")
        browse.clicked.connect(self._browse)
        file = QHBoxLayout()
        file.addWidget(self.file, 1)
        file.addWidget(browse)
        form = QFormLayout()
        form.addRow("Frames", self.frames)
        form.addRow("Format", self.form)
        form.addRow("File", file)
        buttons = QDialogButtonBox(
            QDialogButtonBox.StandardButton.Save | QDialogButtonBox.StandardButton.Cancel
        )
        buttons.accepted.connect(self.accept)
        buttons.rejected.connect(self.reject)
        layout = QVBoxLayout(self)
        layout.addLayout(form)
        layout.addWidget(self.message)
        layout.addWidget(buttons)
        self.setMinimumWidth(460)

    def accept(self) -> None:
        """Write the table."""
        items = (self.frames.item(k) for k in range(self.frames.count()))
        ids = [
            str(item.data(Qt.ItemDataRole.UserRole))
            for item in items
            if item.checkState() == Qt.CheckState.Checked
        ]
        if not ids:
            self.message.setText("Tick at least one frame.")
            return
        resolved = self._session.resolved
        table = event_table(resolved, chosen_frames(resolved, ids), self._reference)
        path = Path(self.file.text()).expanduser()
        fault = self._guard.objection(path)
        if not fault:
            fault = export_table(table, str(self.form.currentData()), path)
        self.message.setText(fault)
        if not fault:
            super().accept()

    def _end_in(self) -> None:
        ending = FORMATS[str(self.form.currentData())][1]
        self.file.setText(str(Path(self.file.text()).with_suffix(ending)))

    def _browse(self) -> None:
        label, ending = FORMATS[str(self.form.currentData())]
        name, _ = QFileDialog.getSaveFileName(
            self, "Export event table", self.file.text(), f"{label} (*{ending})"
        )
        if name:
            self.file.setText(name)
            self._guard.agree(Path(name))
