"""A line above the canvas that says what went wrong, and goes away by itself or by its button."""

from __future__ import annotations

from PySide6.QtCore import Qt
from PySide6.QtGui import QPalette
from PySide6.QtWidgets import QFrame, QHBoxLayout, QLabel, QToolButton, QWidget


class Banner(QFrame):
    """Shows one message at a time; never in the way of the work."""

    def __init__(self, parent: QWidget | None = None) -> None:
        super().__init__(parent)
        self.setFrameShape(QFrame.Shape.StyledPanel)
        self.setAutoFillBackground(True)
        self._text = QLabel()
        self._text.setWordWrap(True)
        self._text.setTextFormat(Qt.TextFormat.PlainText)
        self._text.setAccessibleName("Message")
        close = QToolButton()
        close.setText("✕")
        close.setAutoRaise(True)
        close.setToolTip("Close this message")
        close.clicked.connect(self.hide)
        layout = QHBoxLayout(self)
        layout.setContentsMargins(10, 4, 6, 4)
        layout.addWidget(self._text, 1)
        layout.addWidget(close)
        self.hide()

    @property
    def message(self) -> str:
        """What is shown; "" for nothing."""
        return "" if self.isHidden() else self._text.text()

    def say(self, message: str, is_fault: bool = True) -> None:
        """Show a message."""
        self._text.setText(message)
        role = QPalette.ColorRole.BrightText if is_fault else QPalette.ColorRole.WindowText
        palette = self._text.palette()
        palette.setColor(QPalette.ColorRole.WindowText, self.palette().color(role))
        self._text.setPalette(palette)
        self.show()
