"""Pure edits, references and fields."""

from __future__ import annotations

import msgspec
import pytest

from tauline.errors import TaulineError, UnknownIdError
from tauline.resources import scenarios_folder
from tauline.scenario.edit import (
    add_object,
    fields_of,
    references,
    remove_object,
    rename_object,
    set_field,
    set_parameter,
    value_of,
)
from tauline.scenario.objects import (
    Broken,
    Clock,
    CoastLeg,
    CoastLine,
    CoastUntil,
    CoordinateEvent,
    Frame,
    Itinerary,
    MeetingEvent,
    Object,
    RestLine,
    Signal,
    View,
)
from tauline.scenario.read import parse, read
from tauline.scenario.scenario import Parameter, Scenario
from tauline.scenario.units import ACCELERATION, TIME, VELOCITY


@pytest.fixture
def courier() -> Scenario:
    return read(scenarios_folder() / "courier.toml").scenario


def itinerary(scenario: Scenario) -> Itinerary:
    found = scenario.find("courier")
    assert isinstance(found, Itinerary)
    return found


def test_set_a_field(courier: Scenario) -> None:
    changed = set_field(courier, "courier", "velocity", "0.8 c")
    assert itinerary(changed).velocity == "0.8 c"
    assert itinerary(courier).velocity == "speed"
    untouched = [t for t in changed.objects if t.id != "courier"]
    assert all(courier.find(thing.id) is thing for thing in untouched)
    assert [t.id for t in changed.objects] == [t.id for t in courier.objects]


def test_set_fields_within_fields(courier: Scenario) -> None:
    changed = set_field(courier, "courier", "leg[2].acceleration", 3)
    changed = set_field(changed, "courier", "leg[1].until.time", "6 yr")
    changed = set_field(changed, "courier", "clock.reads", "1 yr")
    changed = set_field(changed, "courier", "leg[4]", {"for": 2})
    found = itinerary(changed)
    assert found.legs[0] == CoastLeg(until=CoastUntil(time="6 yr"))
    assert found.legs[3] == CoastLeg(duration=2.0)
    assert found.clock == Clock(reads="1 yr")
    changed = set_field(changed, "courier", "clock.reads", None)
    changed = set_field(changed, "courier", "leg[4]", None)
    assert itinerary(changed).clock is None
    assert len(itinerary(changed).legs) == 3


def test_a_field_taken_out_has_its_default(courier: Scenario) -> None:
    assert set_field(courier, "return", "label", None).find("return").label == ""  # type: ignore[union-attr]
    assert set_field(courier, "return", "after", None).find("return") == MeetingEvent(
        id="return", label="Return", meeting=("courier", "station")
    )


def test_what_is_not_needed_may_go(courier: Scenario) -> None:
    line = set_field(courier, "station", "clock", None).find("station")
    assert line == RestLine(id="station", label="Station", x=0.0)


@pytest.mark.parametrize(
    ("object_id", "key", "value", "words"),
    [
        ("courier", "velocity", True, "velocity"),
        ("courier", "rapidity", 1, "given by 'velocity' already"),
        ("courier", "speed", 1, "unknown key"),
        ("courier", "leg[9].for", 1, "no field"),
        ("courier", "leg[0]", {}, "no field"),
        ("courier", "velocity.x", 1, "no field"),
        ("courier", "a..b", 1, "key path"),
        ("courier", "", 1, "no field"),
        ("courier", "leg[1].until.meets", "station", "exclude each other"),
        ("courier", "leg", [], "no leg"),
        ("departure", "t", float("nan"), "finite"),
        ("departure", "x", None, "missing"),
        ("departure", "id", None, "needs an id"),
        ("departure", "id", "courier", "taken"),
        ("departure", "id", "Two Words", "not an id"),
        ("departure", "id", "base", "base frame"),
        ("outbound", "velocity", None, "base frame already"),
        ("return", "meeting", ["courier"], "this has 1"),
    ],
)
def test_what_takes_the_form_away_is_refused(
    courier: Scenario, object_id: str, key: str, value: object, words: str
) -> None:
    before = msgspec.json.encode([repr(thing) for thing in courier.objects])
    with pytest.raises(TaulineError, match=words):
        set_field(courier, object_id, key, value)
    assert msgspec.json.encode([repr(thing) for thing in courier.objects]) == before


