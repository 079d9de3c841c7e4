"""Writing: what is read back is the scenario, and the author's text stays."""

from __future__ import annotations

import os
import re
import stat
from pathlib import Path
from typing import Any

import msgspec
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from tauline.errors import TaulineError
from tauline.resources import scenarios_folder
from tauline.scenario.edit import (
    add_object,
    fields_of,
    remove_object,
    rename_object,
    set_field,
    set_parameter,
)
from tauline.scenario.fields import Shape, fields_of_class
from tauline.scenario.forms import FORMS, build
from tauline.scenario.objects import Broken, CoordinateEvent, Object
from tauline.scenario.read import parse, read
from tauline.scenario.scenario import Scenario, Units
from tauline.scenario.write import save, to_text

COMMENTED = """\
# the story
tauline = 1 # version
title = "A" # of the thing

# units below
[units]
time = "yr"

[parameters] # named
v = "0.6 c" # fast
L = 4.0e0

# about a
[[event]] # first
id = "a" # the a
t = 0.0
x = 0 # here

# --- lines ---

# about w
[[worldline]]
x = 0x10 # hex
id = "w"
clock = { reads = 0, at = "a" } # set

# the traveller
[[worldline]]
id = "z"
start = "a"
  velocity = "v"

# leg one
[[worldline.leg]]
until = { time = "5 yr" }
# leg two
[[worldline.leg]]
acceleration = "-2 ly/yr^2" # brake
until = { velocity = "-v" }

# leg three
[[worldline.leg]]

# about b
[[event]]
id = "b"
meeting = [
  "z", # one
  "w", # other
]
after = "a"

# about bad
[[event]]
id = "bad"
t = true # oops
# the end"""

ODD = """\
tauline = 1
event = [{ id = "a", t = 0, x = 0 }, { id = "b", t = 1, x = 0 }] # in one line
parameters.v = 1
[[worldline]]
id = "w"
start = "a"
clock.reads = 3
[[body]]
id = "rod"
between = ["w", "w"]
[[worldline.leg]]
for = 1
[worldline.leg.until]
[[view]]
id = "v"
[unknown]
x = 1"""


def comments(text: str) -> list[str]:
    return re.findall(r"#.*", text)


@pytest.mark.parametrize("text", [COMMENTED, ODD, COMMENTED.replace("\n", "\r\n")])
def test_nothing_changed_nothing_rewritten(text: str) -> None:
    for given_text in (text, "\ufeff" + text):
        loaded = parse(given_text)
        assert to_text(loaded.scenario, loaded.source) == given_text


def changed_lines(before: str, after: str) -> tuple[list[str], list[str]]:
    old, new = before.splitlines(keepends=True), after.splitlines(keepends=True)
    while old and new and old[0] == new[0]:
        del old[0], new[0]
    while old and new and old[-1] == new[-1]:
        del old[-1], new[-1]
    return old, new


