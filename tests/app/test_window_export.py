"""Exporting figures and tables through the dialogs."""

from __future__ import annotations

import json
from pathlib import Path

import pytest
from pypdf import PdfReader
from PySide6.QtCore import Qt, QThreadPool
from PySide6.QtWidgets import QDialogButtonBox, QFileDialog
from pytestqt.qtbot import QtBot

from tauline_app.dialogs.export_figure import ExportFigureDialog
from tauline_app.dialogs.export_table import ExportTableDialog
from tauline_app.main_window import MainWindow

SAVE = QDialogButtonBox.StandardButton.Save


@pytest.fixture
def figure_dialog(courier: MainWindow) -> ExportFigureDialog:
    courier.export_figure()
    return courier.findChildren(ExportFigureDialog)[0]


@pytest.fixture
def table_dialog(courier: MainWindow) -> ExportTableDialog:
    courier.export_table()
    return courier.findChildren(ExportTableDialog)[0]


def save(dialog: ExportFigureDialog, qtbot: QtBot) -> None:
    with qtbot.waitSignal(dialog.accepted, timeout=60_000):
        dialog.buttons.button(SAVE).click()


def test_a_pdf_of_the_chosen_frame_in_the_chosen_size(
    figure_dialog: ExportFigureDialog, tmp_path: Path, qtbot: QtBot
) -> None:
    dialog, path = figure_dialog, tmp_path / "figure.pdf"
    dialog.frame.setCurrentIndex(dialog.frame.findData("homebound"))
    dialog.width_box.setValue(120.0)
    dialog.file.setText(str(path))
    save(dialog, qtbot)
    page = PdfReader(path).pages[0]
    assert float(page.mediabox.width) == pytest.approx(120.0 / 25.4 * 72.0, abs=0.1)
    text = page.extract_text()
    for word in ("Departure", "Return", "Brakes on", "Engine off", "Courier", "Homebound"):
        assert word in text


@pytest.mark.parametrize(("ending", "start"), [("png", b"\x89PNG"), ("svg", b"<?xml")])
def test_the_ending_names_the_format(
    figure_dialog: ExportFigureDialog, tmp_path: Path, qtbot: QtBot, ending: str, start: bytes
) -> None:
    path = tmp_path / f"figure.{ending}"
    figure_dialog.file.setText(str(path))
    save(figure_dialog, qtbot)
    assert path.read_bytes().startswith(start)


def test_the_view_as_shown_is_what_is_written(
    courier: MainWindow, figure_dialog: ExportFigureDialog
) -> None:
    view = figure_dialog.chosen_view()
    shown = courier.session.view
    assert view.frame == shown.frame
    assert [frame.id for frame in view.axes] == ["outbound"]
    assert view.window.t0 == pytest.approx(shown.window.t0, abs=1e-4)


def test_the_time_window_is_cut(figure_dialog: ExportFigureDialog) -> None:
    figure_dialog.first.setValue(2.0)
    figure_dialog.last.setValue(7.0)
    window = figure_dialog.chosen_view().window
    assert (window.t0, window.t1) == (2.0, 7.0)


def test_a_window_the_wrong_way_round_is_told(
    figure_dialog: ExportFigureDialog, tmp_path: Path
) -> None:
    figure_dialog.file.setText(str(tmp_path / "f.pdf"))
    figure_dialog.first.setValue(7.0)
    figure_dialog.last.setValue(2.0)
    figure_dialog.accept()
    assert "ends before" in figure_dialog.message.text()
    assert figure_dialog.isVisible()
    assert not (tmp_path / "f.pdf").exists()


@pytest.mark.parametrize("name", ["figure.doc", "figure", "figure.toml"])
def test_an_unknown_ending_is_told(
    figure_dialog: ExportFigureDialog, tmp_path: Path, name: str
) -> None:
    figure_dialog.file.setText(str(tmp_path / name))
    figure_dialog.accept()
    assert ".pdf" in figure_dialog.message.text()
    assert not (tmp_path / name).exists()