def test_unknown_ids_are_told(courier: Scenario) -> None:
    with pytest.raises(UnknownIdError, match="did you mean 'courier'"):
        set_field(courier, "curier", "velocity", 1)
    with pytest.raises(UnknownIdError):
        remove_object(courier, "nobody")
    with pytest.raises(UnknownIdError):
        rename_object(courier, "nobody", "somebody")


def test_a_broken_object_is_mended_step_by_step() -> None:
    scenario = parse(
        'tauline = 1\n[[event]]\nid = "e"\nt = true\nx = nan\nlabl = "x"\n'
        '[[event]]\nid = "f"\nt=0\nx=0'
    ).scenario
    assert isinstance(scenario.find("e"), Broken)
    scenario = set_field(scenario, "e", "t", 1)
    with pytest.raises(TaulineError):
        set_field(scenario, "e", "x", [])
    scenario = set_field(scenario, "e", "x", "2 ly")
    assert isinstance(scenario.find("e"), Broken)
    scenario = set_field(scenario, "e", "labl", None)
    assert scenario.find("e") == CoordinateEvent(id="e", t=1.0, x="2 ly")


def test_add_and_remove(courier: Scenario) -> None:
    event = CoordinateEvent(id="new", t=1.0, x="1 ly")
    grown = add_object(courier, event)
    assert grown.objects[-1] == event
    assert remove_object(grown, "new") == courier
    with pytest.raises(TaulineError, match="taken"):
        add_object(grown, event)
    with pytest.raises(TaulineError, match="base frame already"):
        add_object(courier, Frame(id="other"))
    with pytest.raises(TaulineError, match="not an id"):
        add_object(courier, CoordinateEvent(id="New", t=1.0, x=1.0))
    with pytest.raises(TaulineError, match="which way"):
        add_object(courier, CoastLine(id="new", through="departure", gamma=2.0))


def test_rename_follows_all_references(courier: Scenario) -> None:
    extra: list[Object] = [
        Signal(id="first", source="courier.start", to="station"),
        MeetingEvent(id="elsewhere", meeting=("courier-two", "courier")),
        Frame(id="leg-frame", relative_to="courier.leg-1", velocity=0.0),
    ]
    for thing in extra:
        courier = add_object(courier, thing)
    renamed = rename_object(courier, "courier", "ship")
    assert renamed.find("courier") is None
    everything = frozenset().union(*(references(thing) for thing in renamed.objects))
    assert not {name for name in everything if name.split(".")[0] == "courier"}
    assert renamed.find("first") == Signal(id="first", source="ship.start", to="station")
    assert renamed.find("elsewhere") == MeetingEvent(
        id="elsewhere", meeting=("courier-two", "ship")
    )
    assert references(renamed.find("leg-frame")) == {"ship.leg-1"}  # type: ignore[arg-type]
    assert rename_object(renamed, "ship", "courier") == courier
    pulses = rename_object(courier, "greeting", "call")
    assert references(pulses.find("answer")) == {"call.3.received", "station"}  # type: ignore[arg-type]
    assert rename_object(courier, "courier", "courier") is courier


def test_rename_reaches_into_broken_tables() -> None:
    scenario = parse(
        'tauline=1\n[[event]]\nid="e"\nt=0\nx=0\n[[signal]]\nid="s"\nfrom="e"\nto=3\n'
    ).scenario
    renamed = rename_object(scenario, "e", "f")
    broken = renamed.find("s")
    assert isinstance(broken, Broken)
    assert broken.table == {"id": "s", "from": "f", "to": 3}


