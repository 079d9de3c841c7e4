"""Opening, saving, recent files, dropping, and files that are no scenario."""

from __future__ import annotations

import stat
from collections.abc import Callable
from pathlib import Path

import pytest
from PySide6.QtCore import QCoreApplication, QMimeData, QPoint, QPointF, Qt, QUrl
from PySide6.QtGui import QDragEnterEvent, QDropEvent, QGuiApplication
from PySide6.QtWidgets import QFileDialog, QMessageBox, QWidget
from pytestqt.qtbot import QtBot

from tauline.resources import scenarios_folder
from tauline_app.actions.edits import change_field, change_parameter
from tauline_app.main_window import MainWindow
from tauline_app.theme import Scheme

Answer = QMessageBox.StandardButton


def drop(widget: QWidget, paths: list[Path]) -> bool:
    """Drop files on a widget, which may leave them to those around it; whether one took them."""
    data = QMimeData()
    data.setUrls([QUrl.fromLocalFile(str(path)) for path in paths])
    at = QPoint(20, 20)
    copy, left = Qt.DropAction.CopyAction, Qt.MouseButton.LeftButton
    plain = Qt.KeyboardModifier.NoModifier
    enter = QDragEnterEvent(at, copy, data, left, plain)
    QCoreApplication.sendEvent(widget, enter)
    if not enter.isAccepted():
        return False
    event = QDropEvent(QPointF(at), copy, data, left, plain)
    QCoreApplication.sendEvent(widget, event)
    return event.isAccepted()


def answer_with(monkeypatch: pytest.MonkeyPatch, answer: Answer) -> list[str]:
    asked: list[str] = []

    def question(_parent: QWidget, title: str, *_rest: object) -> Answer:
        asked.append(title)
        return answer

    monkeypatch.setattr(QMessageBox, "question", question)
    return asked


@pytest.mark.parametrize("name", sorted(path.stem for path in scenarios_folder().glob("*.toml")))
def test_the_shipped_scenarios_open_without_a_fault(window: MainWindow, name: str) -> None:
    assert window.open_path(scenarios_folder() / f"{name}.toml")
    assert not window.session.resolved.faults
    assert window.session.scenario.title in window.windowTitle()
    assert window.canvas.drawing is not None
    assert window.canvas.drawing.strokes
    assert window.banner.message == ""


def test_the_examples_menu_opens_them(window: MainWindow) -> None:
    actions = {action.text(): action for action in window.menus.examples.actions()}
    assert len(actions) == len(list(scenarios_folder().glob("*.toml")))
    assert {"Courier", "Rod and shed", "Three beacons"} <= set(actions)
    actions["Three beacons"].trigger()
    assert window.session.scenario.title == "Three beacons"


@pytest.fixture
def unreadable(tmp_path: Path) -> dict[str, Path]:
    made = {name: tmp_path / f"{name}.toml" for name in ("binary", "broken", "latin", "gone")}
    made["binary"].write_bytes(bytes(range(256)) * 20)
    made["broken"].write_text('tauline = 1\n[[event]\nid = "a"\n')
    made["latin"].write_bytes('tauline = 1\ntitle = "caf\xe9"\n'.encode("latin-1"))
    return made | {"folder": tmp_path}


@pytest.mark.parametrize("name", ["binary", "broken", "latin", "gone", "folder"])
def test_a_file_that_cannot_be_read_is_told_and_the_document_stays(
    courier: MainWindow, unreadable: dict[str, Path], name: str
) -> None:
    before = courier.session.scenario
    assert not courier.open_path(unreadable[name])
    assert courier.session.scenario is before
    assert courier.banner.isVisible()
    assert unreadable[name].name in courier.banner.message
    assert "Traceback" not in courier.banner.message
    assert unreadable[name] not in courier.settings.recent
    # the next file that opens takes the message away
    assert courier.open_path(scenarios_folder() / "three-beacons.toml")
    assert not courier.banner.isVisible()


