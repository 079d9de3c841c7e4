"""The panels: numbers for a selection, fields, the event table, objects, problems."""

# mypy: allow-untyped-calls
# pytest-qt declares no types for its mouse and keys
from __future__ import annotations

import math
from pathlib import Path

import pytest
from PySide6.QtCore import QPoint, Qt
from PySide6.QtGui import QGuiApplication
from PySide6.QtWidgets import QLineEdit, QTableWidget, QTreeWidgetItem
from pytestqt.qtbot import QtBot

from tauline_app.main_window import MainWindow
from tauline_app.panels.properties import FieldLine

# closed forms: five years out and five back on the station's clocks, each 4/5 of that for the
# courier, and between them hyperbolic motion at one g from 0.6 c to −0.6 c
G = 9.80665 * 31_557_600.0 / 299_792_458.0
STATION_AGE = 10.0 + 2.0 * math.sinh(math.atanh(0.6)) / G
COURIER_AGE = 8.0 + 2.0 * math.atanh(0.6) / G

FAULTY = """\
tauline = 1
title = "Half of it is wrong"

[[event]]
id = "origin"
label = "Origin"
t = 0
x = 0

[[worldline]]
id = "home"
label = "Home"
x = 0
clock = { reads = 0, at = "origin" }

[[worldline]]
id = "racer"
label = "Racer"
through = "origin"
velocity = "1.2 c"
clock = { reads = 0, at = "origin" }

[[event]]
id = "met"
on = "racer"
proper_time = 1

[[signal]]
id = "call"
from = "nowhere"
to = "home"
"""


def cells(table: QTableWidget) -> list[list[str]]:
    """The text of a table, by rows."""
    columns, rows = range(table.columnCount()), range(table.rowCount())
    found = [[table.item(row, column) for column in columns] for row in rows]
    return [[item.text() if item is not None else "" for item in row] for row in found]


def number_shown(window: MainWindow, quantity: str) -> str:
    return next(row[1] for row in cells(window.readouts.table) if quantity in row[0])


def number_copied(window: MainWindow, quantity: str) -> float:
    table = window.readouts.table
    row = next(k for k, row in enumerate(cells(table)) if quantity in row[0])
    table.selectRow(row)
    window.readouts.copy()
    return float(QGuiApplication.clipboard().text())


def field(window: MainWindow, key: str) -> FieldLine:
    return window.properties.lines[key]


def type_in(qtbot: QtBot, line: QLineEdit, text: str, end: Qt.Key = Qt.Key.Key_Return) -> None:
    line.setFocus()
    line.selectAll()
    qtbot.keyClicks(line, text)
    qtbot.keyClick(line, end)


def item_of(window: MainWindow, object_id: str) -> QTreeWidgetItem:
    item = window.objects.item_of(object_id)
    assert item is not None
    return item


def click_object(window: MainWindow, qtbot: QtBot, object_id: str) -> None:
    item = item_of(window, object_id)
    window.objects.scrollToItem(item)
    at = window.objects.visualItemRect(item).center()
    qtbot.mouseClick(window.objects.viewport(), Qt.MouseButton.LeftButton, pos=at)


# --- readouts -----------------------------------------------------------------------------------


@pytest.mark.parametrize("frame", ["station-frame", "outbound", "homebound", "courier.leg-3"])
def test_both_ages_in_every_frame(courier: MainWindow, frame: str) -> None:
    session = courier.session
    session.look_from(session.resolved.frame(frame))
    session.select(("departure", "return"))
    assert number_copied(courier, "Station") == pytest.approx(STATION_AGE, rel=1e-12)
    assert number_copied(courier, "Courier") == pytest.approx(COURIER_AGE, rel=1e-12)


def test_every_number_has_its_unit_and_frame(courier: MainWindow) -> None:
    courier.session.look_from(courier.session.resolved.frames["homebound"])
    courier.session.select(("departure", "brakes"))
    assert number_shown(courier, "Δt") == "8.5 yr"
    assert number_shown(courier, "Δx") == "7.5 ly"
    assert number_shown(courier, "Δτ") == "4 yr"
    frames = {row[0]: row[2] for row in cells(courier.readouts.table)}
    assert frames["time difference  Δt"] == "Homebound"
    assert frames["proper time, straight  Δτ"] == "any"


def test_readouts_follow_the_view(courier: MainWindow) -> None:
    courier.session.select(("departure", "return"))
    at_rest = number_shown(courier, "Δx")
    courier.session.look_from(courier.session.resolved.frames["outbound"])
    assert at_rest == "0 ly"
    assert number_shown(courier, "Δx") == "−8.5898 ly"


