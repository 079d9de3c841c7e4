"""What is wrong with the scenario, where, and how to mend it."""

from __future__ import annotations

from PySide6.QtCore import Qt
from PySide6.QtWidgets import (
    QAbstractItemView,
    QHeaderView,
    QTableWidget,
    QTableWidgetItem,
    QWidget,
)

from tauline.scenario.diagnosis import Severity
from tauline_app.session import Session

WEIGHTS = {
    Severity.ERROR: "✕ fault",
    Severity.CONSEQUENCE: "↳ follows",
    Severity.NOTE: "• note",
}


class ProblemsPanel(QTableWidget):
    """One row to a diagnosis; choosing it selects the object."""

    def __init__(self, session: Session, parent: QWidget | None = None) -> None:
        super().__init__(0, 4, parent)
        self._session = session
        self.setHorizontalHeaderLabels(["", "Where", "What", "How to mend it"])
        self.setAccessibleName("Problems")
        self.setEditTriggers(QAbstractItemView.EditTrigger.NoEditTriggers)
        self.setSelectionBehavior(QAbstractItemView.SelectionBehavior.SelectRows)
        self.setShowGrid(False)
        self.setWordWrap(True)
        self.verticalHeader().hide()
        self.verticalHeader().setSectionResizeMode(QHeaderView.ResizeMode.ResizeToContents)
        header = self.horizontalHeader()
        header.setHighlightSections(False)
        header.setDefaultAlignment(Qt.AlignmentFlag.AlignLeft | Qt.AlignmentFlag.AlignVCenter)
        for column, mode in enumerate(
            (
                QHeaderView.ResizeMode.ResizeToContents,
                QHeaderView.ResizeMode.ResizeToContents,
                QHeaderView.ResizeMode.Stretch,
                QHeaderView.ResizeMode.Stretch,
            )
        ):
            header.setSectionResizeMode(column, mode)
        self.itemSelectionChanged.connect(self._chosen)
        session.document_changed.connect(self.refresh)
        self.refresh()

    def refresh(self) -> None:
        """List the diagnoses anew."""
        diagnoses = self._session.resolved.diagnoses
        source = self._session.source
        self.setRowCount(len(diagnoses))
        for row, item in enumerate(diagnoses):
            line = source.line_of(item.object, item.key) if source is not None else None
            place = " ".join(part for part in (item.object, item.key) if part)
            where = f"{place}, line {line}" if line else place
            for column, text in enumerate((WEIGHTS[item.severity], where, item.message, item.hint)):
                cell = QTableWidgetItem(text)
                cell.setToolTip(text)
                self.setItem(row, column, cell)

    def _chosen(self) -> None:
        rows = {index.row() for index in self.selectedIndexes()}
        diagnoses = self._session.resolved.diagnoses
        names = [diagnoses[row].object for row in sorted(rows) if row < len(diagnoses)]
        known = [name for name in names if name in self._session.resolved.states]
        if known:
            self._session.select(known)