@pytest.mark.parametrize("text", ["", "\n", "tauline = 1\n", "tauline = 1\ntitle = 3\nnew = 1\n"])
def test_an_empty_file_opens_or_says_why_not(window: MainWindow, tmp_path: Path, text: str) -> None:
    path = tmp_path / "little.toml"
    path.write_text(text)
    opened = window.open_path(path)
    assert opened or window.banner.isVisible()
    assert window.canvas.drawing is not None


def test_saving_keeps_comments_order_and_mode(courier: MainWindow) -> None:
    path = courier.session.path
    assert path is not None
    path.chmod(0o640)
    before = path.read_text()
    assert change_field(courier.session, "brakes", "label", "Brakes go on") == ""
    assert change_parameter(courier.session, "speed", "0.7 c") == ""
    assert courier.save()
    expected = before.replace('"Brakes on"', '"Brakes go on"').replace('"0.6 c"', '"0.7 c"')
    assert path.read_text() == expected
    assert expected != before
    assert stat.S_IMODE(path.stat().st_mode) == 0o640
    assert not courier.isWindowModified()


def test_undoing_after_saving_is_a_change_again(courier: MainWindow) -> None:
    change_parameter(courier.session, "speed", "0.7 c")
    courier.save()
    courier.menus.undo.trigger()
    assert courier.isWindowModified()
    courier.menus.redo.trigger()
    assert not courier.isWindowModified()


