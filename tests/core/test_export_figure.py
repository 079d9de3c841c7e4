"""Figures as files: what is in them, where it is, and what is refused."""

from __future__ import annotations

import io
import re
import subprocess
import sys
import xml.etree.ElementTree as ET
from functools import cache
from pathlib import Path

import numpy as np
import pytest
from PIL import Image
from pypdf import PdfReader

from tauline.errors import ExportError, UnknownIdError
from tauline.export.figure import (
    DEFAULT_WIDTH,
    GREATEST_HEIGHT,
    POINTS_PER_MM,
    export_figure,
    figure_bytes,
)
from tauline.export.measure import PrintMeasure
from tauline.export.wrap import wrapped
from tauline.figure.drawing import Role, Run
from tauline.figure.style import PRINT
from tauline.figure.view import default_view
from tauline.resolve import Resolved, resolve
from tauline.resources import scenarios_folder
from tauline.scenario.read import parse, read

SVG = "{http://www.w3.org/2000/svg}"
SHIPPED = ("courier", "rod-and-shed", "three-beacons")


@cache
def shipped(name: str) -> Resolved:
    return resolve(read(scenarios_folder() / f"{name}.toml").scenario)


def svg_of(resolved: Resolved, frame: str | None = None) -> ET.Element:
    return ET.fromstring(figure_bytes(resolved, default_view(resolved, frame), "svg"))


def centre_of(group: ET.Element) -> tuple[float, float]:
    """Centre of a drawn dot, from the bounds of its path."""
    path = next(group.iter(f"{SVG}path")).attrib["d"]
    numbers = np.array(re.findall(r"-?\d+(?:\.\d+)?", path), dtype=float).reshape(-1, 2)
    x, y = 0.5 * (numbers.min(axis=0) + numbers.max(axis=0))
    return float(x), float(y)


# --- places -----------------------------------------------------------------------------------


@pytest.mark.parametrize("frame", ["station-frame", "outbound", "homebound"])
def test_dots_in_the_svg_are_where_the_events_are(frame: str) -> None:
    courier = shipped("courier")
    view = default_view(courier, frame)
    root = svg_of(courier, frame)
    groups = {group.attrib["id"]: group for group in root.iter(f"{SVG}g") if "id" in group.attrib}
    width = float(root.attrib["viewBox"].split()[2])
    scale = width / view.window.width
    top = view.window.t1
    found = 0
    for event in courier.events.values():
        group = groups.get(f"event:{event.id}")
        if group is not None:
            x, y = centre_of(group)
            place_x, place_t = view.chart.to_chart(event.point)
            assert x / scale + view.window.x0 == pytest.approx(place_x, abs=1e-4)
            assert top - y / scale == pytest.approx(place_t, abs=1e-4)
            found += 1
    assert found >= 6


def test_ids_in_the_svg_name_the_objects_and_are_there_once() -> None:
    root = svg_of(shipped("courier"))
    ids = [element.attrib["id"] for element in root.iter() if "id" in element.attrib]
    assert len(ids) == len(set(ids))
    assert {"worldline:courier", "event:return", "signal:greeting"} <= set(ids)


def test_units_are_the_same_both_ways_on_paper() -> None:
    """Light in the file runs at 45°."""
    root = svg_of(shipped("courier"), "outbound")
    rays = [
        group
        for group in root.iter(f"{SVG}g")
        if re.fullmatch(r"signal:greeting(:\d+)?", group.attrib.get("id", ""))
    ]
    lines = 0
    for ray in rays:
        path = next(ray.iter(f"{SVG}path")).attrib["d"]
        numbers = np.array(re.findall(r"-?\d+(?:\.\d+)?", path), dtype=float).reshape(-1, 2)
        if len(numbers) == 2:
            dx, dy = numbers[1] - numbers[0]
            assert dx == pytest.approx(-dy, abs=1e-5)
            lines += 1
    assert lines >= 10


# --- words ------------------------------------------------------------------------------------


