"""Above the canvas: the rail, and a line to type a velocity in."""

from __future__ import annotations

import msgspec
from PySide6.QtGui import QPalette
from PySide6.QtWidgets import QComboBox, QHBoxLayout, QLabel, QLineEdit, QVBoxLayout, QWidget

from tauline.errors import QuantityError
from tauline.figure.rail import free_frame, typed_rapidity
from tauline.figure.style import Style
from tauline.readouts import format_number
from tauline.readouts.observers import velocity_readouts
from tauline_app.panels.rail import Rail
from tauline_app.session import Session

DIGITS = 5


class ViewBar(QWidget):
    """Says from where the diagram is seen, and changes it."""

    def __init__(self, session: Session, parent: QWidget | None = None) -> None:
        super().__init__(parent)
        self._session = session
        self.rail = Rail(session, self)
        self.velocity = QLineEdit()
        self.velocity.setPlaceholderText("0.6 c, φ = 1.2, …")
        self.velocity.setAccessibleName("Velocity to look from")
        self.velocity.setMaximumWidth(150)
        self.velocity.setToolTip("A velocity relative to the base frame; Enter looks from there")
        self.velocity.returnPressed.connect(self._typed)
        self.fault = QLabel()
        self.where = QLabel()
        self.where.setAccessibleName("Viewing frame")
        self.pivot = QComboBox()
        self.pivot.setAccessibleName("Pivot event")
        self.pivot.setToolTip("The event that keeps its place while the velocity changes")
        self.pivot.setSizeAdjustPolicy(QComboBox.SizeAdjustPolicy.AdjustToContents)
        self.pivot.activated.connect(self._pivot_chosen)
        line = QHBoxLayout()
        line.setContentsMargins(8, 2, 8, 2)
        line.addWidget(self.where, 1)
        line.addWidget(self.fault)
        line.addWidget(QLabel("Pivot"))
        line.addWidget(self.pivot)
        line.addSpacing(10)
        name = QLabel("Look from")
        name.setBuddy(self.velocity)
        line.addWidget(name)
        line.addWidget(self.velocity)
        layout = QVBoxLayout(self)
        layout.setContentsMargins(0, 0, 0, 0)
        layout.setSpacing(0)
        layout.addWidget(self.rail)
        layout.addLayout(line)
        session.view_changed.connect(self.refresh)
        session.document_changed.connect(self._list_pivots)
        self._list_pivots()
        self.refresh()

    def set_style(self, style: Style) -> None:
        """Paint the rail in another style."""
        self.rail.set_style(style)

    def refresh(self) -> None:
        """Say from where the diagram is seen."""
        resolved, frame = self._session.resolved, self._session.view.frame
        numbers = ", ".join(
            f"{item.symbol} = {format_number(item.number, DIGITS)}"
            + (f" {item.unit}" if item.unit else "")
            for item in velocity_readouts(resolved.units, frame.rapidity, resolved.base)
            if item.number is not None
        )
        name = frame.label or frame.id if frame.id else "a velocity of your own"
        self.where.setText(
            f"Seen from <b>{name}</b> &nbsp; {numbers} &nbsp; relative to {resolved.base.label}"
        )

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
        self.rail.look_from(free_frame(self._session.resolved, rapidity))

    def _complain(self, text: str) -> None:
        self.fault.setText(text)
        palette = self.fault.palette()
        palette.setColor(
            QPalette.ColorRole.WindowText, self.palette().color(QPalette.ColorRole.BrightText)
        )
        self.fault.setPalette(palette)