def test_digits_are_chosen_and_copies_keep_all(courier: MainWindow, qtbot: QtBot) -> None:
    courier.session.select(("departure", "return"))
    courier.readouts._digits.setValue(3)
    assert number_shown(courier, "Δt") == "11.5 yr"
    courier.readouts._digits.setValue(12)
    assert number_shown(courier, "Δt") == f"{STATION_AGE:.12g} yr"
    courier.readouts._digits.setValue(3)
    courier.readouts.table.selectRow(0)
    courier.readouts.table.setFocus()
    QGuiApplication.clipboard().clear()
    qtbot.keyClick(courier.readouts.table, Qt.Key.Key_C, Qt.KeyboardModifier.ControlModifier)
    assert float(QGuiApplication.clipboard().text()) == pytest.approx(STATION_AGE, rel=1e-14)


def test_without_a_selection_a_hint_stands_there(courier: MainWindow) -> None:
    assert courier.readouts._hint.isVisible()
    courier.session.select(("brakes",))
    assert not courier.readouts._hint.isVisible()
    assert courier.readouts.table.rowCount() >= 3


# --- properties ---------------------------------------------------------------------------------


def test_editing_a_velocity_and_undoing_it(courier: MainWindow, qtbot: QtBot) -> None:
    before = courier.session.scenario
    click_object(courier, qtbot, "courier")
    assert courier.session.selection == ("courier",)
    type_in(qtbot, field(courier, "velocity"), "0.8 c")
    after = courier.session.scenario
    assert after is not before
    assert courier.session.resolved.events["brakes"].point.tolist() == pytest.approx([1.0, 9.0])
    assert courier.menus.undo.text() == "&Undo Change velocity of courier"
    assert courier.isWindowModified()
    courier.menus.undo.trigger()
    assert courier.session.scenario is before
    assert not courier.isWindowModified()
    assert field(courier, "velocity").text() == "speed"
    courier.menus.redo.trigger()
    assert courier.session.scenario is after


def test_undo_keys_work_while_a_field_has_the_cursor(courier: MainWindow, qtbot: QtBot) -> None:
    courier.activateWindow()
    qtbot.waitUntil(courier.isActiveWindow)
    before = courier.session.scenario
    courier.session.select(("courier",))
    line = field(courier, "velocity")
    type_in(qtbot, line, "0.8 c")
    after = courier.session.scenario
    control, shift = Qt.KeyboardModifier.ControlModifier, Qt.KeyboardModifier.ShiftModifier
    qtbot.keyClick(line, Qt.Key.Key_Z, control)
    assert courier.session.scenario is before
    qtbot.keyClick(line, Qt.Key.Key_Z, control | shift)
    assert courier.session.scenario is after
    qtbot.keyClick(line, Qt.Key.Key_Z, control)
    qtbot.keyClick(line, Qt.Key.Key_Y, control)
    assert courier.session.scenario is after
    # what is being typed is taken back by itself, not together with the document
    line.selectAll()
    qtbot.keyClicks(line, "0.1")
    qtbot.keyClick(line, Qt.Key.Key_Z, control)
    assert courier.session.scenario is after


def test_leaving_a_field_makes_the_change_and_escape_takes_it_back(
    courier: MainWindow, qtbot: QtBot
) -> None:
    courier.session.select(("brakes",))
    before = courier.session.scenario
    type_in(qtbot, field(courier, "time"), "4 yr", Qt.Key.Key_Escape)
    assert field(courier, "time").text() == "coasting"
    assert courier.session.scenario is before
    type_in(qtbot, field(courier, "time"), "4 yr", Qt.Key.Key_Tab)
    courier.canvas.setFocus()
    assert courier.session.scenario is not before
    assert courier.session.resolved.events["brakes"].point.tolist() == pytest.approx([1.6, 6.4])


def test_a_parameter_moves_all_that_hangs_on_it(courier: MainWindow, qtbot: QtBot) -> None:
    type_in(qtbot, field(courier, "speed"), "0.8 c")
    courier.session.select(("departure", "return"))
    age = 10.0 + 2.0 * math.sinh(math.atanh(0.8)) / G
    assert number_copied(courier, "Station") == pytest.approx(age, rel=1e-12)
    assert courier.session.resolved.frames["outbound"].rapidity == pytest.approx(math.atanh(0.8))


