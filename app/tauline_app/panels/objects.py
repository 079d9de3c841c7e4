"""The objects of the scenario, by kind, each with its state."""

from __future__ import annotations

from PySide6.QtCore import QSignalBlocker, Qt
from PySide6.QtGui import QColor, QIcon, QPainter, QPixmap
from PySide6.QtWidgets import QAbstractItemView, QHeaderView, QTreeWidget, QTreeWidgetItem, QWidget

from tauline.figure.drawing import NEUTRAL
from tauline.figure.style import SCREEN_LIGHT, Style
from tauline.figure.symbols import frame_hue
from tauline.resolve.relations import owner_of
from tauline.scenario.objects import kind_of
from tauline_app.session import Session
from tauline_app.theme import hue_colour

KINDS = {
    "frame": "Frames",
    "worldline": "Worldlines",
    "event": "Events",
    "signal": "Signals",
    "pulses": "Pulses",
    "simultaneity": "Simultaneity lines",
    "region": "Regions",
    "body": "Bodies",
    "view": "Views",
}
STATES = {
    "resolved": "",
    "not received": "not received",
    "faulty": "fault",
    "blocked": "waits",
}
ID = Qt.ItemDataRole.UserRole
DOT = 12


class ObjectsPanel(QTreeWidget):
    """A tree of all objects; its selection is the session's."""

    def __init__(self, session: Session, parent: QWidget | None = None) -> None:
        super().__init__(parent)
        self._session = session
        self._style = SCREEN_LIGHT
        self.setColumnCount(2)
        self.setHeaderLabels(["Object", "State"])
        self.setSelectionMode(QAbstractItemView.SelectionMode.ExtendedSelection)
        self.setUniformRowHeights(True)
        self.setIndentation(14)
        self.header().setSectionResizeMode(0, QHeaderView.ResizeMode.Stretch)
        self.header().setSectionResizeMode(1, QHeaderView.ResizeMode.ResizeToContents)
        self.header().setStretchLastSection(False)
        self.setAccessibleName("Objects")
        self.itemSelectionChanged.connect(self._selected)
        session.document_changed.connect(self.rebuild)
        session.selection_changed.connect(self._follow)
        self.rebuild()

    def set_style(self, style: Style) -> None:
        """Show swatches in another style."""
        self._style = style
        self.rebuild()

    def rebuild(self) -> None:
        """List the objects anew."""
        resolved = self._session.resolved
        with QSignalBlocker(self):
            self.clear()
            groups: dict[str, QTreeWidgetItem] = {}
            for thing in resolved.scenario.objects:
                kind = kind_of(thing)
                if kind not in groups:
                    group = QTreeWidgetItem(self, [KINDS.get(kind, kind), ""])
                    group.setFlags(Qt.ItemFlag.ItemIsEnabled)
                    group.setFirstColumnSpanned(True)
                    group.setExpanded(True)
                    groups[kind] = group
                state = resolved.states[thing.id]
                item = QTreeWidgetItem(groups[kind], [thing.label or thing.id, STATES[state]])
                item.setData(0, ID, thing.id)
                item.setToolTip(0, thing.id)
                item.setIcon(0, self._swatch(thing.id, state))
            order = [groups[kind] for kind in KINDS if kind in groups]
            for place, group in enumerate(order):
                now = self.indexOfTopLevelItem(group)
                if now != place:
                    self.takeTopLevelItem(now)
                    self.insertTopLevelItem(place, group)
                    group.setExpanded(True)
        self._follow()

    def item_of(self, object_id: str) -> QTreeWidgetItem | None:
        """The row of an object."""
        for k in range(self.topLevelItemCount()):
            group = self.topLevelItem(k)
            if group is None:
                continue
            for n in range(group.childCount()):
                item = group.child(n)
                if item is not None and item.data(0, ID) == object_id:
                    return item
        return None

    def _follow(self) -> None:
        chosen = {owner_of(name) for name in self._session.selection}
        with QSignalBlocker(self):
            self.clearSelection()
            for name in chosen:
                item = self.item_of(name)
                if item is not None:
                    item.setSelected(True)
                    self.scrollToItem(item)

    def _selected(self) -> None:
        chosen = [str(item.data(0, ID)) for item in self.selectedItems()]
        kept = [name for name in self._session.selection if name in chosen]
        self._session.select([*kept, *(name for name in chosen if name not in kept)])

    def _swatch(self, object_id: str, state: str) -> QIcon:
        """A dot in the object's colour; a cross or a ring where something is wrong with it."""
        resolved = self._session.resolved
        if object_id in resolved.worldlines:
            colour = hue_colour(self._style, resolved.worldlines[object_id].observer)
        elif object_id in resolved.frames:
            colour = hue_colour(self._style, frame_hue(resolved, resolved.frames[object_id]))
        else:
            colour = hue_colour(self._style, NEUTRAL)
        return _dot(colour, state)


def _dot(colour: QColor, state: str) -> QIcon:
    pixmap = QPixmap(2 * DOT, 2 * DOT)
    pixmap.setDevicePixelRatio(2.0)
    pixmap.fill(Qt.GlobalColor.transparent)
    painter = QPainter(pixmap)
    painter.setRenderHint(QPainter.RenderHint.Antialiasing)
    pen = painter.pen()
    pen.setWidthF(1.6)
    pen.setColor(colour)
    painter.setPen(pen)
    if state == "faulty":
        painter.drawLine(3, 3, DOT - 3, DOT - 3)
        painter.drawLine(3, DOT - 3, DOT - 3, 3)
    elif state == "resolved":
        painter.setBrush(colour)
        painter.drawEllipse(3, 3, DOT - 6, DOT - 6)
    else:
        painter.drawEllipse(3, 3, DOT - 6, DOT - 6)
    painter.end()
    return QIcon(pixmap)
