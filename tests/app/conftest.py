"""Tests of the window: on no screen, and leaving nothing behind."""

from __future__ import annotations

import gc
import os
import shutil
from collections.abc import Callable, Iterator
from pathlib import Path

# before Qt makes an application; a platform set from outside stays
os.environ.setdefault("QT_QPA_PLATFORM", "offscreen")

import pytest
import shiboken6
from PySide6.QtCore import (
    QCoreApplication,
    QEvent,
    QObject,
    QPointF,
    QSettings,
    Qt,
    QThread,
    QThreadPool,
    QTimer,
)
from PySide6.QtGui import QMouseEvent
from PySide6.QtWidgets import QApplication, QWidget
from pytestqt.qtbot import QtBot

from tauline.resources import scenarios_folder
from tauline_app.main import prepare_application
from tauline_app.main_window import MainWindow

QTS_OWN = ("QTipLabel",)
"""Top-level widgets that Qt keeps for itself: the tool tip."""


def _title(thing: QObject) -> str:
    window_title = getattr(thing, "windowTitle", str)()
    names = [name for name in (thing.objectName(), window_title) if name]
    return " ".join([type(thing).__name__, *(repr(name) for name in names)])


def _children_of_qt() -> Iterator[QObject]:
    """Timers and threads: those that Python holds, and those that hang on the application."""
    for thing in gc.get_objects():
        # by its type: asking the object itself may wake a lazy one
        if issubclass(type(thing), QTimer | QThread | QThreadPool) and shiboken6.isValid(thing):
            yield thing
    application = QCoreApplication.instance()
    if application is not None:
        yield from application.findChildren(QTimer)
        yield from application.findChildren(QThread)


def _find() -> dict[int, QObject]:
    """What is alive and should not outlive a test, by address."""
    found: list[QObject] = [
        widget for widget in QApplication.topLevelWidgets() if type(widget).__name__ not in QTS_OWN
    ]
    for thing in _children_of_qt():
        match thing:
            case QTimer() if thing.isActive():
                found.append(thing)
            case QThread() if thing.isRunning() and thing is not QThread.currentThread():
                found.append(thing)
            case QThreadPool() if thing.activeThreadCount():
                found.append(thing)
            case _:
                pass
    if QThreadPool.globalInstance().activeThreadCount():
        found.append(QThreadPool.globalInstance())
    return {shiboken6.getCppPointer(thing)[0]: thing for thing in found}


def _settle() -> None:
    """Let what is on its way out go: deferred deletions, workers about to end, the clipboard."""
    if QCoreApplication.instance() is None:
        return
    # what a test copied would be deleted with Qt's own statics, when Python is gone: a crash
    QApplication.clipboard().clear()
    QThreadPool.globalInstance().waitForDone(5000)
    for _ in range(3):
        QCoreApplication.sendPostedEvents(None, QEvent.Type.DeferredDelete.value)
        QCoreApplication.processEvents()


def _remove(thing: QObject) -> None:
    """Take a leak away, so that only the test that made it fails."""
    match thing:
        case QTimer():
            thing.stop()
        case QThread():
            thing.quit()
            thing.wait(1000)
        case QThreadPool():
            thing.clear()
        case _:
            thing.deleteLater()


@pytest.fixture
def strays() -> Callable[[], list[str]]:
    """Return a function that names all that is alive and should not outlive a test."""

    def named() -> list[str]:
        return sorted(_title(thing) for thing in _find().values())

    return named


@pytest.fixture(autouse=True)
def _no_leaks() -> Iterator[None]:
    """Fail a test after which a window is left, or a timer or a thread still runs."""
    before = _find()
    yield
    _settle()
    left = {key: thing for key, thing in _find().items() if key not in before}
    if left:
        left.clear()
        gc.collect()
        _settle()
        left = {key: thing for key, thing in _find().items() if key not in before}
    names = sorted(_title(thing) for thing in left.values())
    for thing in left.values():
        _remove(thing)
    _settle()
    if names:
        pytest.fail("left behind: " + ", ".join(names), pytrace=False)


@pytest.fixture
def make_window(
    qtbot: QtBot, tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> Callable[[], MainWindow]:
    """Return a maker of windows whose settings are their own and that ask nothing when closed."""
    QSettings.setDefaultFormat(QSettings.Format.IniFormat)
    QSettings.setPath(
        QSettings.Format.IniFormat, QSettings.Scope.UserScope, str(tmp_path / "settings")
    )
    prepare_application()

    def make() -> MainWindow:
        window = MainWindow()
        window.setAttribute(Qt.WidgetAttribute.WA_DeleteOnClose, False)
        qtbot.addWidget(window, before_close_func=_leave_quietly)
        window.resize(1300, 850)
        window.show()
        qtbot.waitExposed(window)
        return window

    def _leave_quietly(window: MainWindow) -> None:
        monkeypatch.setattr(window, "_may_leave", lambda: True)

    return make


@pytest.fixture
def window(make_window: Callable[[], MainWindow]) -> MainWindow:
    """Return a window on screen, with nothing in it."""
    return make_window()


@pytest.fixture
def courier(window: MainWindow, tmp_path: Path) -> MainWindow:
    """Return the window with a copy of the courier's scenario in it."""
    path = tmp_path / "courier.toml"
    shutil.copy(scenarios_folder() / "courier.toml", path)
    assert window.open_path(path)
    return window


@pytest.fixture
def drag() -> Callable[[QWidget, QPointF, QPointF], None]:
    """Return a function that drags with the left button, in small steps, from place to place."""

    def send(widget: QWidget, kind: QEvent.Type, at: QPointF, pressed: bool) -> None:
        left, none = Qt.MouseButton.LeftButton, Qt.MouseButton.NoButton
        moves = kind == QEvent.Type.MouseMove
        QCoreApplication.sendEvent(
            widget,
            QMouseEvent(
                kind,
                at,
                widget.mapToGlobal(at),
                none if moves else left,
                left if pressed else none,
                Qt.KeyboardModifier.NoModifier,
            ),
        )

    def dragged(widget: QWidget, start: QPointF, end: QPointF) -> None:
        send(widget, QEvent.Type.MouseButtonPress, start, True)
        for step in range(1, 11):
            send(widget, QEvent.Type.MouseMove, start + (end - start) * (step / 10), True)
            QCoreApplication.processEvents()
        send(widget, QEvent.Type.MouseButtonRelease, end, False)
        QCoreApplication.processEvents()

    return dragged
