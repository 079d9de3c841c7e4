"""The scenarios that ship: nothing wrong with them, and a picture from every frame."""

from __future__ import annotations

from pathlib import Path

import pytest

from tauline.export.measure import PrintMeasure
from tauline.figure.diagram import diagram
from tauline.figure.style import PRINT
from tauline.figure.view import default_view
from tauline.readouts import event_table
from tauline.resolve import resolve
from tauline.resources import scenarios_folder
from tauline.scenario.read import read
from tauline.scenario.write import to_text

FILES = sorted(scenarios_folder().glob("*.toml"))


def test_they_are_there() -> None:
    assert {"courier", "rod-and-shed", "three-beacons"} <= {path.stem for path in FILES}


@pytest.mark.parametrize("path", FILES, ids=lambda path: path.stem)
def test_nothing_is_wrong_and_every_frame_has_a_picture(path: Path) -> None:
    loaded = read(path)
    resolved = resolve(loaded.scenario)
    assert [str(diagnosis) for diagnosis in resolved.diagnoses] == []
    assert loaded.scenario.title
    assert loaded.scenario.description
    assert to_text(loaded.scenario, loaded.source) == loaded.source.text
    for frame in resolved.frames:
        view = default_view(resolved, frame)
        drawing = diagram(resolved, view, 360.0 / view.window.width, PrintMeasure(PRINT))
        placed = [label for label in drawing.labels if not label.overlaps]
        # in a crowded corner a label may have to cross a line; most find a place of their own
        assert len(placed) >= 0.9 * len(drawing.labels)
        assert len(drawing.markers) > 2


def test_rod_and_shed_who_says_it_fits() -> None:
    """Ends inside at one time of the shed; at no time of the rod, which is 10 m to its 4.8 m."""
    resolved = resolve(read(scenarios_folder() / "rod-and-shed.toml").scenario)
    rows = {row.id: row for row in event_table(resolved).rows}
    shed, rod = 0, 1
    assert rows["tail-in"].coordinates[shed].t < rows["head-out"].coordinates[shed].t
    assert rows["tail-in"].coordinates[rod].t > rows["head-out"].coordinates[rod].t
    assert rows["head-then"].coordinates[shed].x == pytest.approx(6.0, rel=1e-12)


def test_three_beacons_come_in_another_order() -> None:
    resolved = resolve(read(scenarios_folder() / "three-beacons.toml").scenario)
    rows = {row.id: row for row in event_table(resolved).rows}
    flashes = ("west-flash", "middle-flash", "east-flash")
    times = [[rows[name].coordinates[k].t for name in flashes] for k in range(3)]
    lane, ferry, tug = times
    assert lane == sorted(lane)
    assert ferry == sorted(ferry, reverse=True)
    assert tug == pytest.approx([0.0, 0.0, 0.0], abs=1e-12)
