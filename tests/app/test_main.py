"""Starting the program, ending it, and a fault of the program itself."""

from __future__ import annotations

import os
import subprocess
import sys
from collections.abc import Callable
from pathlib import Path

import pytest
from PySide6.QtCore import QTimer
from PySide6.QtWidgets import QApplication

from tauline.resources import scenarios_folder
from tauline_app import main
from tauline_app.main_window import MainWindow

COPY_AND_QUIT = """
import sys
from PySide6.QtCore import QTimer
from PySide6.QtWidgets import QApplication
from tauline_app import main
from tauline_app.main_window import MainWindow

def act():
    (window,) = (w for w in QApplication.topLevelWidgets() if isinstance(w, MainWindow))
    if window.session.path is None:
        QTimer.singleShot(20, act)
        return
    window.events.copy()
    print(len(QApplication.clipboard().text().splitlines()))
    window.close()

main.prepare_application()
QTimer.singleShot(0, act)
sys.exit(main.run(sys.argv[1]))
"""


@pytest.mark.usefixtures("make_window")
def test_run_opens_the_file_and_ends_with_the_window() -> None:
    path = scenarios_folder() / "three-beacons.toml"
    titles: list[str] = []

    def look() -> None:
        (window,) = (w for w in QApplication.topLevelWidgets() if isinstance(w, MainWindow))
        if window.session.path is None:
            QTimer.singleShot(20, look)
            return
        titles.append(window.windowTitle())
        window.close()

    QTimer.singleShot(0, look)
    assert main.run(str(path)) == 0
    assert titles == ["Three beacons – three-beacons.toml[*] – Tauline"]
    assert sys.excepthook is sys.__excepthook__


def test_a_process_that_copied_the_table_ends_cleanly(tmp_path: Path) -> None:
    surroundings = os.environ | {"QT_QPA_PLATFORM": "offscreen", "XDG_CONFIG_HOME": str(tmp_path)}
    done = subprocess.run(
        [sys.executable, "-c", COPY_AND_QUIT, str(scenarios_folder() / "three-beacons.toml")],
        env=surroundings,
        capture_output=True,
        text=True,
        check=False,
    )
    assert done.returncode == 0, done.stderr
    assert int(done.stdout) > 3


def test_a_fault_of_the_program_is_told_and_the_work_goes_on(
    courier: MainWindow, capsys: pytest.CaptureFixture[str]
) -> None:
    tell: Callable[..., object] = main._tell_in(courier)
    before = courier.session.scenario
    error = ValueError("a hole in the floor")
    tell(ValueError, error, None)
    assert "a hole in the floor" in courier.banner.message
    assert "a hole in the floor" in capsys.readouterr().err
    assert courier.session.scenario is before