@pytest.mark.parametrize("name", SHIPPED)
def test_the_words_of_a_pdf_are_text(name: str) -> None:
    resolved = shipped(name)
    reader = PdfReader(io.BytesIO(figure_bytes(resolved, default_view(resolved), "pdf")))
    (page,) = reader.pages
    text = page.extract_text()
    for event in resolved.events.values():
        if not event.owner:
            assert event.label in text
    assert "Seen from" in text
    assert "t′" in text.replace(" ", "").replace("\n", "")
    assert reader.metadata is not None
    assert reader.metadata.title == resolved.scenario.title


def test_the_words_of_an_svg_are_text() -> None:
    root = svg_of(shipped("courier"))
    texts = ["".join(element.itertext()) for element in root.iter(f"{SVG}text")]
    assert {"Departure", "Return", "Brakes on", "Seen from Station;"} <= {
        text.strip() for text in texts
    }
    assert not any(text.startswith(" ") for text in texts), "SVG drops spaces in front"
    assert root.findtext(f"{SVG}title") == "A courier there and back"


def test_signs_of_markup_other_scripts_and_controls_do_no_harm() -> None:
    label = r"<&> $x^2$ \\frac 日本 \u0007 end"
    resolved = resolve(
        parse(f'tauline = 1\n[[event]]\nid = "a"\nlabel = "{label}"\nt = 0\nx = 0\n').scenario
    )
    root = svg_of(resolved)
    texts = ["".join(element.itertext()) for element in root.iter(f"{SVG}text")]
    assert r"<&> $x^2$ \frac 日本 end" in texts
    for kind in ("pdf", "png"):
        assert figure_bytes(resolved, default_view(resolved), kind)


def test_a_caption_is_wrapped_between_words() -> None:
    measure = PrintMeasure(PRINT)
    runs = (Run("Seen from the frame of "), Run("t", "italic"), Run(" and of many others too."))
    lines = wrapped(runs, 60.0, measure)
    assert len(lines) > 2
    # what has no space between stays together
    close = wrapped((Run("slow"), Run("; "), Run("t", "italic"), Run("′")), 1.0, measure)
    assert ["".join(run.text for run in line) for line in close] == ["slow; ", "t′"]
    joined = " ".join("".join(run.text for run in line).rstrip() for line in lines)
    assert joined == "Seen from the frame of t and of many others too."
    for line in lines:
        stripped = (*line[:-1], Run(line[-1].text.rstrip(), line[-1].style))
        assert measure.size(stripped, Role.CAPTION)[0] <= 60.0


# --- pages ------------------------------------------------------------------------------------


def size_mm(data: bytes) -> tuple[float, float]:
    box = PdfReader(io.BytesIO(data)).pages[0].mediabox
    return float(box.width) / POINTS_PER_MM, float(box.height) / POINTS_PER_MM


def test_sizes_are_those_asked_for() -> None:
    courier = shipped("courier")
    view = default_view(courier)
    assert size_mm(figure_bytes(courier, view, "pdf", width_mm=86.0))[0] == pytest.approx(86.0)
    both = figure_bytes(courier, view, "pdf", width_mm=86.0, height_mm=60.0)
    assert size_mm(both) == pytest.approx((86.0, 60.0), abs=0.01)


def test_a_png_has_300_pixels_to_the_inch() -> None:
    courier = shipped("courier")
    data = figure_bytes(courier, default_view(courier), "png", width_mm=50.8)
    with Image.open(io.BytesIO(data)) as image:
        assert image.width == 600
        assert image.info["Title"] == "A courier there and back"
        corner = image.convert("RGB").getpixel((0, 0))
    assert corner == (255, 255, 255)


@pytest.mark.parametrize("window", [(0.0, 4000.0), (0.0, 1e-4)])
def test_a_page_stays_a_page_whatever_the_window(
    window: tuple[float, float], tmp_path: Path
) -> None:
    path = tmp_path / "f.pdf"
    export_figure(shipped("courier"), path, time_window=window)
    width, height = size_mm(path.read_bytes())
    assert 20.0 <= width <= DEFAULT_WIDTH + 0.01
    assert 20.0 <= height <= GREATEST_HEIGHT + 15.0