@pytest.mark.parametrize("newline", ["\n", "\r\n"])
@pytest.mark.parametrize(
    ("object_id", "key", "value", "old", "new"),
    [
        ("a", "t", 2.5, ["t = 0.0\n"], ["t = 2.5\n"]),
        ("w", "x", "L", ["x = 0x10 # hex\n"], ['x = "L" # hex\n']),
        (
            "w",
            "clock.reads",
            7,
            ['clock = { reads = 0, at = "a" } # set\n'],
            ['clock = { reads = 7, at = "a" } # set\n'],
        ),
        ("w", "clock", None, ['clock = { reads = 0, at = "a" } # set\n'], []),
        ("z", "velocity", None, ['  velocity = "v"\n'], []),
        ("z", "leg[2].acceleration", "1 g", None, ['acceleration = "1 g" # brake\n']),
        (
            "z",
            "leg[1].until",
            {"x": 3},
            ['until = { time = "5 yr" }\n'],
            ["until = { x = 3 }\n"],
        ),
        ("z", "leg[3].for", 2, [], ["for = 2\n"]),
        ("z", "leg[4]", {"for": 2}, [], ["[[worldline.leg]]\n", "for = 2\n", "\n"]),
        ("z", "leg[2]", None, None, []),
        ("b", "meeting[2]", "z", ['  "w", # other\n'], ['  "z", # other\n']),
        ("b", "which", -1, [], ["which = -1\n"]),
        ("b", "label", "B", [], ['label = "B"\n']),
    ],
)
def test_only_what_differs_changes(
    newline: str,
    object_id: str,
    key: str,
    value: object,
    old: list[str] | None,
    new: list[str],
) -> None:
    text = COMMENTED.replace("\n", newline)
    loaded = parse(text)
    edited = set_field(loaded.scenario, object_id, key, value)
    written = to_text(edited, loaded.source)
    assert parse(written).scenario == edited
    gone, come = changed_lines(text, written)
    assert come == [line.replace("\n", newline) for line in new]
    if old is not None:
        assert gone == [line.replace("\n", newline) for line in old]


def test_removing_an_object_keeps_the_comments_of_the_others() -> None:
    loaded = parse(COMMENTED)
    for gone, lost in (("a", ["# about a", "# first", "# the a", "# here"]), ("z", None)):
        written = to_text(remove_object(loaded.scenario, gone), loaded.source)
        assert parse(written).scenario.find(gone) is None
        left = comments(written)
        if lost is not None:
            assert left == [c for c in comments(COMMENTED) if c not in lost]
        assert "# about b" in left
        assert "# about w" in left
        assert "# --- lines ---" in left
    bare = remove_object(remove_object(loaded.scenario, "b"), "bad")
    assert to_text(bare, loaded.source).endswith("# leg three\n[[worldline.leg]]\n\n# the end")


def test_removing_a_leg_keeps_the_comments_of_the_others() -> None:
    loaded = parse(COMMENTED)
    written = to_text(set_field(loaded.scenario, "z", "leg[2]", None), loaded.source)
    assert [c for c in comments(COMMENTED) if c not in comments(written)] == [
        "# leg two",
        "# brake",
    ]
    assert '{ time = "5 yr" }\n\n# leg three\n[[worldline.leg]]\n\n# about b' in written


def test_a_new_object_stands_where_it_belongs() -> None:
    loaded = parse(COMMENTED)
    thing = CoordinateEvent(id="n", t=1.0, x="L")
    first, *rest = loaded.scenario.objects
    grown = msgspec.structs.replace(loaded.scenario, objects=(first, thing, *rest))
    written = to_text(grown, loaded.source)
    assert parse(written).scenario == grown
    assert 'x = 0 # here\n\n[[event]]\nid = "n"\nt = 1\nx = "L"\n\n# --- lines' in written
    assert comments(written) == comments(COMMENTED)
    last = to_text(add_object(loaded.scenario, thing), loaded.source)
    assert 't = true # oops\n\n[[event]]\nid = "n"\nt = 1\nx = "L"\n# the end' in last


def test_objects_in_another_order_take_their_comments_along() -> None:
    loaded = parse(COMMENTED)
    turned = msgspec.structs.replace(loaded.scenario, objects=loaded.scenario.objects[::-1])
    written = to_text(turned, loaded.source)
    # handles count anew, all else is equal
    assert [thing.id for thing in parse(written).scenario.objects] == ["bad", "b", "z", "w", "a"]
    assert sorted(comments(written)) == sorted(comments(COMMENTED))
    assert "# about a\n[[event]] # first" in written


def test_a_renamed_object_keeps_its_comments() -> None:
    loaded = parse(COMMENTED)
    renamed = rename_object(loaded.scenario, "w", "station")
    written = to_text(renamed, loaded.source)
    assert parse(written).scenario == renamed
    assert comments(written) == comments(COMMENTED)
    gone, come = changed_lines(COMMENTED, written)
    assert len(gone) == len(come)


