"""Reading files: every fault in its place, none hiding the rest."""

from __future__ import annotations

import os
import re
from pathlib import Path

import pytest
from hypothesis import given
from hypothesis import strategies as st

from tauline.errors import FileUnreadableError
from tauline.resources import scenarios_folder
from tauline.scenario.diagnosis import Diagnosis
from tauline.scenario.objects import (
    AcceleratedLeg,
    Broken,
    ClockEvent,
    CoastLeg,
    CoastLine,
    CoordinateEvent,
    FrameTime,
    FrameTimeEvent,
    Itinerary,
    MeetingEvent,
    RestLine,
    SimultaneousEvent,
)
from tauline.scenario.read import Loaded, parse, read

HEAD = "tauline = 1\n"


def faults_of(text: str) -> list[Diagnosis]:
    scenario = parse(HEAD + text).scenario
    return [*scenario.faults, *(fault for thing in scenario.broken for fault in thing.faults)]


def the_fault(text: str) -> Diagnosis:
    found = faults_of(text)
    assert len(found) == 1, [str(fault) for fault in found]
    return found[0]


def test_forms_follow_from_keys() -> None:
    scenario = parse(
        HEAD
        + """
[[event]]
id = "a"
t = 0
x = "1 ly"
[[event]]
id = "b"
on = "w"
proper_time = 1
[[event]]
id = "c"
on = "w"
time = 1
[[event]]
id = "d"
meeting = ["w", "z"]
[[event]]
id = "e"
on = "w"
simultaneous_with = "a"
frame = "f"
[[worldline]]
id = "w"
x = 0
start = { time = 1, frame = "f" }
end = "a"
[[worldline]]
id = "z"
through = "a"
velocity = 0.5
[[worldline]]
id = "i"
start = "a"
[[worldline.leg]]
for = 1
[[worldline.leg]]
acceleration = "1 g"
until = { velocity = "-0.5 c" }
"""
    ).scenario
    assert scenario.faults == ()
    assert [type(thing) for thing in scenario.objects] == [
        CoordinateEvent,
        ClockEvent,
        FrameTimeEvent,
        MeetingEvent,
        SimultaneousEvent,
        RestLine,
        CoastLine,
        Itinerary,
    ]
    rest, itinerary = scenario.find("w"), scenario.find("i")
    assert isinstance(rest, RestLine)
    assert rest.start == FrameTime(time=1.0, frame="f")
    assert isinstance(itinerary, Itinerary)
    assert [type(leg) for leg in itinerary.legs] == [CoastLeg, AcceleratedLeg]
    assert itinerary.legs[0] == CoastLeg(duration=1.0)


def test_objects_keep_the_order_of_the_file() -> None:
    text = '[[event]]\nid="a"\nt=0\nx=0\n[[body]]\nid="b"\nbetween=["x","y"]\n'
    text += '[[event]]\nid="c"\nt=0\nx=0\n'
    assert [thing.id for thing in parse(HEAD + text).scenario.objects] == ["a", "b", "c"]


EVENT = '[[event]]\nid = "e"\nt = 0\nx = 0\n'
LINE = '[[worldline]]\nid = "w"\nstart = "e"\n'


