"""The canvas: clicking, keys, zooming at the pointer, dimming, and what is painted."""

# mypy: allow-untyped-calls
# pytest-qt declares no types for its mouse and keys
from __future__ import annotations

from collections.abc import Callable

import pytest
from PySide6.QtCore import QCoreApplication, QPoint, QPointF, Qt
from PySide6.QtGui import QColor, QWheelEvent
from PySide6.QtWidgets import QWidget
from pytestqt.qtbot import QtBot

from tauline.figure.drawing import Window
from tauline_app.actions.edits import change_parameter
from tauline_app.main_window import MainWindow
from tauline_app.theme import Scheme

Drag = Callable[[QWidget, QPointF, QPointF], None]
LEFT = Qt.MouseButton.LeftButton


def place_of(window: MainWindow, event_id: str) -> QPoint:
    pixel = window.canvas.pixel_of(event_id)
    assert pixel is not None, event_id
    return QPoint(window.canvas.mapFromScene(QPointF(*pixel)))


def click(
    window: MainWindow,
    qtbot: QtBot,
    at: QPoint,
    modifier: Qt.KeyboardModifier = Qt.KeyboardModifier.NoModifier,
) -> None:
    qtbot.mouseClick(window.canvas.viewport(), LEFT, modifier, at)
    # else the next click is the second half of a double click
    window.canvas.scene().clickEvents.clear()


def shown(window: MainWindow) -> Window:
    found = window.canvas.shown_window()
    assert found is not None
    return found


def ink_at(window: MainWindow, at: QPoint) -> QColor:
    return QColor(window.canvas.viewport().grab().toImage().pixelColor(at))


def test_clicking_selects_an_event(courier: MainWindow, qtbot: QtBot) -> None:
    click(courier, qtbot, place_of(courier, "brakes"))
    assert courier.session.selection == ("brakes",)
    click(courier, qtbot, place_of(courier, "return") + QPoint(5, -3))
    assert courier.session.selection == ("return",)


@pytest.mark.parametrize(
    "modifier", [Qt.KeyboardModifier.ShiftModifier, Qt.KeyboardModifier.ControlModifier]
)
def test_a_second_click_extends_the_selection_in_order(
    courier: MainWindow, qtbot: QtBot, modifier: Qt.KeyboardModifier
) -> None:
    click(courier, qtbot, place_of(courier, "return"))
    click(courier, qtbot, place_of(courier, "departure"), modifier)
    assert list(courier.session.selection) == ["return", "departure"]
    click(courier, qtbot, place_of(courier, "return"), modifier)
    assert courier.session.selection == ("departure",)


def test_clicking_a_line_selects_it(courier: MainWindow, qtbot: QtBot) -> None:
    start, end = place_of(courier, "departure"), place_of(courier, "brakes")
    # off the middle, where a clock mark may be
    click(courier, qtbot, start + (end - start) * 0.43)
    assert courier.session.selection == ("courier",)


def test_clicking_on_nothing_or_escape_lets_go(courier: MainWindow, qtbot: QtBot) -> None:
    nowhere = place_of(courier, "departure") + QPoint(-150, -70)
    for let_go in (
        lambda: click(courier, qtbot, nowhere),
        lambda: qtbot.keyClick(courier.canvas, Qt.Key.Key_Escape),
    ):
        click(courier, qtbot, place_of(courier, "brakes"))
        assert courier.session.selection
        let_go()
        assert courier.session.selection == ()


def test_the_wheel_zooms_at_the_pointer(courier: MainWindow, qtbot: QtBot) -> None:
    at, before = place_of(courier, "brakes"), shown(courier)
    viewport = courier.canvas.viewport()
    event = QWheelEvent(
        QPointF(at),
        QPointF(viewport.mapToGlobal(at)),
        QPoint(),
        QPoint(0, 240),
        Qt.MouseButton.NoButton,
        Qt.KeyboardModifier.NoModifier,
        Qt.ScrollPhase.NoScrollPhase,
        False,
    )
    QCoreApplication.sendEvent(viewport, event)
    assert shown(courier).width < 0.95 * before.width
    assert shown(courier).width / shown(courier).height == pytest.approx(
        before.width / before.height, rel=1e-9
    )
    moved = place_of(courier, "brakes") - at
    assert abs(moved.x()) <= 1
    assert abs(moved.y()) <= 1


