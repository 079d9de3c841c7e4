"""The velocity rail: dragging, flags, typing, keys, and what stays in its place meanwhile."""

# mypy: allow-untyped-calls
# pytest-qt declares no types for its mouse and keys
from __future__ import annotations

import math
from collections.abc import Callable
from itertools import pairwise

import numpy as np
import pytest
from PySide6.QtCore import QPoint, QPointF, Qt
from PySide6.QtWidgets import QWidget
from pytestqt.qtbot import QtBot

from tauline.figure.drawing import Role
from tauline_app.main_window import MainWindow

Drag = Callable[[QWidget, QPointF, QPointF], None]
OUTBOUND = math.atanh(0.6)


def rapidity(window: MainWindow) -> float:
    return window.session.view.frame.rapidity


def drag_rail(window: MainWindow, drag: Drag, by: float) -> None:
    """Drag the ruler by so much rapidity; to the left looks from a faster frame."""
    rail = window.view_bar.rail
    start = QPointF(30.0, rail.height() - 8.0)
    shift = round(by * rail.pixels_per_rapidity)
    drag(rail, start, start - QPointF(shift, 0.0))


def test_dragging_looks_from_the_velocity_under_the_mark(courier: MainWindow, drag: Drag) -> None:
    rail = courier.view_bar.rail
    was = rail.x_of(OUTBOUND)
    shift = was - 0.5 * rail.width()
    drag(rail, QPointF(400.0, rail.height() - 6.0), QPointF(400.0 - shift, rail.height() - 6.0))
    assert rapidity(courier) == pytest.approx(OUTBOUND, abs=1e-9)
    assert rail.x_of(OUTBOUND) == pytest.approx(0.5 * rail.width(), abs=1e-6)
    assert "= 0.6 c" in courier.view_bar.where.text()
    assert "γ = 1.25" in courier.view_bar.where.text()


def test_flags_slide_rigidly(courier: MainWindow, drag: Drag) -> None:
    rail = courier.view_bar.rail
    before = {flag.flag.label: flag.foot for flag in rail.placed_flags()}
    drag_rail(courier, drag, 0.3)
    moved = {flag.flag.label: flag.foot - before[flag.flag.label] for flag in rail.placed_flags()}
    assert len(moved) == 3
    assert np.ptp(list(moved.values())) == pytest.approx(0.0, abs=1e-9)
    assert next(iter(moved.values())) == -round(0.3 * rail.pixels_per_rapidity)


@pytest.mark.parametrize("pivot", ["brakes", "return", ""])
def test_the_pivot_stays_on_its_pixel(courier: MainWindow, drag: Drag, pivot: str) -> None:
    courier.view_bar.pivot.setCurrentIndex(courier.view_bar.pivot.findData(pivot))
    courier.view_bar.pivot.activated.emit(courier.view_bar.pivot.currentIndex())
    event, other = pivot or "departure", "homeward"
    before, apart = courier.canvas.pixel_of(event), courier.canvas.pixel_of(other)
    drag_rail(courier, drag, 0.2)
    assert courier.canvas.pixel_of(event) == pytest.approx(before, abs=1e-6)
    assert courier.canvas.pixel_of(other) != pytest.approx(apart, abs=2.0)


@pytest.mark.parametrize("by", [-0.9, 0.0, 0.4])
def test_light_runs_at_45_degrees(courier: MainWindow, drag: Drag, by: float) -> None:
    drag_rail(courier, drag, by)
    drawing = courier.canvas.drawing
    assert drawing is not None
    wide, high = courier.canvas.box.viewPixelSize()
    assert wide == pytest.approx(high, rel=1e-9)
    signals = [stroke for stroke in drawing.strokes if stroke.role is Role.SIGNAL]
    assert signals
    for stroke in signals:
        dx, dt = stroke.points[-1] - stroke.points[0]
        assert abs(dx) == pytest.approx(abs(dt), rel=1e-9)


def test_dragging_there_and_back_is_where_it_was(courier: MainWindow, drag: Drag) -> None:
    before = courier.session.view
    drag_rail(courier, drag, 1.1)
    drag_rail(courier, drag, -1.1)
    now = courier.session.view
    assert now.frame.rapidity == pytest.approx(before.frame.rapidity, abs=1e-12)
    assert now.window.x0 == pytest.approx(before.window.x0, rel=1e-9)


@pytest.mark.parametrize("label", ["Outbound", "Homebound"])
def test_clicking_a_flag_slides_to_its_frame(courier: MainWindow, qtbot: QtBot, label: str) -> None:
    rail = courier.view_bar.rail
    seen: list[float] = []
    courier.session.view_changed.connect(lambda: seen.append(rapidity(courier)))
    flag = next(item for item in rail.placed_flags() if item.flag.label == label)
    qtbot.mouseClick(
        rail, Qt.MouseButton.LeftButton, pos=flag.box.center().toPoint() + QPoint(1, 0)
    )
    qtbot.waitUntil(lambda: not rail.is_moving)
    frame = courier.session.resolved.frames[label.lower()]
    assert courier.session.view.frame == frame
    assert seen[-1] == frame.rapidity
    # on the way it never turns back
    ahead = math.copysign(1.0, frame.rapidity)
    assert all(0.0 <= ahead * a <= ahead * b + 1e-12 for a, b in pairwise(seen))


