"""The event table: events by rows, chosen frames by columns."""

from __future__ import annotations

from typing import Any

from PySide6.QtCore import (
    QAbstractTableModel,
    QItemSelection,
    QItemSelectionModel,
    QModelIndex,
    QPersistentModelIndex,
    QSignalBlocker,
    Qt,
)
from PySide6.QtGui import QGuiApplication, QKeySequence, QShortcut
from PySide6.QtWidgets import (
    QAbstractItemView,
    QComboBox,
    QHBoxLayout,
    QLabel,
    QMenu,
    QTableView,
    QToolButton,
    QVBoxLayout,
    QWidget,
)

from tauline.export.tables import write_table
from tauline.readouts import EventTable, event_table, format_number
from tauline.scenario.units import LENGTH, TIME
from tauline_app.session import Session
from tauline_app.viewing import frame_names

Index = QModelIndex | QPersistentModelIndex
DIGITS = 6


class EventModel(QAbstractTableModel):
    """An event table for a view: two columns to a frame, then the interval's class."""

    def __init__(self, parent: QWidget) -> None:
        super().__init__(parent)
        self.table: EventTable | None = None

    def show(self, table: EventTable) -> None:
        """Take another table."""
        self.beginResetModel()
        self.table = table
        self.endResetModel()

    def rowCount(self, parent: Index | None = None) -> int:  # noqa: N802 - Qt's
        """How many events."""
        nested = parent is not None and parent.isValid()
        return 0 if self.table is None or nested else len(self.table.rows)

    def columnCount(self, parent: Index | None = None) -> int:  # noqa: N802 - Qt's
        """The name, two to each frame, and the class where a reference is chosen."""
        if self.table is None or (parent is not None and parent.isValid()):
            return 0
        return 1 + 2 * len(self.table.frames) + bool(self.table.interval_from)

    def data(self, index: Index, role: int = Qt.ItemDataRole.DisplayRole) -> Any:  # noqa: ANN401
        """A cell: numbers to the right, all digits in the tool tip."""
        if self.table is None or not index.isValid():
            return None
        row, column = self.table.rows[index.row()], index.column()
        if role == Qt.ItemDataRole.TextAlignmentRole and self._is_number(column):
            return int(Qt.AlignmentFlag.AlignRight | Qt.AlignmentFlag.AlignVCenter)
        if role not in (Qt.ItemDataRole.DisplayRole, Qt.ItemDataRole.ToolTipRole):
            return None
        if column == 0:
            return (row.label or row.id) if role == Qt.ItemDataRole.DisplayRole else row.id
        if not self._is_number(column):
            return row.interval_class
        place = row.coordinates[(column - 1) // 2]
        number = place.t if column % 2 else place.x
        if role == Qt.ItemDataRole.ToolTipRole:
            return repr(number)
        return format_number(number + 0.0, DIGITS)

    def headerData(  # noqa: N802 - Qt's
        self,
        section: int,
        orientation: Qt.Orientation,
        role: int = Qt.ItemDataRole.DisplayRole,
    ) -> Any:  # noqa: ANN401
        """Quantity, unit and frame of a column."""
        if self.table is None or orientation != Qt.Orientation.Horizontal:
            return None
        if role == Qt.ItemDataRole.TextAlignmentRole and self._is_number(section):
            return int(Qt.AlignmentFlag.AlignRight | Qt.AlignmentFlag.AlignVCenter)
        if role != Qt.ItemDataRole.DisplayRole:
            return None
        if section == 0:
            return "Event"
        if not self._is_number(section):
            return "Interval"
        frame = self.table.frames[(section - 1) // 2]
        units = self.table.units
        symbol = f"t/{units.symbol(TIME)}" if section % 2 else f"x/{units.symbol(LENGTH)}"
        return f"{symbol}\n{frame.label or frame.id}"

    def _is_number(self, column: int) -> bool:
        return self.table is not None and 1 <= column <= 2 * len(self.table.frames)


class EventsPanel(QWidget):
    """The table, a menu of frames and a reference event."""

    def __init__(self, session: Session, parent: QWidget | None = None) -> None:
        super().__init__(parent)
        self._session = session
        self._frames: tuple[str, ...] | None = None
        self.model = EventModel(self)
        self.view = QTableView()
        self.view.setModel(self.model)
        self.view.setAccessibleName("Event table")
        self.view.setSelectionBehavior(QAbstractItemView.SelectionBehavior.SelectRows)
        self.view.setAlternatingRowColors(True)
        self.view.setShowGrid(False)
        self.view.verticalHeader().hide()
        self.view.verticalHeader().setDefaultSectionSize(24)
        self.view.horizontalHeader().setStretchLastSection(False)
        self.view.horizontalHeader().setHighlightSections(False)
        self.view.selectionModel().selectionChanged.connect(self._rows_selected)
        self.menu = QMenu(self)
        self.menu.aboutToShow.connect(self._list_frames)
        button = QToolButton()
        button.setText("Frames")
        button.setToolTip("Which frames have columns")
        button.setMenu(self.menu)
        button.setPopupMode(QToolButton.ToolButtonPopupMode.InstantPopup)
        self.reference = QComboBox()
        self.reference.setAccessibleName("Event that intervals are classed from")
        self.reference.currentIndexChanged.connect(self.refresh)
        head = QHBoxLayout()
        head.addWidget(button)
        head.addSpacing(12)
        head.addWidget(QLabel("Interval from"))
        head.addWidget(self.reference)
        head.addStretch(1)
        layout = QVBoxLayout(self)
        layout.setContentsMargins(8, 6, 8, 8)
        layout.addLayout(head)
        layout.addWidget(self.view, 1)
        # ahead of the table's own key, which copies the one cell as it is shown
        copy = QShortcut(QKeySequence(QKeySequence.StandardKey.Copy), self)
        copy.setContext(Qt.ShortcutContext.WidgetWithChildrenShortcut)
        copy.activated.connect(self.copy)
        session.document_changed.connect(self.rebuild)
        session.selection_changed.connect(self._follow)
        self.rebuild()

    def rebuild(self) -> None:
        """Follow a changed document: its events to refer to, its frames."""
        resolved = self._session.resolved
        chosen = self.reference.currentData()
        with QSignalBlocker(self.reference):
            self.reference.clear()
            self.reference.addItem("none", "")
            for event in resolved.events.values():
                if not event.owner:
                    self.reference.addItem(event.label or event.id, event.id)
            self.reference.setCurrentIndex(max(0, self.reference.findData(chosen or "")))
        self.refresh()

    def refresh(self) -> None:
        """Tabulate anew."""
        resolved = self._session.resolved
        known = {**resolved.frames, **resolved.leg_frames}
        wanted = tuple(resolved.frames) if self._frames is None else self._frames
        frames = [known[name] for name in wanted if name in known] or [resolved.base]
        self.model.show(event_table(resolved, frames, self.reference.currentData() or ""))
        self.view.resizeColumnsToContents()
        self._follow()

    def choose_frames(self, ids: tuple[str, ...]) -> None:
        """Show the columns of these frames."""
        self._frames = ids
        self.refresh()

    def copy(self) -> None:
        """Put the table on the clipboard as tab-separated text, at full precision.

        As text only: a QMimeData made here can outlive Python on the clipboard, and its end then
        takes the process down.
        """
        assert self.model.table is not None
        QGuiApplication.clipboard().setText(write_table(self.model.table, "tsv"))

    def _list_frames(self) -> None:
        resolved = self._session.resolved
        self.menu.clear()
        shown = [frame.id for frame in self.model.table.frames] if self.model.table else []
        for frame_id, name in frame_names(resolved).items():
            action = self.menu.addAction(name)
            action.setCheckable(True)
            action.setChecked(frame_id in shown)
            action.setData(frame_id)
            action.toggled.connect(self._frames_toggled)

    def _frames_toggled(self) -> None:
        chosen = tuple(str(a.data()) for a in self.menu.actions() if a.isChecked())
        self.choose_frames(chosen)

    def _rows_selected(self) -> None:
        if self.model.table is None:
            return
        rows = sorted({index.row() for index in self.view.selectionModel().selectedRows()})
        chosen = [self.model.table.rows[row].id for row in rows]
        if chosen:
            kept = [name for name in self._session.selection if name in chosen]
            self._session.select([*kept, *(name for name in chosen if name not in kept)])

    def _follow(self) -> None:
        if self.model.table is None:
            return
        selection = QItemSelection()
        for row, item in enumerate(self.model.table.rows):
            if item.id in self._session.selection:
                index = self.model.index(row, 0)
                selection.select(index, index)
        flags = QItemSelectionModel.SelectionFlag
        with QSignalBlocker(self.view.selectionModel()):
            self.view.selectionModel().select(selection, flags.ClearAndSelect | flags.Rows)
        self.view.viewport().update()