def test_the_word_start_is_no_event() -> None:
    scenario = parse(
        'tauline=1\n[[event]]\nid="start"\nt=0\nx=0\n'
        '[[worldline]]\nid="w"\nthrough="start"\nstart="start"\nvelocity=0\n'
        'clock={reads=0, at="start"}\n'
    ).scenario
    line = rename_object(scenario, "start", "origin").find("w")
    assert line == CoastLine(
        id="w",
        through="origin",
        start="origin",
        velocity=0.0,
        clock=Clock(reads=0.0, at="start"),
    )


def test_parameters(courier: Scenario) -> None:
    changed = set_parameter(courier, "turn", "2 g")
    assert [p.name for p in changed.parameters] == ["speed", "turn", "coasting"]
    assert changed.parameters[1].value == "2 g"
    changed = set_parameter(changed, "extra", 5)
    assert changed.parameters[-1] == Parameter(name="extra", value=5.0)
    assert set_parameter(changed, "extra", None).parameters == changed.parameters[:-1]
    for name, value in (("c", 1.0), ("a b", 1.0), ("ok", True)):
        with pytest.raises(TaulineError):
            set_parameter(courier, name, value)


def test_fields_for_a_panel(courier: Scenario) -> None:
    fields = {field.key: field for field in fields_of(itinerary(courier))}
    assert (fields["velocity"].kind, fields["velocity"].dimension) == ("quantity", VELOCITY)
    assert fields["leg[2].acceleration"].dimension == ACCELERATION
    assert fields["leg[2].acceleration"].required
    assert fields["leg[2].acceleration"].value == "-turn"
    assert (fields["start"].kind, fields["start"].refers_to) == ("id", ("event",))
    assert fields["direction"].choices == ("+x", "-x")
    assert fields["clock.reads"].value is None
    assert not fields["clock.reads"].required
    assert fields["endless_past"].kind == "flag"
    view = {field.key: field for field in fields_of(courier.objects[-1])}
    assert (view["t[1]"].dimension, view["axes"].kind) == (TIME, "ids")
    assert "labels" in view["layers"].choices


def test_every_field_shown_can_be_set_to_what_it_shows(courier: Scenario) -> None:
    for thing in courier.objects:
        for field in fields_of(thing):
            if field.value is not None:
                assert set_field(courier, thing.id, field.key, field.value) == courier, field.key


@pytest.mark.parametrize(
    ("text", "value"),
    [
        ("5", 5.0),
        (" -0.5e3 ", -500.0),
        ("−2", -2.0),
        ("5 yr", "5 yr"),
        ("nan", "nan"),
        ("1_0", "1_0"),
    ],
)
def test_what_is_typed(text: str, value: float | str) -> None:
    assert value_of(text) == value


def test_a_window_can_be_set_end_by_end(courier: Scenario) -> None:
    changed = set_field(courier, "from-station", "t[2]", "12 yr")
    changed = set_field(changed, "from-station", "t[1]", -1)
    view = changed.find("from-station")
    assert isinstance(view, View)
    assert view.t == (-1.0, "12 yr")
    assert set_field(changed, "from-station", "t", None) == courier


def test_the_fields_of_a_broken_object() -> None:
    scenario = parse(
        'tauline = 1\n[[worldline]]\nid = "w"\nstart = 3\nspeed = 1979-05-27\n'
        "[[worldline.leg]]\nfr = 1\nuntil = 5\n[[worldline]]\n[[event]]\nmeeting = [1]\n"
        "[[view]]\nt = [0]\nx = {}\nlayers = [{}]\n[[worldline]]\nleg = [1]\n"
    ).scenario
    assert len(scenario.broken) == 5
    fields = {field.key: field.value for field in fields_of(scenario.objects[0])}
    assert fields["start"] == 3
    assert fields["speed"] == "1979-05-27"
    assert fields["leg[1].fr"] == 1
    assert fields["leg[1].until"] == 5
    assert {thing.id: len(fields_of(thing)) > 3 for thing in scenario.objects} == {
        thing.id: True for thing in scenario.objects
    }