def test_dragging_pans(courier: MainWindow, drag: Drag) -> None:
    before, size = place_of(courier, "brakes"), shown(courier).width
    nowhere = QPointF(before) + QPointF(-160.0, 40.0)
    drag(courier.canvas.viewport(), nowhere, nowhere + QPointF(60.0, -30.0))
    moved = place_of(courier, "brakes") - before
    assert moved.x() == pytest.approx(60, abs=8)
    assert moved.y() == pytest.approx(-30, abs=5)
    assert shown(courier).width == pytest.approx(size, rel=1e-9)
    assert courier.session.selection == ()


def test_keys_pan_zoom_fit_and_go_home(courier: MainWindow, qtbot: QtBot) -> None:
    canvas, home = courier.canvas, courier.session.view
    canvas.setFocus()
    start = shown(courier)
    qtbot.keyClick(canvas, Qt.Key.Key_Right)
    assert shown(courier).x0 == pytest.approx(start.x0 + 0.1 * start.width)
    qtbot.keyClick(canvas, Qt.Key.Key_Up)
    assert shown(courier).t0 == pytest.approx(start.t0 + 0.1 * start.height)
    qtbot.keyClick(canvas, Qt.Key.Key_Plus)
    assert shown(courier).width == pytest.approx(start.width / 1.25)
    qtbot.keyClick(canvas, Qt.Key.Key_Minus)
    assert shown(courier).width == pytest.approx(start.width)
    qtbot.keyClick(canvas, Qt.Key.Key_Home)
    assert courier.session.view == home
    courier.session.look_from(courier.session.resolved.frames["outbound"])
    qtbot.keyClick(canvas, Qt.Key.Key_F)
    fitted = courier.session.view
    assert fitted.frame.id == "outbound"
    for event in ("departure", "brakes", "homeward", "return"):
        place = place_of(courier, event)
        assert canvas.viewport().rect().contains(place)


def test_a_double_click_on_nothing_fits(courier: MainWindow, qtbot: QtBot) -> None:
    fitted = shown(courier)
    for _ in range(3):
        qtbot.keyClick(courier.canvas, Qt.Key.Key_Minus)
    assert shown(courier).width > 1.5 * fitted.width
    qtbot.mouseDClick(courier.canvas.viewport(), LEFT, pos=QPoint(40, 40))
    qtbot.mouseRelease(courier.canvas.viewport(), LEFT, pos=QPoint(40, 40))
    assert shown(courier).width < 1.5 * fitted.width


def test_selecting_dims_what_is_unrelated(courier: MainWindow) -> None:
    near, far = place_of(courier, "brakes"), place_of(courier, "homeward")
    ink = QColor(32, 36, 42)
    assert ink_at(courier, near) == ink
    assert ink_at(courier, far) == ink
    courier.session.select(("now-at-brakes",))
    assert ink_at(courier, near) == ink
    assert ink_at(courier, far).lightness() > 120


def test_dark_ink_on_light_ground_and_the_reverse(courier: MainWindow) -> None:
    at = place_of(courier, "brakes")
    for scheme, dark_ground in ((Scheme.DARK, True), (Scheme.LIGHT, False)):
        courier.set_scheme(scheme)
        ground = ink_at(courier, QPoint(5, 5))
        assert (ground.lightness() < 60) is dark_ground
        assert abs(ink_at(courier, at).lightness() - ground.lightness()) > 150


def test_the_place_under_the_pointer_is_told(courier: MainWindow, qtbot: QtBot) -> None:
    qtbot.mouseMove(courier.canvas.viewport(), place_of(courier, "brakes"))
    told = courier.statusBar().findChildren(type(courier._pointer))
    assert any("in Station" in label.text() and "yr" in label.text() for label in told)


def test_resizing_keeps_all_in_sight(courier: MainWindow, qtbot: QtBot) -> None:
    for size in ((900, 700), (1500, 700), (1300, 850)):
        courier.resize(*size)
        qtbot.wait(1)
        for event in ("departure", "brakes", "return"):
            assert courier.canvas.viewport().rect().contains(place_of(courier, event))


def test_ids_that_name_nothing_are_not_selected(courier: MainWindow) -> None:
    courier.session.select(("nobody", "brakes", "brakes", "greeting.99.received"))
    assert courier.session.selection == ("brakes",)


def test_a_selection_outlives_an_edit_where_its_things_do(courier: MainWindow) -> None:
    # one of the repeated signals, an event it makes, and a leg's frame
    chosen = ("greeting.3", "greeting.3.received", "courier.leg-1")
    courier.session.select(chosen)
    assert change_parameter(courier.session, "speed", "0.5 c") == ""
    assert courier.session.selection == chosen