@pytest.mark.parametrize(
    ("text", "object_id", "key", "line", "words"),
    [
        # keys
        (EVENT + "vellocity = 1", "e", "vellocity", 6, "unknown key"),
        (EVENT + "labl = 'x'", "e", "labl", 6, "did you mean 'label'"),
        ("[[event]]\nid = 'e'\nt = 0", "e", "x", 2, "'x' is missing"),
        ("[[event]]\nid = 'e'", "e", "", 2, "does not say where"),
        ("[[body]]\nid = 'b'", "b", "between", 2, "missing"),
        # types
        ("[[event]]\nid = 'e'\nt = true\nx = 0", "e", "t", 4, "this is true"),
        ("[[event]]\nid = 'e'\nt = [0]\nx = 0", "e", "t", 4, "this is a list"),
        ("[[event]]\nid = 'e'\nt = 1979-05-27\nx = 0", "e", "t", 4, "expected"),
        (EVENT + "label = 3", "e", "label", 6, "expected a text"),
        (EVENT + "frame = 3", "e", "frame", 6, "the id of a frame"),
        ("[[event]]\nid = 'e'\nt = nan\nx = 0", "e", "t", 4, "not a finite number"),
        ("[[event]]\nid = 'e'\nt = 1e400\nx = 0", "e", "t", 4, "not a finite number"),
        (f"[[event]]\nid = 'e'\nt = {10**400}\nx = 0", "e", "t", 4, "not a finite number"),
        ("[[event]]\nid = 'e'\nmeeting = ['a']", "e", "meeting", 4, "this has 1"),
        ("[[event]]\nid = 'e'\nmeeting = ['a', 2]", "e", "meeting[2]", 4, "expected"),
        ("[[event]]\nid='e'\nmeeting=['a','b']\nwhich=1.5", "e", "which", 5, "whole number"),
        ("[[event]]\nid='e'\nmeeting=['a','b']\nwhich=true", "e", "which", 5, "whole number"),
        ("[[event]]\nid='e'\nmeeting=['a','b']\nwhich=0", "e", "which", 5, "count from 1"),
        ("[[view]]\nid = 'v'\nlayers = ['lables']", "v", "layers[1]", 4, "mean 'labels'"),
        ("[[view]]\nid = 'v'\nt = [0, inf]", "v", "t[2]", 4, "finite"),
        ("[[region]]\nid='r'\nlight_cone='e'\npart='futur'", "r", "part", 5, "mean 'future'"),
        # ids
        ("[[event]]\nt = 0\nx = 0", "event[1]", "id", 2, "'id' is missing"),
        ("[[event]]\nid = 'E 1'\nt = 0\nx = 0", "event[1]", "id", 3, "is not an id"),
        ("[[event]]\nid = 7\nt = 0\nx = 0", "event[1]", "id", 3, "is not an id"),
        (EVENT + EVENT, "event[2]", "id", 7, "is taken, by an event"),
        (
            EVENT + "[[body]]\nid='e'\nbetween=['a','b']",
            "body[1]",
            "id",
            7,
            "is taken, by an event",
        ),
        ("[[event]]\nid = 'base'\nt = 0\nx = 0", "base", "id", 3, "base frame"),
        ("[[frame]]\nid = 'base'\nvelocity = 0.5", "base", "id", 3, "base frame"),
        ("[[frame]]\nid = 'a'\n[[frame]]\nid = 'b'", "b", "", 4, "'a' is the base frame already"),
        # velocities
        ("[[frame]]\nid='f'\nvelocity=0.1\nrapidity=1", "f", "rapidity", 5, "given by 'velocity'"),
        ("[[frame]]\nid = 'f'\ngamma = 2", "f", "gamma", 4, "which way"),
        ("[[frame]]\nid='f'\none_minus_beta=1e-9", "f", "one_minus_beta", 4, "which way"),
        ("[[frame]]\nid='f'\nvelocity=0.1\ndirection='+x'", "f", "direction", 5, "goes with"),
        ("[[frame]]\nid = 'f'\ngamma = 2\ndirection = 'x'", "f", "direction", 5, "'[+]x', '-x'"),
        # legs
        (LINE + "leg = []", "w", "leg", 5, "no leg"),
        (LINE + "leg = 3", "w", "leg", 5, "expected a list"),
        (LINE + "leg = [1]", "w", "leg[1]", 5, "expected a table"),
        (LINE + "[[worldline.leg]]\nfr = 1", "w", "leg[1].fr", 6, "did you mean 'for'"),
        (
            LINE + "[[worldline.leg]]\nfor = 1\nuntil = { time = 1 }",
            "w",
            "leg[1].until",
            7,
            "one way",
        ),
        (
            LINE + "[[worldline.leg]]\nfor=1\n[[worldline.leg]]\nuntil={ time=1, x=1 }",
            "w",
            "leg[2].until.x",
            8,
            "exclude each other",
        ),
        (LINE + "[[worldline.leg]]\nuntil = {}", "w", "leg[1].until", 6, "is missing"),
        (
            LINE + "[[worldline.leg]]\nuntil = { event = 'e', frame = 'f' }",
            "w",
            "leg[1].until.frame",
            6,
            "goes with time or x",
        ),
        (
            LINE + "[[worldline.leg]]\nacceleration=1\nuntil={ proper_time=1, velocity=0 }",
            "w",
            "leg[1].until.proper_time",
            7,
            "exclude",
        ),
        (
            LINE + "[[worldline.leg]]\nacceleration = 1\nvelocity = 0.5\nfor = 1",
            "w",
            "leg[1].velocity",
            7,
            "unknown key",
        ),
        # the rest
        ("[[signal]]\nid = 's'\nfrom = 'e'", "s", "", 2, "one of to, direction"),
        (
            "[[signal]]\nid='s'\nfrom='e'\nto='w'\ndirection='+x'",
            "s",
            "direction",
            6,
            "exclude each other",
        ),
        ("[[pulses]]\nid='p'\nfrom='a'\nto='b'\nevery=1\ncount=0", "p", "count", 7, "at least 1"),
        (
            "[[simultaneity]]\nid='s'\nthrough='e'\nframe='f'\nobserver='w'",
            "s",
            "observer",
            6,
            "one only",
        ),
        (
            "[[simultaneity]]\nid='s'\nthrough='e'\nframe='f'\nside='after'",
            "s",
            "side",
            6,
            "goes with an observer",
        ),
        ("[[worldline]]\nid='w'\nx=0\nclock=3", "w", "clock", 5, "expected a table"),
        ("[[worldline]]\nid='w'\nx=0\nclock={ at='e' }", "w", "clock.reads", 5, "missing"),
        # the file
        ("[[evnt]]\nid = 'e'", "", "evnt", 2, "did you mean 'event'"),
        ("titel = 'x'", "", "titel", 2, "did you mean 'title'"),
        ("title = 3", "", "title", 2, "expected a text"),
        ("dimensions = 2", "", "dimensions", 2, "dimensions"),
        ("dimensions = true", "", "dimensions", 2, "dimensions"),
        ("[units]\ntime = 'yer'", "", "units.time", 3, "did you mean 'yr'"),
        ("[units]\ntime = 'm'", "", "units.time", 3, "not a unit of time"),
        ("[units]\nlenght = 'ly'", "", "units.lenght", 3, "did you mean 'length'"),
        ("units = 3", "", "units", 2, "table"),
        ("[parameters]\nv = true", "", "parameters.v", 3, "expected a number"),
        ("parameters = 3", "", "parameters", 2, "table"),
        ("[event]\nid = 'e'", "", "event", 2, r"\[\[event\]\]"),
        ("event = ['e']", "", "event[1]", 2, r"\[\[event\]\]"),
    ],
)
def test_one_fault_in_its_place(text: str, object_id: str, key: str, line: int, words: str) -> None:
    fault = the_fault(text)
    assert (fault.object, fault.key) == (object_id, key)
    assert re.search(words, str(fault)), str(fault)
    assert parse(HEAD + text).source.line_of(object_id, key) == line