def test_the_flag_of_the_view_leads_nowhere(courier: MainWindow, qtbot: QtBot) -> None:
    rail = courier.view_bar.rail
    flag = next(item for item in rail.placed_flags() if item.flag.label == "Station")
    before = courier.session.view
    qtbot.mouseClick(rail, Qt.MouseButton.LeftButton, pos=flag.box.center().toPoint())
    assert courier.session.view == before


@pytest.mark.parametrize("width", [240, 500, 900, 1600])
def test_flags_do_not_cover_each_other(courier: MainWindow, width: int) -> None:
    rail = courier.view_bar.rail
    rail.resize(width, rail.height())
    courier.session.select(("brakes",))
    boxes = [flag.box for flag in rail.placed_flags()]
    assert len(boxes) == 4
    for k, box in enumerate(boxes):
        assert not any(box.intersects(other) for other in boxes[k + 1 :])


def test_an_accelerating_observer_has_a_flag_where_it_is_met(courier: MainWindow) -> None:
    courier.session.select(("homeward",))
    flags = {flag.flag.label: flag.flag for flag in courier.view_bar.rail.placed_flags()}
    assert flags["Courier, now"].rapidity == pytest.approx(-OUTBOUND, rel=1e-12)


@pytest.mark.parametrize(
    ("typed", "expected"),
    [
        ("0.6", OUTBOUND),
        ("0.6 c", OUTBOUND),
        ("-0.8", math.atanh(-0.8)),
        ("−0.8 c", math.atanh(-0.8)),
        ("φ = 1.2", 1.2),
        ("phi=1.2", 1.2),
        ("β = 3/5", OUTBOUND),
        ("speed", OUTBOUND),
        ("150000 km/s", math.atanh(150000.0 / 299792.458)),
    ],
)
def test_typing_a_velocity(courier: MainWindow, qtbot: QtBot, typed: str, expected: float) -> None:
    bar = courier.view_bar
    bar.velocity.setText(typed)
    qtbot.keyClick(bar.velocity, Qt.Key.Key_Return)
    qtbot.waitUntil(lambda: not bar.rail.is_moving)
    assert rapidity(courier) == pytest.approx(expected, rel=1e-12)
    assert bar.fault.text() == ""


@pytest.mark.parametrize(("typed", "frame"), [("0.6", "outbound"), ("speed", "outbound")])
def test_typing_the_velocity_of_a_frame_leads_to_that_frame(
    courier: MainWindow, qtbot: QtBot, typed: str, frame: str
) -> None:
    bar = courier.view_bar
    bar.velocity.setText(typed)
    qtbot.keyClick(bar.velocity, Qt.Key.Key_Return)
    qtbot.waitUntil(lambda: not bar.rail.is_moving)
    assert courier.session.view.frame.id == frame
    assert "Outbound" in bar.where.text()


@pytest.mark.parametrize(
    ("typed", "said"),
    [
        ("1.2", "light"),
        ("1", "light"),
        ("5 kg", "kg"),
        ("3 yr", "velocity"),
        ("fast", "fast"),
        ("", ""),
        ("9**9**9", ""),
        ("1e400", ""),
        ("nan", ""),
    ],
)
def test_what_is_no_velocity_changes_nothing(
    courier: MainWindow, qtbot: QtBot, typed: str, said: str
) -> None:
    before = courier.session.view
    courier.view_bar.velocity.setText(typed)
    qtbot.keyClick(courier.view_bar.velocity, Qt.Key.Key_Return)
    assert courier.session.view == before
    assert courier.view_bar.fault.text()
    assert said in courier.view_bar.fault.text()
    assert courier.view_bar.fault.isVisible()
    qtbot.keyClicks(courier.view_bar.velocity, "0")
    assert not courier.view_bar.fault.isVisible()


def test_arrow_keys_step_and_home_goes_to_the_base_frame(courier: MainWindow, qtbot: QtBot) -> None:
    rail = courier.view_bar.rail
    for _ in range(4):
        qtbot.keyClick(rail, Qt.Key.Key_Right)
    qtbot.keyClick(rail, Qt.Key.Key_Left)
    assert rapidity(courier) == pytest.approx(0.15, abs=1e-12)
    qtbot.keyClick(rail, Qt.Key.Key_Home)
    qtbot.waitUntil(lambda: not rail.is_moving)
    assert courier.session.view.frame == courier.session.resolved.base


def test_it_is_dragged_no_further_than_numbers_reach(courier: MainWindow, drag: Drag) -> None:
    for _ in range(3):
        drag_rail(courier, drag, 8.0)
    assert rapidity(courier) == 12.0
    assert courier.canvas.drawing is not None
    assert all(np.all(np.isfinite(stroke.points)) for stroke in courier.canvas.drawing.strokes)


def test_every_mark_of_the_ruler_is_in_sight(courier: MainWindow) -> None:
    rail = courier.view_bar.rail
    assert rail.width() > 600
    for sign in (-1.0, 1.0):
        assert 0.0 < rail.x_of(sign * math.atanh(0.999)) < rail.width()


def test_labels_find_free_places_once_the_rail_stands(
    courier: MainWindow, drag: Drag, qtbot: QtBot
) -> None:
    canvas = courier.canvas
    drag_rail(courier, drag, 0.5)
    dragged = canvas.drawing
    qtbot.waitUntil(lambda: canvas.drawing is not dragged, timeout=3000)
    assert canvas.drawing is not None
    assert dragged is not None
    assert canvas.drawing.window == dragged.window
    assert not any(label.overlaps for label in canvas.drawing.labels)