def test_head_of_the_file() -> None:
    loaded = parse(COMMENTED)
    changed = msgspec.structs.replace(
        loaded.scenario,
        title="B",
        description='two\nlines "quoted"',
        units=Units(time="s", length="m"),
    )
    changed = set_parameter(set_parameter(changed, "v", 0.25), "k", "1 g")
    changed = set_parameter(changed, "L", None)
    written = to_text(changed, loaded.source)
    assert parse(written).scenario == changed
    assert comments(written) == comments(COMMENTED)


def test_a_file_without_units_and_parameters_gets_them() -> None:
    loaded = parse("tauline = 1\n[[event]]\nid = 'a'\nt = 0\nx = 0\n")
    changed = set_parameter(loaded.scenario, "v", "0.5 c")
    changed = msgspec.structs.replace(changed, units=Units(time="s", length="ls"), title="T")
    written = to_text(changed, loaded.source)
    assert parse(written).scenario == changed
    assert written.endswith("[[event]]\nid = 'a'\nt = 0\nx = 0\n")


def test_a_parameter_that_comes_back_stands_where_it_was() -> None:
    scenario, source = parse(COMMENTED)
    without = set_parameter(scenario, "v", None)
    source = parse(to_text(without, source)).source
    assert parse(to_text(scenario, source)).scenario == scenario
    grown = set_parameter(set_parameter(scenario, "k", 1), "j", 2)
    assert parse(to_text(grown, source)).scenario == grown


def test_parameters_in_one_line() -> None:
    scenario, source = parse("tauline = 1\nparameters = { v = 1, bad = true } # all\n")
    grown = set_parameter(scenario, "k", "1 g")
    written = to_text(grown, source)
    assert written == 'tauline = 1\nparameters = { bad = true, v = 1, k = "1 g" } # all\n'


def test_units_in_one_line() -> None:
    scenario, source = parse('tauline = 1\nunits = { time = "s" } # all\n')
    changed = msgspec.structs.replace(scenario, units=Units(time="h", length="lh"))
    written = to_text(changed, source)
    assert written == 'tauline = 1\nunits = { time = "h", length = "lh" } # all\n'


def test_what_is_not_understood_stays() -> None:
    loaded = parse(ODD)
    changed = set_field(loaded.scenario, "b", "t", 2)
    written = to_text(changed, loaded.source)
    assert written == ODD.replace("t = 1, x = 0", "t = 2, x = 0")


def test_a_list_in_one_line_is_unfolded_where_it_must_be() -> None:
    loaded = parse(ODD)
    changed = remove_object(loaded.scenario, "a")
    written = to_text(changed, loaded.source)
    assert [thing.id for thing in parse(written).scenario.objects] == ["b", "w", "rod", "v"]
    assert written.endswith("[unknown]\nx = 1")


def test_a_change_that_the_text_has_no_room_for_is_refused() -> None:
    loaded = parse("tauline = 1\n[event]\nid = 'a'\n")
    grown = add_object(loaded.scenario, CoordinateEvent(id="b", t=0.0, x=0.0))
    with pytest.raises(TaulineError, match="cannot be made"):
        to_text(grown, loaded.source)


@pytest.mark.parametrize("name", ["courier", "rod-and-shed", "three-beacons"])
def test_fresh_text_reads_back(name: str) -> None:
    scenario = read(scenarios_folder() / f"{name}.toml").scenario
    assert parse(to_text(scenario)).scenario == scenario


# --- any object, any sequence of edits ----------------------------------------------------------

TEXTS = st.text(alphabet=st.characters(exclude_categories=["Cs"]), max_size=6)
IDS = st.sampled_from(["a", "b-1", "c_2", "a.sent", "b-1.leg-1", "c_2.3.received"])
NUMBERS = st.floats(allow_nan=False, allow_infinity=False) | st.integers(-9, 9).map(float)