def test_all_faults_at_once_and_the_rest_stays() -> None:
    text = EVENT + (
        '[[event]]\nid = "bad"\nt = true\nx = nan\nlabl = "x"\nframe = 1\n'
        '[[worldline]]\nid = "w"\nstart = "e"\nvelocity = "0.5 c"\n'
        "[[worldline.leg]]\nfor = 1\nuntil = {}\n[[worldline.leg]]\nacceleration = []\n"
        '[[event]]\nid = "last"\nt = 1\nx = 1\n[[wordline]]\n'
    )
    loaded = parse(HEAD + text)
    places = [(f.object, f.key, loaded.source.line_of(f.object, f.key)) for f in faults_of(text)]
    assert places == [
        ("", "wordline", 25),
        ("bad", "labl", 10),
        ("bad", "t", 8),
        ("bad", "x", 9),
        ("bad", "frame", 11),
        ("w", "leg[1].until", 18),
        ("w", "leg[1].until", 18),
        ("w", "leg[2].acceleration", 20),
    ]
    broken = loaded.scenario.find("bad")
    assert isinstance(broken, Broken)
    assert broken.table["labl"] == "x"
    assert isinstance(loaded.scenario.find("e"), CoordinateEvent)
    assert isinstance(loaded.scenario.find("last"), CoordinateEvent)


def test_a_missing_version_is_a_fault() -> None:
    scenario = parse('title = "x"').scenario
    assert [fault.key for fault in scenario.faults] == ["tauline"]
    assert [f.key for f in parse("tauline = true").scenario.faults] == ["tauline"]
    assert [f.key for f in parse("tauline = 0").scenario.faults] == ["tauline"]


def test_faulty_parameters_stay_known() -> None:
    scenario = parse(HEAD + "[parameters]\na = inf\nb = 1e400\nd = 5\n").scenario
    assert [parameter.name for parameter in scenario.parameters] == ["a", "b", "d"]


