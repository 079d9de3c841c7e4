"""Where everything stands in a text, and key paths."""

from __future__ import annotations

import tomllib
from typing import Any

import pytest
from hypothesis import given
from hypothesis import strategies as st

from tauline.scenario.layout import Layout
from tauline.scenario.paths import item, join, parent, split
from tauline.scenario.render import literal

TEXT = '''\
# a comment = 1
tauline = 1
description = """
[[event]]
id = "not one"
"""
[units]
time = "yr"  # [x]
[parameters]
"odd.name" = 1
[[worldline]]
id = "a"
clock = { reads = 0, at = "e" }
[[event]]
id = "e"
[[worldline]]
id = "b"
clock.reads = 3
axes = [
  "one", # two ]
  "t]hree",
]
[[worldline.leg]]
for = 1
[[worldline.leg]]
until = { time = "5 yr", frame = 'x' }
[worldline.extra]
deep = [[1], { k = 2 }]
'''

LINES = {
    "tauline": 2,
    "description": 3,
    "units": 7,
    "units.time": 8,
    'parameters."odd.name"': 10,
    "worldline[1]": 11,
    "worldline[1].id": 12,
    "worldline[1].clock.at": 13,
    "event[1].id": 15,
    "worldline[2].clock": 18,
    "worldline[2].clock.reads": 18,
    "worldline[2].axes": 19,
    "worldline[2].axes[2]": 21,
    "worldline[2].leg[1].for": 24,
    "worldline[2].leg[2]": 25,
    "worldline[2].leg[2].until.frame": 26,
    "worldline[2].extra": 27,
    "worldline[2].extra.deep[2].k": 28,
}


@pytest.mark.parametrize("newline", ["\n", "\r\n"])
@pytest.mark.parametrize("mark", ["", "\ufeff"])
def test_lines(newline: str, mark: str) -> None:
    layout = Layout(mark + TEXT.replace("\n", newline))
    assert {path: layout.lines.get(path) for path in LINES} == LINES
    assert "event[2]" not in layout.lines


def values_at(tables: object, path: str) -> object:
    found: Any = tables
    for step in split(path):
        found = found[step - 1] if isinstance(step, int) else found[step]
    return found


@pytest.mark.parametrize("newline", ["\n", "\r\n"])
def test_spans_hold_the_values(newline: str) -> None:
    text = TEXT.replace("\n", newline)
    tables = tomllib.loads(text)
    layout = Layout(text)
    assert len(layout.values) > 20
    for path, span in layout.values.items():
        inner = tomllib.loads(f"v = {text[span.start : span.end]}")["v"]
        assert inner == values_at(tables, path), path


SCALARS = (
    st.integers(-(10**6), 10**6)
    | st.floats(allow_nan=False)
    | st.booleans()
    | st.text(alphabet=st.characters(exclude_categories=["Cs"]), max_size=8)
)
KEYS = st.text(alphabet="abcXYZ019_-", min_size=1, max_size=4) | st.text(
    alphabet='a.b" \\[]=#é', max_size=4
)
VALUES = st.recursive(
    SCALARS,
    lambda inner: st.lists(inner, max_size=3) | st.dictionaries(KEYS, inner, max_size=3),
    max_leaves=6,
)


@given(st.dictionaries(KEYS, VALUES, max_size=4))
def test_any_table_written_and_found_again(table: dict[str, Any]) -> None:
    text = "".join(f"{literal({k: v})[2:-2]}\n" for k, v in table.items())
    tables = tomllib.loads(text)
    assert tables == table
    layout = Layout(text)
    for path, span in layout.values.items():
        inner = tomllib.loads(f"v = {text[span.start : span.end]}")["v"]
        assert inner == values_at(tables, path)
    assert {join("", name) for name in table} <= layout.values.keys()


STRINGS = ['""', "''", '"a # b"', "'\\'", '"\\""', '"""a"b""c"""', '""""q""""', "'''it's\n'''"]


@pytest.mark.parametrize("first", STRINGS)
@pytest.mark.parametrize("second", [*STRINGS, "1979-05-27 07:32:00", "+1_000.5e-3", "inf"])
def test_every_way_to_write_a_value(first: str, second: str) -> None:
    text = f"a = [{first}, {second}] # ]\nb.'c d' = {second}#x\nlast = {first}"
    tables = tomllib.loads(text)
    layout = Layout(text)
    assert list(layout.values) == ["a[1]", "a[2]", "a", 'b."c d"', "last"]
    for path, span in layout.values.items():
        inner = tomllib.loads(f"v = {text[span.start : span.end]}")["v"]
        assert inner == values_at(tables, path)


@given(st.lists(KEYS | st.integers(1, 99), min_size=1, max_size=6))
def test_paths_there_and_back(steps: list[str | int]) -> None:
    path, above = "", ""
    for step in steps:
        above, path = path, item(path, step) if isinstance(step, int) else join(path, step)
    assert split(path) == tuple(steps)
    assert parent(path) == above


@pytest.mark.parametrize("text", ["a..b", "a[", "a[x]", "a b", '"a', "a]"])
def test_texts_that_are_no_path(text: str) -> None:
    with pytest.raises(ValueError, match="key path"):
        split(text)
