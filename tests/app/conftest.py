"""Tests of the window: on no screen, and leaving nothing behind."""

from __future__ import annotations

import gc
import os
from collections.abc import Callable, Iterator

# before Qt makes an application; a platform set from outside stays
os.environ.setdefault("QT_QPA_PLATFORM", "offscreen")

import pytest
import shiboken6
from PySide6.QtCore import QCoreApplication, QEvent, QObject, QThread, QThreadPool, QTimer
from PySide6.QtWidgets import QApplication

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
    """Let what is on its way out go: deferred deletions, workers about to end, cycles."""
    if QCoreApplication.instance() is None:
        return
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
