"""Event tables in every format: full precision where it is read by machines, nothing unescaped."""

from __future__ import annotations

import csv
import io
import json
import math
import xml.etree.ElementTree as ET
from functools import cache
from pathlib import Path

import pytest

from tauline.errors import ExportError
from tauline.export.tables import write_table
from tauline.export.text import write_text
from tauline.readouts import event_table
from tauline.resolve import Resolved, resolve
from tauline.resources import scenarios_folder
from tauline.scenario.read import parse, read

AWKWARD = """
tauline = 1
[units]
time = "ns"
length = "m"
[[frame]]
id = "lab"
label = "Lab & <co>"
[[frame]]
id = "probe"
label = "Probe | 50 %"
velocity = "0.6 c"
[[event]]
id = "formula"
label = "=HYPERLINK(1)"
t = 0.1
x = -3
[[event]]
id = "pipes"
label = 'a|b \\ "c", d_{e}'
t = 1
x = 2
[[event]]
id = "minus"
label = "-1"
t = -0.0
x = 0
"""
FORMATS = ("csv", "tsv", "md", "latex", "html", "json")


@cache
def awkward() -> Resolved:
    resolved = resolve(parse(AWKWARD).scenario)
    assert resolved.faults == ()
    return resolved


@cache
def courier() -> Resolved:
    return resolve(read(scenarios_folder() / "courier.toml").scenario)


def test_csv_is_rfc_4180_with_every_digit() -> None:
    """RFC 4180 section 2: CRLF, quotes doubled, as many fields on each line."""
    table = event_table(courier())
    text = write_table(table, "csv")
    assert text.endswith("\r\n")
    assert text.count("\n") == text.count("\r\n") == len(table.rows) + 1
    rows = list(csv.reader(io.StringIO(text, newline="")))
    assert rows[0][:3] == ["event", "t/yr (Station)", "x/ly (Station)"]
    assert {len(row) for row in rows} == {1 + 2 * len(table.frames)}
    for row, cells in zip(table.rows, rows[1:], strict=True):
        numbers = [value for place in row.coordinates for value in (place.t, place.x)]
        assert [float(cell) for cell in cells[1:]] == numbers


@pytest.mark.parametrize(("form", "sign"), [("csv", ","), ("tsv", "\t")])
def test_a_spreadsheet_takes_no_label_for_a_formula(form: str, sign: str) -> None:
    text = write_table(event_table(awkward()), form)
    rows = list(csv.reader(io.StringIO(text, newline=""), delimiter=sign))
    assert rows[1][0] == "'=HYPERLINK(1)"
    assert rows[3][0] == "'-1"
    # a number may begin with its sign
    assert float(rows[1][2]) == -3.0
    assert rows[1][2].startswith("-")


def test_markdown_has_as_many_cells_on_every_line() -> None:
    text = write_table(event_table(awkward(), None, "pipes"), "md")
    lines = text.splitlines()
    bare = [line.replace("\\\\", "").replace("\\|", "") for line in lines]
    assert {line.count("|") for line in bare} == {1 + 1 + 4 + 1}
    assert set(lines[1]) <= set("|-: ")
    assert "a\\|b" in text
    assert {len(line) for line in lines} == {len(lines[0])}


def test_latex_escapes_words_and_sets_numbers_in_their_columns() -> None:
    text = write_table(event_table(awkward(), None, "pipes"), "latex")
    assert "\\begin{tabular}{lSSSSl}" in text
    assert "Lab \\& <co>" in text
    assert "Probe | 50 \\%" in text
    assert "\\textbackslash{}" in text
    assert "d\\_\\{e\\}" in text
    assert "{$t/\\mathrm{ns}$}" in text
    body = text.split("\\midrule\n")[1].split("\\bottomrule")[0].strip().splitlines()
    for line in body:
        assert line.endswith(" \\\\")
        cells = line.removesuffix(" \\\\").replace("\\&", "").split(" & ")
        assert len(cells) == 6
        for cell in cells[1:5]:
            assert math.isfinite(float(cell))


def test_html_is_one_well_formed_table_with_scopes() -> None:
    table = event_table(awkward(), None, "pipes")
    root = ET.fromstring(write_table(table, "html"))
    assert root.tag == "table"
    heads = root.findall("./thead/tr/th")
    assert all("scope" in head.attrib for head in heads)
    assert "".join(heads[1].itertext()) == "Lab & <co>"
    rows = root.findall("./tbody/tr")
    assert len(rows) == 3
    for row, found in zip(table.rows, rows, strict=True):
        cells = found.findall("td")
        assert len(cells) == 5
        assert float(cells[0].attrib["data-value"]) == row.coordinates[0].t
        assert found.find("th") is not None


def test_json_is_as_agreed_and_loses_nothing() -> None:
    table = event_table(courier())
    document = json.loads(write_table(table, "json"))
    assert list(document) == ["units", "frames", "events", "worldlines"]
    assert document["units"] == {"time": "yr", "length": "ly"}
    for frame, found in zip(table.frames, document["frames"], strict=True):
        assert list(found) == ["id", "label", "rapidity", "beta", "one_minus_beta"]
        assert found["rapidity"] == frame.rapidity
        assert found["beta"] + found["one_minus_beta"] == pytest.approx(1.0)
    for row, found in zip(table.rows, document["events"], strict=True):
        assert list(found) == ["id", "label", "coordinates", "on"]
        for frame, place in zip(table.frames, row.coordinates, strict=True):
            expected = {"t": place.t, "x": place.x, "u": place.u, "v": place.v}
            assert found["coordinates"][frame.id] == expected
    lines = {line["id"]: line for line in document["worldlines"]}
    assert set(lines["courier"]) == {"id", "label", "start", "end", "proper_time"}
    assert lines["station"]["end"] is None, "an endless line has no end"


def test_a_velocity_near_that_of_light_is_told_from_it() -> None:
    text = 'tauline = 1\n[[frame]]\nid = "a"\n[[frame]]\nid = "b"\nrapidity = 25\n'
    resolved = resolve(parse(text).scenario)
    fast = json.loads(write_table(event_table(resolved), "json"))["frames"][1]
    assert fast["beta"] == 1.0
    # 1 − tanh φ = 2/(e^{2φ} + 1)
    assert fast["one_minus_beta"] == pytest.approx(2.0 / (math.exp(50.0) + 1.0), rel=1e-12)


@pytest.mark.parametrize("form", FORMATS)
def test_a_scenario_without_events_gives_an_empty_table(form: str) -> None:
    text = write_table(event_table(resolve(parse("tauline = 1").scenario)), form)
    assert text.endswith("\n")


@pytest.mark.parametrize("form", FORMATS)
def test_the_same_table_each_time(form: str) -> None:
    again = resolve(read(scenarios_folder() / "courier.toml").scenario)
    assert write_table(event_table(courier()), form) == write_table(event_table(again), form)


def test_a_format_that_is_not_written_is_named_with_those_that_are() -> None:
    with pytest.raises(ExportError, match="csv, tsv, md, latex, html, json"):
        write_table(event_table(courier()), "xls")


def test_a_text_is_written_with_its_own_line_ends(tmp_path: Path) -> None:
    path = tmp_path / "table.csv"
    write_text(path, "a,β\r\n1,2\r\n")
    assert path.read_bytes() == "a,β\r\n1,2\r\n".encode()
    with pytest.raises(ExportError, match="nowhere"):
        write_text(tmp_path / "nowhere" / "table.csv", "")
