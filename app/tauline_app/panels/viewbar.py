"""Above the canvas: the rail, and a line to type a velocity in."""

from __future__ import annotations

import msgspec
from PySide6.QtCore import Qt
from PySide6.QtGui import QPalette, QResizeEvent
from PySide6.QtWidgets import (
    QBoxLayout,
    QComboBox,
    QHBoxLayout,
    QLabel,
    QLineEdit,
    QSizePolicy,
    QVBoxLayout,
    QWidget,
)

from tauline.errors import QuantityError
from tauline.figure.rail import typed_rapidity
from tauline.figure.style import Style
from tauline.readouts import format_number
from tauline.readouts.observers import velocity_readouts
from tauline_app.panels.rail import Rail
from tauline_app.panels.text import plain
from tauline_app.session import Session
from tauline_app.viewing import frame_at

DIGITS = 4
ROOM_FOR_ONE_LINE = 750


class ViewBar(QWidget):
    """Says from where the diagram is seen, and changes it."""

    def __init__(self, session: Session, parent: QWidget | None = None) -> None:
        super().__init__(parent)
        self._session = session
        self.rail = Rail(session, self)
        self.velocity = QLineEdit()
        self.velocity.setPlaceholderText("0.6 c, φ = 1.2")
        self.velocity.setAccessibleName("Velocity to look from")
        self.velocity.setFixedWidth(108)
        self.velocity.setToolTip("A velocity relative to the base frame; Enter looks from there")
        self.velocity.returnPressed.connect(self._typed)
        self.velocity.textEdited.connect(lambda: self._complain(""))
        self.fault = QLabel()
        self.fault.setTextFormat(Qt.TextFormat.PlainText)
        self.fault.setWordWrap(True)
        self.fault.setAlignment(Qt.AlignmentFlag.AlignRight)
        self.fault.setContentsMargins(8, 0, 8, 3)
        self.fault.hide()
        self.where = QLabel()
        # clipped in a narrow window rather than keeping the window wide; the tool tip has it all
        self.where.setSizePolicy(QSizePolicy.Policy.Ignored, QSizePolicy.Policy.Preferred)
        self.where.setAccessibleName("Viewing frame")
        self.pivot = QComboBox()
        self.pivot.setAccessibleName("Pivot event")
        self.pivot.setToolTip("The event that keeps its place while the velocity changes")
        self.pivot.setSizeAdjustPolicy(
            QComboBox.SizeAdjustPolicy.AdjustToMinimumContentsLengthWithIcon
        )
        self.pivot.setMinimumContentsLength(7)
        self.pivot.activated.connect(self._pivot_chosen)
        controls = QHBoxLayout()
        controls.setSpacing(7)
        controls.addStretch(1)
        controls.addWidget(QLabel("Pivot"))
        controls.addWidget(self.pivot)
        controls.addSpacing(8)
        name = QLabel("Look from")
        name.setBuddy(self.velocity)
        controls.addWidget(name)
        controls.addWidget(self.velocity)
        self._line = QBoxLayout(QBoxLayout.Direction.LeftToRight)
        self._line.setContentsMargins(8, 3, 8, 3)
        self._line.setSpacing(5)
        self._line.addWidget(self.where, 1)
        self._line.addLayout(controls)
        layout = QVBoxLayout(self)
        layout.setContentsMargins(0, 0, 0, 0)
        layout.setSpacing(0)
        layout.addWidget(self.rail)
        layout.addLayout(self._line)
        layout.addWidget(self.fault)
        session.view_changed.connect(self.refresh)
        session.document_changed.connect(self._list_pivots)
        self._list_pivots()
        self.refresh()

    def set_style(self, style: Style) -> None:
        """Paint the rail in another style."""
        self.rail.set_style(style)

    def resizeEvent(self, event: QResizeEvent) -> None:  # noqa: N802 - Qt's
        """Set the controls below the frame where there is no room beside it."""
        super().resizeEvent(event)
        direction = QBoxLayout.Direction
        narrow = event.size().width() < ROOM_FOR_ONE_LINE
        self._line.setDirection(direction.TopToBottom if narrow else direction.LeftToRight)

    def refresh(self) -> None:
        """Say from where the diagram is seen."""
        resolved, frame = self._session.resolved, self._session.view.frame
        numbers = ", ".join(
            f"{item.symbol} = {format_number(item.number, DIGITS)}"
            + (f" {item.unit}" if item.unit else "")
            for item in velocity_readouts(resolved.units, frame.rapidity, resolved.base)
            if item.number is not None
        )
        name = frame.label or frame.id if frame.id else "a free frame"
        base = resolved.base.label or resolved.base.id
        self.where.setText(f"Seen from <b>{plain(name)}</b>: {numbers} rel. to {plain(base)}")
        self.where.setToolTip(f"Seen from {plain(name)}: {numbers} relative to {plain(base)}")

    def _list_pivots(self) -> None:
        self.pivot.clear()
        self.pivot.addItem("origin", "")
        for event in self._session.resolved.events.values():
            if not event.owner:
                self.pivot.addItem(event.label or event.id, event.id)
        self.pivot.setCurrentIndex(max(0, self.pivot.findData(self._session.view.pivot)))

    def _pivot_chosen(self) -> None:
        chosen = str(self.pivot.currentData() or "")
        self._session.set_view(msgspec.structs.replace(self._session.view, pivot=chosen))

    def _typed(self) -> None:
        try:
            rapidity = typed_rapidity(self.velocity.text(), self._session.resolved)
        except QuantityError as error:
            self._complain(str(error))
            return
        self._complain("")
        self.rail.look_from(frame_at(self._session.resolved, rapidity))

    def _complain(self, text: str) -> None:
        self.fault.setText(text)
        self.fault.setVisible(bool(text))
        palette = self.fault.palette()
        palette.setColor(
            QPalette.ColorRole.WindowText, self.palette().color(QPalette.ColorRole.BrightText)
        )
        self.fault.setPalette(palette)
