"""What there is to say of the selection, in numbers."""

from __future__ import annotations

from PySide6.QtCore import Qt
from PySide6.QtGui import QGuiApplication, QKeySequence, QShortcut
from PySide6.QtWidgets import (
    QAbstractItemView,
    QHBoxLayout,
    QHeaderView,
    QLabel,
    QSpinBox,
    QTableWidget,
    QTableWidgetItem,
    QVBoxLayout,
    QWidget,
)

from tauline.readouts import Readout, readouts_for
from tauline_app.session import Session

LEAST_VALUE, LEAST_FRAME, GREATEST_FRAME = 104, 60, 130
CELL_PADDING = 16
HINT = "Select an event, a worldline or a signal; with Shift or Ctrl, a second one."


class ReadoutsPanel(QWidget):
    """A table of readouts: quantity, value with its unit, frame."""

    def __init__(self, session: Session, parent: QWidget | None = None) -> None:
        super().__init__(parent)
        self._session = session
        self.readouts: tuple[Readout, ...] = ()
        self._hint = QLabel(HINT)
        self._hint.setWordWrap(True)
        self._hint.setAlignment(Qt.AlignmentFlag.AlignTop)
        self._digits = QSpinBox()
        self._digits.setRange(2, 16)
        self._digits.setValue(6)
        self._digits.setAccessibleName("Digits shown")
        self._digits.setToolTip("Significant digits shown; copies carry all of them")
        self.table = QTableWidget(0, 3)
        self.table.setHorizontalHeaderLabels(["Quantity", "Value", "Frame"])
        self.table.setAccessibleName("Readouts")
        self.table.setEditTriggers(QAbstractItemView.EditTrigger.NoEditTriggers)
        self.table.setSelectionBehavior(QAbstractItemView.SelectionBehavior.SelectRows)
        self.table.setShowGrid(False)
        self.table.setAlternatingRowColors(True)
        self.table.setWordWrap(True)
        self.table.verticalHeader().hide()
        self.table.verticalHeader().setSectionResizeMode(QHeaderView.ResizeMode.ResizeToContents)
        header = self.table.horizontalHeader()
        header.setHighlightSections(False)
        header.setDefaultAlignment(Qt.AlignmentFlag.AlignLeft | Qt.AlignmentFlag.AlignVCenter)
        right = Qt.AlignmentFlag.AlignRight | Qt.AlignmentFlag.AlignVCenter
        value_head = QTableWidgetItem("Value")
        value_head.setTextAlignment(right)
        self.table.setHorizontalHeaderItem(1, value_head)
        header.setMinimumSectionSize(60)
        header.setSectionResizeMode(0, QHeaderView.ResizeMode.Stretch)
        header.setSectionResizeMode(1, QHeaderView.ResizeMode.Interactive)
        header.setSectionResizeMode(2, QHeaderView.ResizeMode.Interactive)
        head = QHBoxLayout()
        self.title = QLabel()
        self.title.setWordWrap(True)
        self.title.setTextFormat(Qt.TextFormat.PlainText)
        head.addWidget(self.title, 1)
        head.addWidget(QLabel("Digits"))
        head.addWidget(self._digits)
        layout = QVBoxLayout(self)
        layout.setContentsMargins(8, 6, 8, 8)
        layout.addLayout(head)
        layout.addWidget(self._hint)
        layout.addWidget(self.table, 1)
        # ahead of the table's own key, which copies the one cell as it is shown
        copy = QShortcut(QKeySequence(QKeySequence.StandardKey.Copy), self)
        copy.setContext(Qt.ShortcutContext.WidgetWithChildrenShortcut)
        copy.activated.connect(self.copy)
        self._digits.valueChanged.connect(self._fill)
        session.selection_changed.connect(self.refresh)
        session.document_changed.connect(self.refresh)
        session.view_changed.connect(self.refresh)
        self.refresh()

    def refresh(self) -> None:
        """Work out the readouts of the selection anew."""
        session = self._session
        found = readouts_for(session.resolved, session.selection, session.view.frame)
        if found != self.readouts or not found:
            self.readouts = found
            self._fill()
        names = [self._name(name) for name in session.selection[-2:]]
        self.title.setText(" → ".join(names))

    def copy(self) -> None:
        """Put the selected rows (or all) on the clipboard: numbers at full precision."""
        rows = sorted({index.row() for index in self.table.selectedIndexes()})
        chosen = [self.readouts[row] for row in rows] or list(self.readouts)
        if len(chosen) == 1:
            text = chosen[0].full()
        else:
            text = "\n".join(f"{r.name}\t{r.full()}\t{r.unit}\t{r.frame}" for r in chosen)
        QGuiApplication.clipboard().setText(text)

    def _name(self, some_id: str) -> str:
        resolved = self._session.resolved
        event = resolved.events.get(some_id)
        thing = resolved.scenario.find(some_id)
        label = thing.label if thing is not None else event.label if event is not None else ""
        return label or some_id

    def _fill(self) -> None:
        self._hint.setVisible(not self.readouts)
        self.table.setVisible(bool(self.readouts))
        self.table.setRowCount(len(self.readouts))
        for row, item in enumerate(self.readouts):
            symbol = f"  {item.symbol}" if item.symbol else ""
            cells = (item.name + symbol, item.text(self._digits.value()), item.frame or "any")
            for column, text in enumerate(cells):
                cell = QTableWidgetItem(text)
                cell.setToolTip(str(item.working) if item.working else text)
                if column == 1 and item.number is not None:
                    cell.setTextAlignment(
                        Qt.AlignmentFlag.AlignRight | Qt.AlignmentFlag.AlignVCenter
                    )
                self.table.setItem(row, column, cell)
        metrics = self.table.fontMetrics()
        numbers = [r.text(self._digits.value()) for r in self.readouts if r.number is not None]
        widest = max(map(metrics.horizontalAdvance, numbers), default=0) + CELL_PADDING
        frames = self.table.sizeHintForColumn(2) + 4
        self.table.setColumnWidth(1, max(widest, LEAST_VALUE))
        self.table.setColumnWidth(2, min(max(frames, LEAST_FRAME), GREATEST_FRAME))
