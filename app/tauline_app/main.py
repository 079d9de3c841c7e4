"""Starting the window."""

from __future__ import annotations

import sys
import traceback
from collections.abc import Callable
from pathlib import Path
from types import TracebackType

from PySide6.QtCore import QTimer
from PySide6.QtGui import QIcon
from PySide6.QtWidgets import QApplication

from tauline.resources import resource
from tauline_app.main_window import MainWindow

ExceptHook = Callable[[type[BaseException], BaseException, TracebackType | None], object]


def run(path: str | None) -> int:
    """Open the window, on a file or on an empty sheet, and return its exit status."""
    application = prepare_application()
    window = MainWindow()
    sys.excepthook = _tell_in(window)
    window.show()
    if path is not None:
        # once the window is there, a message about the file has a place
        QTimer.singleShot(0, lambda: window.open_path(Path(path)))
    try:
        return int(application.exec())
    finally:
        sys.excepthook = sys.__excepthook__
        window.deleteLater()


def prepare_application() -> QApplication:
    """Make the application, under its name and with its icon."""
    existing = QApplication.instance()
    application = existing if isinstance(existing, QApplication) else QApplication(["tauline"])
    application.setApplicationName("Tauline")
    application.setOrganizationName("Tauline")
    application.setDesktopFileName("tauline")
    application.setStyle("Fusion")
    application.setWindowIcon(QIcon(str(resource("icons/tauline.svg"))))
    return application


def _tell_in(window: MainWindow) -> ExceptHook:
    """Show a fault of the program in the window; the work goes on."""

    def tell(kind: type[BaseException], error: BaseException, trace: TracebackType | None) -> None:
        traceback.print_exception(kind, error, trace)
        window.banner.say(
            f"Something went wrong in the program: {str(error) or kind.__name__}."
            " Your document is as it was before this step; saving it is safe."
        )

    return tell