def test_save_as_goes_on_with_the_new_file(
    courier: MainWindow, tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    new, old = tmp_path / "other.toml", courier.session.path
    assert old is not None
    untouched = old.read_text()
    change_parameter(courier.session, "speed", "0.7 c")
    monkeypatch.setattr(QFileDialog, "getSaveFileName", lambda *_: (str(new), ""))
    assert courier.ask_save()
    assert courier.session.path == new
    assert "0.7 c" in new.read_text()
    assert old.read_text() == untouched
    assert courier.settings.recent[0] == new


def test_a_place_that_cannot_be_written_to_is_told(courier: MainWindow, tmp_path: Path) -> None:
    change_parameter(courier.session, "speed", "0.7 c")
    assert not courier.save_to(tmp_path / "nowhere" / "x.toml")
    assert "x.toml" in courier.banner.message
    assert courier.isWindowModified()


def test_a_file_changed_by_another_program_is_not_lost(courier: MainWindow) -> None:
    path = courier.session.path
    assert path is not None
    change_parameter(courier.session, "speed", "0.7 c")
    theirs = path.read_text() + "\n# a remark made in an editor\n"
    path.write_text(theirs)
    assert not courier.save()
    assert "another program" in courier.banner.message
    assert path.read_text() == theirs
    assert courier.save()
    assert "0.7 c" in path.read_text()
    assert not courier.banner.isVisible()


@pytest.mark.parametrize("answer", [Answer.Cancel, Answer.Discard, Answer.Save])
def test_closing_with_changes_asks(
    courier: MainWindow, monkeypatch: pytest.MonkeyPatch, answer: Answer
) -> None:
    path = courier.session.path
    assert path is not None
    before = path.read_text()
    asked = answer_with(monkeypatch, answer)
    change_parameter(courier.session, "speed", "0.7 c")
    assert courier.close() is (answer != Answer.Cancel)
    assert len(asked) == 1
    assert (path.read_text() == before) is (answer != Answer.Save)


def test_closing_without_changes_asks_nothing(
    courier: MainWindow, monkeypatch: pytest.MonkeyPatch
) -> None:
    asked = answer_with(monkeypatch, Answer.Cancel)
    assert courier.close()
    assert asked == []


def test_opening_another_file_with_changes_asks(
    courier: MainWindow, monkeypatch: pytest.MonkeyPatch
) -> None:
    change_parameter(courier.session, "speed", "0.7 c")
    edited = courier.session.scenario
    answer_with(monkeypatch, Answer.Cancel)
    assert not courier.open_path(scenarios_folder() / "three-beacons.toml")
    assert courier.session.scenario is edited


def test_recent_files(make_window: Callable[[], MainWindow], tmp_path: Path) -> None:
    window = make_window()
    paths = [tmp_path / f"{k}.toml" for k in range(12)]
    for path in paths:
        path.write_text("tauline = 1\n")
        window.open_path(path)
    window.open_path(paths[5])
    window.menus.recent.aboutToShow.emit()
    names = [action.text() for action in window.menus.recent.actions()]
    assert names[:3] == ["5.toml", "11.toml", "10.toml"]
    assert len(names) == 10
    assert len(set(names)) == 10
    paths[11].unlink()
    # kept from one start to the next, without those that are gone
    again = make_window()
    again.menus.recent.aboutToShow.emit()
    actions = again.menus.recent.actions()
    assert [action.text() for action in actions][:2] == ["5.toml", "10.toml"]
    actions[1].trigger()
    assert again.session.path == paths[10]


def test_without_recent_files_the_menu_says_so(window: MainWindow) -> None:
    for _ in range(2):
        window.menus.recent.aboutToShow.emit()
        (action,) = window.menus.recent.actions()
        assert not action.isEnabled()


@pytest.mark.parametrize("part", ["canvas", "viewport", "rail", "tree", "table"])
def test_a_file_is_dropped_anywhere_on_the_window(window: MainWindow, part: str) -> None:
    widget = {
        "canvas": window.canvas,
        "viewport": window.canvas.viewport(),
        "rail": window.view_bar.rail,
        "tree": window.objects.viewport(),
        "table": window.events.view.viewport(),
    }[part]
    assert drop(widget, [scenarios_folder() / "courier.toml"])
    assert window.session.scenario.title == "A courier there and back"


def test_dropping_something_else_is_told(window: MainWindow, tmp_path: Path) -> None:
    picture = tmp_path / "picture.png"
    picture.write_bytes(b"\x89PNG\r\n\x1a\n" + bytes(50))
    drop(window, [picture])
    assert "picture.png" in window.banner.message


def test_colours_are_kept_from_one_start_to_the_next(
    make_window: Callable[[], MainWindow],
) -> None:
    make_window().set_scheme(Scheme.DARK)
    make_window()
    palette = QGuiApplication.palette()
    assert palette.window().color().lightness() < 80
    make_window().set_scheme(Scheme.LIGHT)


def test_layers_and_axes_are_switched_in_the_menus(courier: MainWindow, qtbot: QtBot) -> None:
    def roles() -> set[str]:
        drawing = courier.canvas.drawing
        assert drawing is not None
        return {str(stroke.role) for stroke in drawing.strokes}

    assert "signal" in roles()
    courier.menus._toggle_layer("signals")
    assert "signal" not in roles()
    courier.menus._toggle_layer("signals")
    assert "signal" in roles()
    courier.menus.axes.aboutToShow.emit()
    checked = [a.text() for a in courier.menus.axes.actions() if a.isChecked()]
    assert checked == ["Outbound"]
    next(a for a in courier.menus.axes.actions() if a.text() == "Outbound").trigger()
    assert "other_axis" not in roles()


def test_opening_a_menu_again_and_again_piles_nothing_up(courier: MainWindow) -> None:
    courier.menus.frames.aboutToShow.emit()
    once = len(courier.findChildren(type(courier.menus.undo)))
    for _ in range(5):
        courier.menus.frames.aboutToShow.emit()
    assert len(courier.findChildren(type(courier.menus.undo))) == once


def test_the_views_of_the_scenario_are_in_a_menu(window: MainWindow, tmp_path: Path) -> None:
    path = tmp_path / "views.toml"
    path.write_text(
        'tauline = 1\n[[frame]]\nid = "fast"\nvelocity = "0.5 c"\n'
        '[[view]]\nid = "first"\nlabel = "First"\n'
        '[[view]]\nid = "second"\nlabel = "Second"\nframe = "fast"\nt = [2, 5]\n'
    )
    assert window.open_path(path)
    opened = window.session.view
    window.menus.views.aboutToShow.emit()
    first, second = window.menus.views.actions()
    second.trigger()
    assert window.session.view.frame.id == "fast"
    assert (window.session.view.window.t0, window.session.view.window.t1) == (2.0, 5.0)
    first.trigger()
    assert window.session.view == opened
