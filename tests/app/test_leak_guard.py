"""The guard that watches over the tests of the window sees what it should see."""

from __future__ import annotations

from collections.abc import Callable

import pytest
from PySide6.QtCore import QObject, QRunnable, QSemaphore, QThread, QThreadPool, QTimer
from PySide6.QtWidgets import QWidget
from pytestqt.qtbot import QtBot

Strays = Callable[[], list[str]]

pytestmark = pytest.mark.usefixtures("qapp")


def test_nothing_to_begin_with(strays: Strays) -> None:
    assert strays() == []


def test_a_window_is_named(qtbot: QtBot, strays: Strays) -> None:
    widget = QWidget()
    widget.setObjectName("stray")
    widget.setWindowTitle("Left open")
    qtbot.addWidget(widget)
    assert strays() == ["QWidget 'stray' 'Left open'"]


def test_a_window_inside_another_is_none(qtbot: QtBot, strays: Strays) -> None:
    outer = QWidget()
    qtbot.addWidget(outer)
    QWidget(outer)
    assert len(strays()) == 1


@pytest.mark.parametrize("owned_by_qt", [True, False])
def test_a_running_timer_is_named(qapp: QObject, strays: Strays, owned_by_qt: bool) -> None:
    timer = QTimer(qapp) if owned_by_qt else QTimer()
    timer.setObjectName("ticking")
    assert strays() == []
    timer.start(60_000)
    assert strays() == ["QTimer 'ticking'"]
    timer.stop()
    assert strays() == []
    timer.deleteLater()


def test_a_running_thread_is_named(strays: Strays) -> None:
    thread = QThread()
    thread.setObjectName("busy")
    thread.start()
    assert strays() == ["QThread 'busy'"]
    thread.quit()
    assert thread.wait(5000)
    assert strays() == []


def test_a_working_pool_is_named(strays: Strays) -> None:
    done = QSemaphore()

    class Task(QRunnable):
        def run(self) -> None:
            done.acquire()

    pool = QThreadPool()
    pool.start(Task())
    assert strays() == ["QThreadPool"]
    done.release()
    assert pool.waitForDone(5000)
    assert strays() == []