def test_a_place_that_cannot_be_written_to_is_told(
    figure_dialog: ExportFigureDialog, tmp_path: Path, qtbot: QtBot
) -> None:
    figure_dialog.file.setText(str(tmp_path / "nowhere" / "f.pdf"))
    figure_dialog.accept()
    qtbot.waitUntil(lambda: "cannot be written" in figure_dialog.message.text(), timeout=60_000)
    assert figure_dialog.isVisible()
    assert figure_dialog.buttons.button(SAVE).isEnabled()


def test_a_file_that_is_there_is_replaced_when_asked_twice(
    figure_dialog: ExportFigureDialog, tmp_path: Path, qtbot: QtBot
) -> None:
    path = tmp_path / "precious.svg"
    path.write_text("mine")
    figure_dialog.file.setText(str(path))
    figure_dialog.accept()
    assert "is there already" in figure_dialog.message.text()
    assert path.read_text() == "mine"
    save(figure_dialog, qtbot)
    assert path.read_text() != "mine"


def test_a_file_chosen_by_browsing_was_asked_about_there(
    figure_dialog: ExportFigureDialog,
    tmp_path: Path,
    qtbot: QtBot,
    monkeypatch: pytest.MonkeyPatch,
) -> None:
    path = tmp_path / "chosen.svg"
    path.write_text("old")
    monkeypatch.setattr(QFileDialog, "getSaveFileName", lambda *_: (str(path), ""))
    figure_dialog._browse()
    save(figure_dialog, qtbot)
    assert path.read_text() != "old"


def test_cancelling_while_it_draws_writes_nothing(
    figure_dialog: ExportFigureDialog, tmp_path: Path, qtbot: QtBot
) -> None:
    path = tmp_path / "f.pdf"
    figure_dialog.file.setText(str(path))
    figure_dialog.accept()
    assert not figure_dialog.buttons.button(SAVE).isEnabled()
    with qtbot.waitSignal(figure_dialog.rejected):
        figure_dialog.buttons.button(QDialogButtonBox.StandardButton.Cancel).click()
    # the leak guard waits for the thread; what it drew goes nowhere
    assert QThreadPool.globalInstance().waitForDone(60_000)
    qtbot.wait(20)
    assert not path.exists()


def test_a_table_in_json_has_every_digit(table_dialog: ExportTableDialog, tmp_path: Path) -> None:
    path = tmp_path / "events.json"
    table_dialog.form.setCurrentIndex(table_dialog.form.findData("json"))
    table_dialog.file.setText(str(path))
    table_dialog.accept()
    found = json.loads(path.read_text())
    assert [frame["id"] for frame in found["frames"]] == [
        "station-frame",
        "outbound",
        "homebound",
    ]
    event = next(event for event in found["events"] if event["id"] == "brakes")
    assert event["coordinates"]["outbound"]["t"] == pytest.approx(4.0, rel=1e-14)


@pytest.mark.parametrize(
    ("form", "ending"),
    [("csv", ".csv"), ("md", ".md"), ("latex", ".tex"), ("html", ".html")],
)
def test_every_format_of_a_table(
    table_dialog: ExportTableDialog, tmp_path: Path, form: str, ending: str
) -> None:
    table_dialog.file.setText(str(tmp_path / "events.csv"))
    table_dialog.form.setCurrentIndex(table_dialog.form.findData(form))
    assert table_dialog.file.text() == str(tmp_path / f"events{ending}")
    table_dialog.accept()
    text = (tmp_path / f"events{ending}").read_text()
    assert "Brakes on" in text
    assert "Outbound" in text


def test_a_table_never_replaces_the_scenario(
    courier: MainWindow, table_dialog: ExportTableDialog
) -> None:
    path = courier.session.path
    assert path is not None
    before = path.read_text()
    table_dialog.file.setText(str(path))
    for _ in range(3):
        table_dialog.accept()
    assert "file of the scenario" in table_dialog.message.text()
    assert path.read_text() == before


def test_a_table_without_a_frame_is_told(table_dialog: ExportTableDialog, tmp_path: Path) -> None:
    table_dialog.file.setText(str(tmp_path / "e.csv"))
    for k in range(table_dialog.frames.count()):
        table_dialog.frames.item(k).setCheckState(Qt.CheckState.Unchecked)
    table_dialog.accept()
    assert "frame" in table_dialog.message.text()
    assert not (tmp_path / "e.csv").exists()