def test_a_time_window_is_in_the_frame_and_units_of_the_scenario(tmp_path: Path) -> None:
    path = tmp_path / "f.svg"
    export_figure(shipped("courier"), path, time_window=(4.0, 8.0), place_window=(0.0, 4.0))
    texts = {
        "".join(element.itertext())
        for element in ET.fromstring(path.read_bytes()).iter(f"{SVG}text")
    }
    assert "Brakes on" in texts
    assert "Departure" not in texts
    assert "Return" not in texts


# --- the same each time -----------------------------------------------------------------------


@pytest.mark.parametrize("kind", ["pdf", "svg", "png"])
def test_the_same_scenario_gives_the_same_bytes(kind: str) -> None:
    again = resolve(read(scenarios_folder() / "three-beacons.toml").scenario)
    one, other = (
        figure_bytes(resolved, default_view(resolved), kind)
        for resolved in (shipped("three-beacons"), again)
    )
    assert one == other


def test_export_does_without_pyplot() -> None:
    """Pyplot would choose a window system; a figure needs none."""
    code = (
        "import sys; from tauline.export.figure import figure_bytes;"
        "assert 'matplotlib' not in sys.modules;"
        "from tauline.scenario.read import parse; from tauline.resolve import resolve;"
        "from tauline.figure.view import default_view;"
        "r = resolve(parse('tauline = 1').scenario);"
        "assert figure_bytes(r, default_view(r), 'svg');"
        "assert 'matplotlib.pyplot' not in sys.modules"
    )
    subprocess.run([sys.executable, "-c", code], check=True)


# --- what is refused --------------------------------------------------------------------------


@pytest.mark.parametrize("name", ["f.jpeg", "f", "f.eps"])
def test_a_format_that_is_not_written_is_named_with_those_that_are(
    name: str, tmp_path: Path
) -> None:
    with pytest.raises(ExportError, match=r"\.pdf, \.svg, \.png"):
        export_figure(shipped("courier"), tmp_path / name)
    assert list(tmp_path.iterdir()) == []


def test_a_frame_there_is_not_is_named_with_those_there_are(tmp_path: Path) -> None:
    with pytest.raises(UnknownIdError, match="station-frame, outbound, homebound"):
        export_figure(shipped("courier"), tmp_path / "f.svg", frame="inbound")


@pytest.mark.parametrize("side", [0.0, -5.0, 1e9, float("nan"), float("inf")])
def test_a_side_that_is_no_page_is_refused(side: float, tmp_path: Path) -> None:
    with pytest.raises(ExportError, match="mm"):
        export_figure(shipped("courier"), tmp_path / "f.svg", width_mm=side)
    with pytest.raises(ExportError, match="mm"):
        export_figure(shipped("courier"), tmp_path / "f.svg", height_mm=side)


@pytest.mark.parametrize(
    "window", [(3.0, 3.0), (4.0, 2.0), (0.0, float("inf")), (float("nan"), 1.0)]
)
def test_an_empty_or_endless_window_is_refused(window: tuple[float, float], tmp_path: Path) -> None:
    with pytest.raises(ExportError, match="window"):
        export_figure(shipped("courier"), tmp_path / "f.svg", time_window=window)


def test_a_place_that_cannot_be_written_is_named_and_what_was_there_stays(tmp_path: Path) -> None:
    missing = tmp_path / "nowhere" / "f.svg"
    with pytest.raises(ExportError, match="nowhere"):
        export_figure(shipped("courier"), missing)
    folder = tmp_path / "folder.svg"
    folder.mkdir()
    with pytest.raises(ExportError, match=r"folder\.svg"):
        export_figure(shipped("courier"), folder)
    assert [path.name for path in tmp_path.iterdir()] == ["folder.svg"]