def test_a_superluminal_velocity_is_told_at_its_field(courier: MainWindow, qtbot: QtBot) -> None:
    courier.session.select(("courier",))
    type_in(qtbot, field(courier, "velocity"), "1.3 c")
    assert "light" in field(courier, "velocity").fault.text()
    assert field(courier, "velocity").fault.isVisible()
    assert courier.docks["Problems"].windowTitle() != "Problems"
    # the rest is still drawn
    assert courier.canvas.pixel_of("departure") is not None
    courier.menus.undo.trigger()
    assert courier.docks["Problems"].windowTitle() == "Problems"
    assert not field(courier, "velocity").fault.isVisible()


@pytest.mark.parametrize("text", ["fast", "5 kg", "2 yr", "1e400", "nan", "((((", "0.6 c +"])
def test_nonsense_in_a_field_is_told_and_nothing_is_lost(
    courier: MainWindow, qtbot: QtBot, text: str
) -> None:
    before = courier.session.scenario
    courier.session.select(("courier",))
    type_in(qtbot, field(courier, "velocity"), text)
    assert field(courier, "velocity").text() == text
    assert field(courier, "velocity").fault.text()
    while courier.menus.undo.isEnabled():
        courier.menus.undo.trigger()
    assert courier.session.scenario is before


def test_renaming_renames_everywhere(courier: MainWindow, qtbot: QtBot) -> None:
    courier.session.select(("brakes",))
    type_in(qtbot, field(courier, "id"), "turnround")
    assert courier.session.selection == ("turnround",)
    assert "turnround" in courier.session.resolved.events
    assert courier.session.resolved.states["now-at-brakes"] == "resolved"
    assert not courier.session.resolved.faults


def test_a_dangling_id_is_told_and_mended(courier: MainWindow, qtbot: QtBot) -> None:
    courier.session.select(("now-at-brakes",))
    type_in(qtbot, field(courier, "simultaneous_with"), "nothing")
    assert "nothing" in field(courier, "simultaneous_with").fault.text()
    assert item_of(courier, "now-at-brakes").text(1) == "fault"
    type_in(qtbot, field(courier, "simultaneous_with"), "brakes")
    assert item_of(courier, "now-at-brakes").text(1) == ""
    assert not courier.session.resolved.faults


# --- event table --------------------------------------------------------------------------------


def test_columns_for_chosen_frames(courier: MainWindow) -> None:
    courier.events.menu.aboutToShow.emit()
    for action in courier.events.menu.actions():
        if action.data() == "station-frame":
            action.trigger()
    model = courier.events.model
    across = Qt.Orientation.Horizontal
    heads = [str(model.headerData(k, across)) for k in range(model.columnCount())]
    assert heads[1:] == ["t/yr\nOutbound", "x/ly\nOutbound", "t/yr\nHomebound", "x/ly\nHomebound"]
    rows = {model.data(model.index(k, 0)): k for k in range(model.rowCount())}
    assert model.data(model.index(rows["Brakes on"], 1)) == "4"
    assert model.data(model.index(rows["Brakes on"], 3)) == "8.5"
    right = model.data(model.index(0, 1), Qt.ItemDataRole.TextAlignmentRole)
    assert right & int(Qt.AlignmentFlag.AlignRight)


def test_intervals_from_a_reference_event(courier: MainWindow) -> None:
    events = courier.events
    events.reference.setCurrentIndex(events.reference.findData("brakes"))
    model = events.model
    last = model.columnCount() - 1
    assert model.headerData(last, Qt.Orientation.Horizontal) == "Interval"
    told = {
        model.data(model.index(k, 0)): model.data(model.index(k, last))
        for k in range(model.rowCount())
    }
    assert told["Departure"] == "timelike"
    assert told["Now, outbound"] == "spacelike"


def test_the_table_is_copied_with_all_digits(courier: MainWindow, qtbot: QtBot) -> None:
    courier.events.view.selectRow(1)
    courier.events.view.setFocus()
    qtbot.keyClick(courier.events.view, Qt.Key.Key_C, Qt.KeyboardModifier.ControlModifier)
    lines = QGuiApplication.clipboard().text().splitlines()
    row = next(line for line in lines if "Return" in line).split("\t")
    numbers = [float(cell) for cell in row if cell[:1].isdigit()]
    assert any(number == pytest.approx(STATION_AGE, rel=1e-14) for number in numbers)