def test_lines_of_things_made_by_an_object() -> None:
    source = parse(HEAD + EVENT).source
    assert source.line_of("e.sent", "whatever") == 2
    assert source.line_of("e", "x.y.z") == 5
    assert source.line_of("e", "nothing[3].there") == 2
    assert source.line_of("nobody", "x") is None
    assert source.line_of("", "title") == 1


# --- files that cannot be read ----------------------------------------------------------------


def unreadable(path: Path) -> FileUnreadableError:
    with pytest.raises(FileUnreadableError) as caught:
        read(path)
    assert "\n" not in str(caught.value)
    return caught.value


@pytest.mark.parametrize(
    ("data", "line", "words"),
    [
        (b"", None, "the file is empty.*tauline = 1"),
        (b" \n\n", None, "the file is empty"),
        (b"\xef\xbb\xbf", None, "the file is empty"),
        (b"\x7fELF\0\0", None, "binary"),
        (b"tauline = 1\ntitle = '\xe9'\n", 2, "UTF-8"),
        (b"tauline = 1\nx = \n", 2, "not valid TOML"),
        (b"tauline = 1\n\n[[frame]]\nvelocity = 0.6 c\n", 4, "in quotes"),
        (b"tauline = 1\r\n\r\n[[frame\r\n", 3, "in brackets"),
        (b'tauline = 1\ntitle = "x\n', 2, "quote is missing"),
        (b"tauline = 1\ntauline = 1\n", 2, "stands once"),
        (b"[event]\nx = 1\n[event]\n", 3, "double brackets"),
        (b"tauline = 1\ndescription = '''\n\nx", 4, "not valid TOML"),
        (b"tauline = 99\n", 1, "newer version"),
        (b"x = " + b"[" * 5000, None, "nested too deeply|not valid TOML"),
        (b"x = " + b"[" * 50 + b"]" * 50, None, "nested"),
        (b"a" + b".a" * 3000 + b" = 1", None, "nested"),
        (b"x = " + b"9" * 5000, None, "too many digits"),
    ],
)
def test_contents_that_cannot_be_read(
    tmp_path: Path, data: bytes, line: int | None, words: str
) -> None:
    file = tmp_path / "a.toml"
    file.write_bytes(data)
    error = unreadable(file)
    assert re.search(words, str(error)), str(error)
    assert error.line == line
    assert error.path == file


def test_paths_that_cannot_be_read(tmp_path: Path) -> None:
    assert "no such file" in str(unreadable(tmp_path / "none.toml"))
    assert "folder" in str(unreadable(tmp_path))
    assert "not the name of a file" in str(unreadable(Path("a\0b")))
    large = tmp_path / "large.toml"
    with large.open("wb") as file:
        file.truncate(20_000_001)
    assert "larger than 20 MB" in str(unreadable(large))
    pipe = tmp_path / "pipe"
    os.mkfifo(pipe)
    assert "not a file" in str(unreadable(pipe))


def test_a_file_that_may_not_be_read(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    file = tmp_path / "secret.toml"
    file.write_text("tauline = 1")

    def refuse(_: Path) -> bytes:
        # as the system does; the superuser may read whatever its mode says
        raise PermissionError(13, "Permission denied")

    monkeypatch.setattr(Path, "read_bytes", refuse)
    assert "may not be read" in str(unreadable(file))


def test_byte_order_mark_and_windows_lines() -> None:
    text = "\ufeff" + (HEAD + EVENT).replace("\n", "\r\n")
    loaded = parse(text)
    assert loaded.scenario == parse(HEAD + EVENT).scenario
    assert loaded.source.text == text
    assert loaded.source.line_of("e", "x") == 5


@pytest.mark.parametrize("name", ["courier", "rod-and-shed", "three-beacons"])
def test_the_shipped_scenarios_have_no_fault(name: str) -> None:
    loaded: Loaded = read(scenarios_folder() / f"{name}.toml")
    assert loaded.scenario.faults == ()
    assert loaded.scenario.broken == ()
    assert loaded.scenario.objects
    for thing in loaded.scenario.objects:
        line = loaded.source.line_of(thing.id, "id")
        assert line is not None
        assert f'id = "{thing.id}"' in loaded.source.text.splitlines()[line - 1]


@given(st.text(max_size=80) | st.text(alphabet='[]{}=.,"\n tauline1event#', max_size=80))
def test_any_text_is_read_or_refused(text: str) -> None:
    try:
        parse("tauline = 1\n" + text)
    except FileUnreadableError as error:
        assert error.message  # noqa: PT017
