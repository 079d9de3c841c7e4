"""The command, as automation uses it: outputs, exit status, one readable line to each error."""

from __future__ import annotations

import json
from pathlib import Path

import pytest
from pypdf import PdfReader

from tauline import cli
from tauline.resources import scenarios_folder

COURIER = scenarios_folder() / "courier.toml"
FAULTY = """tauline = 1
[[event]]
id = "here"
t = 0
x = 0
[[worldline]]
id = "rocket"
through = "here"
velocity = "1.5 c"
clock = { reads = 0, at = "here" }
[[signal]]
id = "call"
from = "here"
to = "nowhere"
"""


def run(*words: str | Path) -> int:
    return cli.main([str(word) for word in words])


def test_inspect_a_clean_file(capsysbinary: pytest.CaptureFixture[bytes]) -> None:
    assert run("inspect", COURIER, "--format", "json") == 0
    report = json.loads(capsysbinary.readouterr().out)
    assert {"id", "kind", "state"} <= set(report["objects"][0])
    assert {item["state"] for item in report["objects"]} == {"resolved"}
    assert report["diagnoses"] == []


def test_inspect_a_faulty_file(tmp_path: Path, capsysbinary: pytest.CaptureFixture[bytes]) -> None:
    file = tmp_path / "faulty.toml"
    file.write_text(FAULTY, encoding="utf-8")
    assert run("inspect", file, "--format", "json") == 1
    report = json.loads(capsysbinary.readouterr().out)
    states = {item["id"]: item["state"] for item in report["objects"]}
    assert states == {"here": "resolved", "rocket": "faulty", "call": "faulty"}
    keys = ("file", "line", "key", "object", "severity", "message", "hint")
    assert all(set(keys) == set(d) for d in report["diagnoses"])
    placed = {d["object"]: (d["line"], d["key"], d["severity"]) for d in report["diagnoses"]}
    assert placed == {"rocket": (9, "velocity", "error"), "call": (14, "to", "error")}
    assert report["diagnoses"][0]["file"] == str(file)


def test_a_signal_that_never_arrives_is_no_fault(
    tmp_path: Path, capsysbinary: pytest.CaptureFixture[bytes]
) -> None:
    file = tmp_path / "never.toml"
    file.write_text(
        """tauline = 1
[[event]]
id = "lamp"
t = 5
x = 0
[[worldline]]
id = "short"
x = 3
start = { time = 0 }
end = { time = 1 }
[[signal]]
id = "late"
from = "lamp"
to = "short"
""",
        encoding="utf-8",
    )
    assert run("inspect", file, "--format", "json") == 0
    report = json.loads(capsysbinary.readouterr().out)
    assert report["objects"][-1]["state"] == "not received"
    assert report["diagnoses"][0]["severity"] == "note"


def test_the_json_table_has_u_and_v_for_truth(capsysbinary: pytest.CaptureFixture[bytes]) -> None:
    assert run("table", COURIER, "--frames", "station-frame,outbound", "--format", "json") == 0
    table = json.loads(capsysbinary.readouterr().out)
    assert table["units"] == {"time": "yr", "length": "ly"}
    assert [frame["id"] for frame in table["frames"]] == ["station-frame", "outbound"]
    assert table["frames"][1]["beta"] == pytest.approx(0.6, rel=1e-15)
    events = {event["id"]: event for event in table["events"]}
    intervals = []
    for name in ("station-frame", "outbound"):
        place = events["return"]["coordinates"][name]
        assert place["t"] == pytest.approx((place["u"] + place["v"]) / 2, rel=1e-15)
        intervals.append(place["u"] * place["v"])
    assert intervals[0] == pytest.approx(intervals[1], rel=1e-12)
    lines = {line["id"]: line for line in table["worldlines"]}
    assert set(lines["courier"]) == {"id", "label", "start", "end", "proper_time"}
    assert lines["station"]["proper_time"] is None


@pytest.mark.parametrize(
    ("form", "sign"),
    [("csv", b"\r\n"), ("md", b"| ---"), ("latex", b"\\toprule"), ("html", b"<table>")],
)
def test_every_format_of_the_table(
    form: str, sign: bytes, tmp_path: Path, capsysbinary: pytest.CaptureFixture[bytes]
) -> None:
    assert run("table", COURIER, "--format", form) == 0
    shown = capsysbinary.readouterr().out
    assert sign in shown
    assert b"Departure" in shown
    out = tmp_path / "table.txt"
    assert run("table", COURIER, "--format", form, "--out", out) == 0
    assert out.read_bytes() == shown


