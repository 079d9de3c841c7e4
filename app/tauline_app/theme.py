"""Light and dark: palettes of the window and styles of the canvas."""

from __future__ import annotations

from enum import StrEnum

from PySide6.QtCore import Qt
from PySide6.QtGui import QColor, QGuiApplication, QPalette
from PySide6.QtWidgets import QApplication

from tauline.figure.drawing import NEUTRAL, Role
from tauline.figure.style import SCREEN_DARK, SCREEN_LIGHT, Colour, Style


class Scheme(StrEnum):
    """Which of the two, or as the system has it."""

    SYSTEM = "system"
    LIGHT = "light"
    DARK = "dark"


_LIGHT = {
    QPalette.ColorRole.Window: "#f3f4f6",
    QPalette.ColorRole.WindowText: "#20242a",
    QPalette.ColorRole.Base: "#ffffff",
    QPalette.ColorRole.AlternateBase: "#f7f8fa",
    QPalette.ColorRole.Text: "#20242a",
    QPalette.ColorRole.Button: "#e9ebee",
    QPalette.ColorRole.ButtonText: "#20242a",
    QPalette.ColorRole.BrightText: "#b3261e",
    QPalette.ColorRole.Highlight: "#1f5f9e",
    QPalette.ColorRole.HighlightedText: "#ffffff",
    QPalette.ColorRole.ToolTipBase: "#ffffff",
    QPalette.ColorRole.ToolTipText: "#20242a",
    QPalette.ColorRole.PlaceholderText: "#5c6470",
    QPalette.ColorRole.Link: "#1f5f9e",
    QPalette.ColorRole.Mid: "#c8ccd2",
}
_DARK = {
    QPalette.ColorRole.Window: "#23272e",
    QPalette.ColorRole.WindowText: "#dee2e8",
    QPalette.ColorRole.Base: "#16191e",
    QPalette.ColorRole.AlternateBase: "#1c2026",
    QPalette.ColorRole.Text: "#dee2e8",
    QPalette.ColorRole.Button: "#2d323a",
    QPalette.ColorRole.ButtonText: "#dee2e8",
    QPalette.ColorRole.BrightText: "#ff8a80",
    QPalette.ColorRole.Highlight: "#3372b3",
    QPalette.ColorRole.HighlightedText: "#ffffff",
    QPalette.ColorRole.ToolTipBase: "#2d323a",
    QPalette.ColorRole.ToolTipText: "#dee2e8",
    QPalette.ColorRole.PlaceholderText: "#9aa3af",
    QPalette.ColorRole.Link: "#7db4ea",
    QPalette.ColorRole.Mid: "#3a4049",
}
_DISABLED = {False: "#6d747e", True: "#8d95a0"}


def apply_scheme(scheme: Scheme) -> Style:
    """Colour the whole application and return the style of the canvas."""
    dark = is_dark(scheme)
    application = QApplication.instance()
    assert isinstance(application, QApplication)
    palette = QPalette()
    for role, colour in (_DARK if dark else _LIGHT).items():
        palette.setColor(role, QColor(colour))
    for role in (
        QPalette.ColorRole.Text,
        QPalette.ColorRole.WindowText,
        QPalette.ColorRole.ButtonText,
    ):
        palette.setColor(QPalette.ColorGroup.Disabled, role, QColor(_DISABLED[dark]))
    application.setPalette(palette)
    application.setStyleSheet(_SHEET)
    return SCREEN_DARK if dark else SCREEN_LIGHT


def is_dark(scheme: Scheme) -> bool:
    """Whether a scheme comes out dark now."""
    if scheme is not Scheme.SYSTEM:
        return scheme is Scheme.DARK
    return QGuiApplication.styleHints().colorScheme() == Qt.ColorScheme.Dark


def qcolour(colour: Colour) -> QColor:
    """Turn a colour of a style into Qt's."""
    return QColor(*colour)


def hue_colour(style: Style, hue: int = NEUTRAL, role: Role = Role.WORLDLINE) -> QColor:
    """Colour of an observer, as its worldline has it (or its label, which stands out more)."""
    return qcolour(style.colour(role, hue))


_SHEET = """
QDockWidget { font-weight: 600; }
QDockWidget::title { padding: 5px 8px; background: palette(window); }
QDockWidget > QWidget { font-weight: 400; }
QHeaderView::section { padding: 3px 6px; border: 0; border-bottom: 1px solid palette(mid);
    background: palette(window); }
QTableView::item { padding: 4px 5px 4px 4px; }
QTreeView, QTableView, QScrollArea, QListView { border: 1px solid palette(mid); }
QToolTip { border: 1px solid palette(mid); padding: 3px; }
QLineEdit { padding: 2px 4px; }
QMainWindow::separator { width: 5px; height: 5px; }
"""