def values(shape: Shape) -> st.SearchStrategy[Any]:
    options: list[st.SearchStrategy[Any]] = []
    if shape.choices:
        options.append(st.sampled_from(shape.choices))
    elif shape.refers_to:
        options.append(IDS)
    elif shape.text:
        options.append(TEXTS)
    if shape.number:
        options.append(NUMBERS)
    if shape.integer:
        options.append(st.integers(1, 10**6))
    if shape.flag:
        options.append(st.booleans())
    options.extend(map(tables, shape.structs))
    if shape.items and shape.repeated:
        options.append(st.lists(values(shape.items[0]), min_size=1, max_size=3))
    elif shape.items:
        options.append(st.tuples(*map(values, shape.items)).map(list))
    return st.one_of(options)


def tables(struct: type[msgspec.Struct]) -> st.SearchStrategy[dict[str, Any]]:
    fields = [field for field in fields_of_class(struct) if field.key != "id"]
    return st.fixed_dictionaries(
        {f.key: values(f.shape) for f in fields if f.required},
        optional={f.key: values(f.shape) for f in fields if not f.required},
    )


FORM_NAMES = [(kind, form) for kind, forms in FORMS.items() for form, _ in forms]


@st.composite
def objects(draw: st.DrawFn, name: str) -> Object:
    """Any object, well formed or not."""
    kind, form = draw(st.sampled_from(FORM_NAMES))
    return build(kind, {"id": name} | draw(tables(form)), name)


@st.composite
def scenarios(draw: st.DrawFn) -> Scenario:
    names = draw(st.lists(st.sampled_from("abcdefgh"), unique=True, max_size=5))
    found = Scenario(title=draw(TEXTS), description=draw(TEXTS))
    for name in names:
        thing = draw(objects(name))
        if not isinstance(thing, Broken):
            try:
                found = add_object(found, thing)
            except TaulineError as error:
                assert "base frame" in error.message  # noqa: PT017
    for name in draw(st.lists(st.sampled_from(["v", "L", "β"]), unique=True)):
        found = set_parameter(found, name, draw(NUMBERS | TEXTS))
    return found


@given(scenarios())
@settings(max_examples=150, deadline=None)
def test_any_scenario_reads_back(scenario: Scenario) -> None:
    assert parse(to_text(scenario)).scenario == scenario


@given(scenarios(), scenarios(), st.sampled_from([COMMENTED, ODD]))
@settings(max_examples=100, deadline=None)
def test_any_scenario_is_written_over_any_text(one: Scenario, two: Scenario, text: str) -> None:
    for before in (to_text(one), text):
        again = parse(to_text(two, parse(before).source)).scenario
        # no edit puts parameters in another order, so the text keeps theirs
        assert set(again.parameters) == set(two.parameters)
        same = msgspec.structs.replace(again, parameters=two.parameters, faults=two.faults)
        assert same == two


@st.composite
def edited(draw: st.DrawFn, scenario: Scenario) -> Scenario:
    """A scenario after one edit; the same one where the edit is refused."""
    names = [thing.id for thing in scenario.objects]
    action = draw(st.sampled_from(["set", "set", "remove", "add", "rename", "parameter", "swap"]))
    try:
        if action == "parameter":
            value = draw(st.none() | NUMBERS | TEXTS)
            return set_parameter(scenario, draw(st.sampled_from(["v", "L", "k"])), value)
        if action == "add" or not names:
            return add_object(scenario, draw(objects(draw(st.sampled_from(["n", "m", "o"])))))
        name = draw(st.sampled_from(names))
        if action == "remove":
            return remove_object(scenario, name)
        if action == "rename":
            return rename_object(scenario, name, draw(st.sampled_from(["r", "s", "u"])))
        if action == "swap":
            ordered = draw(st.permutations(scenario.objects))
            return msgspec.structs.replace(scenario, objects=tuple(ordered))
        thing = scenario.find(name)
        assert thing is not None
        keys = [field.key for field in fields_of(thing) if field.key != "id"] or ["label"]
        key = draw(st.sampled_from([*keys, "leg[2]", "leg"]))
        new: object = draw(st.none() | NUMBERS | IDS | st.just({"for": 1.0}))
        return set_field(scenario, name, key, new)
    except TaulineError:
        return scenario