@pytest.mark.parametrize("ending", ["pdf", "svg", "png"])
def test_figures(ending: str, tmp_path: Path) -> None:
    out = tmp_path / f"figure.{ending}"
    assert run("figure", COURIER, "--out", out, "--frame", "homebound") == 0
    start = {"pdf": b"%PDF", "svg": b"<?xml", "png": b"\x89PNG"}[ending]
    assert out.read_bytes().startswith(start)


def test_the_words_of_the_pdf_can_be_searched(tmp_path: Path) -> None:
    out = tmp_path / "figure.pdf"
    assert run("figure", COURIER, "--out", out, "--width", "120", "--time", "-1", "13") == 0
    page = PdfReader(out).pages[0]
    text = page.extract_text()
    for word in ("Departure", "Return", "Courier", "Seen from Station"):
        assert word in text
    assert float(page.mediabox.width) == pytest.approx(120 / 25.4 * 72, abs=0.1)


def test_a_figure_of_what_can_be_drawn(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    file, out = tmp_path / "faulty.toml", tmp_path / "figure.svg"
    file.write_text(FAULTY, encoding="utf-8")
    assert run("figure", file, "--out", out) == 1
    assert ">here<" in out.read_text(encoding="utf-8")
    errors = capsys.readouterr().err.splitlines()
    assert len(errors) == 2
    assert f"{file}:9: error: rocket: velocity: " in errors[0]


def one_line(capsys: pytest.CaptureFixture[str]) -> str:
    shown = capsys.readouterr()
    assert shown.out == ""
    (line,) = shown.err.splitlines()
    assert "Traceback" not in line
    return line


@pytest.mark.parametrize(
    ("content", "says"),
    [
        (b"", "empty"),
        (b"\x00\x01\x02", "binary"),
        (b"\xff\xfe\xfa", "UTF-8"),
        (b"tauline = 1\n[[event\n", "line"),
        (b"tauline = 99\n", "format"),
    ],
)
def test_unreadable_files(
    content: bytes, says: str, tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    file = tmp_path / "bad.toml"
    file.write_bytes(content)
    for command in (("inspect", file), ("table", file), ("figure", file, "--out", "x.pdf")):
        assert run(*command) == 2
        line = one_line(capsys)
        assert str(file) in line
        assert says in line or ":2" in line


def test_missing_files_and_folders(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    assert run("inspect", tmp_path / "none.toml") == 2
    assert "no such file" in one_line(capsys)
    assert run("table", tmp_path) == 2
    assert "folder" in one_line(capsys)


@pytest.mark.parametrize(
    ("words", "says"),
    [
        (("figure", COURIER, "--out", "figure.docx"), ".pdf, .svg, .png"),
        (("figure", COURIER, "--out", "figure.pdf", "--frame", "moon"), "there are: station-frame"),
        (("figure", COURIER, "--out", "no/such/folder/f.pdf"), "cannot be written"),
        (("figure", COURIER, "--out", "figure.pdf", "--width", "1"), "will not do"),
        (("figure", COURIER, "--out", "figure.pdf", "--time", "3", "1"), "empty"),
        (("table", COURIER, "--frames", "moon"), "no frame 'moon'"),
        (("table", COURIER, "--from", "moon"), "no event 'moon'"),
    ],
)
def test_what_cannot_be_done(
    words: tuple[str | Path, ...],
    says: str,
    tmp_path: Path,
    monkeypatch: pytest.MonkeyPatch,
    capsys: pytest.CaptureFixture[str],
) -> None:
    monkeypatch.chdir(tmp_path)
    assert run(*words) == 2
    assert says in one_line(capsys)
    assert list(tmp_path.iterdir()) == []


def test_the_same_figure_twice_is_the_same_file(tmp_path: Path) -> None:
    for ending in ("pdf", "svg", "png"):
        first, second = tmp_path / f"a.{ending}", tmp_path / f"b.{ending}"
        run("figure", COURIER, "--out", first)
        run("figure", COURIER, "--out", second)
        assert first.read_bytes() == second.read_bytes()