def test_rows_and_selection_go_together(courier: MainWindow, qtbot: QtBot) -> None:
    view, model = courier.events.view, courier.events.model
    at = view.visualRect(model.index(2, 0)).center()
    qtbot.mouseClick(view.viewport(), Qt.MouseButton.LeftButton, pos=at)
    assert courier.session.selection == ("brakes",)
    assert item_of(courier, "brakes").isSelected()
    courier.session.select(("return",))
    assert [index.row() for index in view.selectionModel().selectedRows()] == [1]


# --- objects and problems -----------------------------------------------------------------------


def test_objects_by_kind(courier: MainWindow) -> None:
    tree = courier.objects
    groups = [tree.topLevelItem(k) for k in range(tree.topLevelItemCount())]
    kinds = [group.text(0) for group in groups if group is not None]
    assert kinds[:4] == ["Frames", "Worldlines", "Events", "Signals"]
    assert item_of(courier, "courier").text(0) == "Courier"


def test_selecting_in_the_tree_keeps_the_order(courier: MainWindow, qtbot: QtBot) -> None:
    click_object(courier, qtbot, "return")
    at = courier.objects.visualItemRect(item_of(courier, "departure")).center()
    qtbot.mouseClick(
        courier.objects.viewport(),
        Qt.MouseButton.LeftButton,
        Qt.KeyboardModifier.ControlModifier,
        at,
    )
    assert courier.session.selection == ("return", "departure")
    assert number_shown(courier, "Δt").startswith("−11.4531")


@pytest.fixture
def faulty(window: MainWindow, tmp_path: Path) -> MainWindow:
    path = tmp_path / "faulty.toml"
    path.write_text(FAULTY)
    assert window.open_path(path)
    return window


def test_a_faulty_scenario_opens_and_shows_the_rest(faulty: MainWindow) -> None:
    assert faulty.canvas.pixel_of("origin") is not None
    assert {k: item_of(faulty, k).text(1) for k in ("home", "racer", "met", "call")} == {
        "home": "",
        "racer": "fault",
        "met": "waits",
        "call": "fault",
    }
    assert faulty.docks["Problems"].windowTitle() == "Problems (3)"


def test_a_problem_says_where_what_and_how_and_leads_to_its_object(
    faulty: MainWindow, qtbot: QtBot
) -> None:
    table = faulty.problems
    rows = cells(table)
    racer = next(row for row in rows if "racer" in row[1] and "fault" in row[0])
    assert racer[1] == f"racer velocity, line {FAULTY[: FAULTY.index('1.2 c')].count(chr(10)) + 1}"
    assert "light" in racer[2]
    assert racer[3]
    item = table.item(rows.index(racer), 2)
    assert item is not None
    place = table.visualItemRect(item).center()
    qtbot.mouseClick(table.viewport(), Qt.MouseButton.LeftButton, pos=place)
    assert faulty.session.selection == ("racer",)
    assert field(faulty, "velocity").fault.isVisible()
    # a faulty object is not drawn, so nothing is dimmed for it
    pixel = faulty.canvas.pixel_of("origin")
    assert pixel is not None
    image = faulty.canvas.viewport().grab().toImage()
    assert image.pixelColor(QPoint(round(pixel[0]), round(pixel[1]))).lightness() < 60


def test_problem_rows_are_no_higher_than_their_text(faulty: MainWindow) -> None:
    for row in range(faulty.problems.rowCount()):
        assert faulty.problems.rowHeight(row) < 60


def test_mending_the_fault_brings_all_back(faulty: MainWindow, qtbot: QtBot) -> None:
    faulty.session.select(("racer",))
    type_in(qtbot, field(faulty, "velocity"), "0.9 c")
    assert faulty.session.resolved.states["met"] == "resolved"
    faulty.session.select(("call",))
    type_in(qtbot, field(faulty, "from"), "met")
    assert faulty.docks["Problems"].windowTitle() == "Problems"


def test_markup_in_a_title_is_shown_as_it_is(window: MainWindow, tmp_path: Path) -> None:
    path = tmp_path / "markup.toml"
    path.write_text('tauline = 1\ntitle = "a < b & <b>c</b>"\n')
    assert window.open_path(path)
    assert "a &lt; b &amp; &lt;b>c&lt;/b>" in window.properties.heading.text()


def test_the_heading_follows_the_document(courier: MainWindow, qtbot: QtBot) -> None:
    assert "A courier there and back" in courier.properties.heading.text()
    courier.session.select(("brakes",))
    type_in(qtbot, field(courier, "label"), "Turning")
    assert "Turning" in courier.properties.heading.text()
    assert "A courier" not in courier.properties.heading.text()