@given(st.data())
@settings(max_examples=200, deadline=None)
def test_any_edits_saved_at_any_time(data: st.DataObject) -> None:
    newline = data.draw(st.sampled_from(["\n", "\r\n"]))
    text = data.draw(st.sampled_from([COMMENTED, ODD])).replace("\n", newline)
    scenario, source = parse(text)
    for _ in range(data.draw(st.integers(1, 6))):
        scenario = data.draw(edited(scenario))
        if data.draw(st.booleans()):
            written = to_text(scenario, source)
            again, source = parse(written)
            assert again.parameters == scenario.parameters
            assert [plain(t) for t in again.objects] == [plain(t) for t in scenario.objects]
            assert again.faults == parse(text).scenario.faults
            assert written.count("\n") == written.count(newline)
            assert to_text(again, source) == written


def plain(thing: Object) -> object:
    """Return an object to compare: of a broken one its table, as handles count anew."""
    return (thing.kind, thing.table) if isinstance(thing, Broken) else thing


# --- on the disk --------------------------------------------------------------------------------


def test_saving_keeps_mode_and_link_and_leaves_nothing_behind(tmp_path: Path) -> None:
    real = tmp_path / "real.toml"
    real.write_bytes(("\ufeff" + COMMENTED.replace("\n", "\r\n")).encode())
    real.chmod(0o640)
    link = tmp_path / "link.toml"
    link.symlink_to(real)
    loaded = read(link)
    changed = set_field(loaded.scenario, "a", "t", 5)
    source = save(changed, loaded.source, link)
    assert link.is_symlink()
    assert stat.S_IMODE(real.stat().st_mode) == 0o640
    assert real.read_bytes().startswith(b"\xef\xbb\xbf# the story\r\ntauline")
    assert read(real).scenario == changed
    assert sorted(file.name for file in tmp_path.iterdir()) == ["link.toml", "real.toml"]
    assert source.path == link
    assert source.text.encode() == real.read_bytes()
    assert source.line_of("a", "t") == 16


def test_a_new_file_has_the_usual_mode(tmp_path: Path) -> None:
    mask = os.umask(0o027)
    try:
        save(Scenario(title="x"), None, tmp_path / "new.toml")
    finally:
        os.umask(mask)
    assert stat.S_IMODE((tmp_path / "new.toml").stat().st_mode) == 0o640
    assert read(tmp_path / "new.toml").scenario == Scenario(title="x")


def test_a_save_that_fails_leaves_the_file(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    file = tmp_path / "a.toml"
    file.write_text(COMMENTED)
    loaded = read(file)
    changed = set_field(loaded.scenario, "a", "t", 5)

    def full(descriptor: int) -> None:
        raise OSError(28, "No space left on device")

    monkeypatch.setattr(os, "fsync", full)
    with pytest.raises(TaulineError, match="No space left"):
        save(changed, loaded.source, file)
    monkeypatch.undo()
    assert file.read_text() == COMMENTED
    assert [entry.name for entry in tmp_path.iterdir()] == ["a.toml"]


def test_places_that_cannot_be_written(tmp_path: Path) -> None:
    with pytest.raises(TaulineError, match="cannot be written"):
        save(Scenario(), None, tmp_path)
    with pytest.raises(TaulineError, match="cannot be written"):
        save(Scenario(), None, tmp_path / "none" / "a.toml")
    with pytest.raises(TaulineError, match="no file can hold"):
        save(Scenario(title="\ud800"), None, tmp_path / "a.toml")
    assert list(tmp_path.iterdir()) == []
