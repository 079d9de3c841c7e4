"""Resolving scenarios: constructions, faults in their place, and what is not done again."""

from __future__ import annotations

import math

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from tauline.resolve import Resolved, resolve
from tauline.resolve.relations import related
from tauline.scenario.edit import set_field, set_parameter
from tauline.scenario.read import parse
from tauline.scenario.scenario import Scenario

HEAD = """tauline = 1
[[event]]
id = "zero"
t = 0
x = 0
[[worldline]]
id = "home"
x = 0
clock = { reads = 0, at = "zero" }
"""


def scenario_of(text: str) -> Scenario:
    return parse(HEAD + text).scenario


def resolved_of(text: str) -> Resolved:
    return resolve(scenario_of(text))


def clean(text: str) -> Resolved:
    resolved = resolved_of(text)
    assert [str(d) for d in resolved.diagnoses] == []
    return resolved


def fault_of(text: str, name: str) -> str:
    """The one fault of an object; nothing else may have one of its own."""
    resolved = resolved_of(text)
    own = [d for d in resolved.faults if d.object == name]
    assert len(own) == 1, [str(d) for d in resolved.diagnoses]
    assert resolved.states[name] in ("faulty", "blocked")
    assert resolved.states["home"] == "resolved"
    return f"{own[0].key}: {own[0]}"


def at(resolved: Resolved, name: str) -> tuple[float, float]:
    u, v = resolved.events[name].point
    return 0.5 * (u + v), 0.5 * (v - u)


# --- constructions --------------------------------------------------------------------------


def test_a_frame_relative_to_a_moving_one_with_its_own_origin() -> None:
    resolved = clean(
        """
[[event]]
id = "marker"
t = 2
x = 1
[[frame]]
id = "slow"
velocity = "0.5 c"
[[frame]]
id = "fast"
relative_to = "slow"
velocity = "0.5 c"
origin = "marker"
[[event]]
id = "inside"
frame = "fast"
t = 1
x = 0
"""
    )
    gamma = 1 / 0.6
    assert at(resolved, "inside") == pytest.approx((2 + gamma, 1 + 0.8 * gamma), rel=1e-14)


def test_the_base_frame_takes_the_name_the_file_gives_it() -> None:
    resolved = clean('[[frame]]\nid = "ground"\nlabel = "Ground"\n')
    assert resolved.base.id == "ground"
    assert list(resolved.frames) == ["ground"]


@pytest.mark.parametrize(
    ("until", "proper_time"),
    [
        ('until = { time = "5 yr" }', 4.0),
        ('until = { x = "3 ly" }', 4.0),
        ('until = { proper_time = "4 yr" }', 4.0),
        ('for = "4 yr"', 4.0),
        ('until = { event = "goal" }', 4.0),
        ('until = { meets = "beacon" }', 4.0),
        ('until = { time = "4 yr", frame = "own" }', 4.0),
    ],
)
def test_a_coasting_leg_ends_in_any_way(until: str, proper_time: float) -> None:
    resolved = clean(
        f"""
[[frame]]
id = "own"
velocity = "0.6 c"
[[event]]
id = "goal"
t = 5
x = 3
[[worldline]]
id = "beacon"
x = 3
clock = {{ reads = 0, at = "goal" }}
[[worldline]]
id = "ship"
start = "zero"
velocity = "0.6 c"
[[worldline.leg]]
{until}
"""
    )
    line = resolved.worldlines["ship"].line
    assert line.end == pytest.approx(proper_time, rel=1e-14)
    assert np.allclose(line.event(line.end), [2.0, 8.0], rtol=1e-14)


def test_a_leg_to_an_event_finds_its_own_velocity() -> None:
    resolved = clean(
        """
[[event]]
id = "goal"
t = 5
x = -4
[[worldline]]
id = "ship"
start = "zero"
[[worldline.leg]]
until = { event = "goal" }
"""
    )
    line = resolved.worldlines["ship"].line
    assert float(np.tanh(line.rapidity(0.1))) == pytest.approx(-0.8, rel=1e-14)
    assert line.end == pytest.approx(3.0, rel=1e-14)


def test_clocks_are_set_by_an_event_and_a_reading() -> None:
    resolved = clean(
        """
[[worldline]]
id = "ship"
start = "zero"
velocity = "0.8 c"
clock = { reads = "10 yr", at = "ship.leg-1.end" }
[[worldline.leg]]
for = "3 yr"
[[worldline.leg]]
acceleration = "-1 ly/yr^2"
for = "1 yr"
[[event]]
id = "seven"
on = "ship"
proper_time = "7 yr"
"""
    )
    assert resolved.worldlines["ship"].clock_offset == pytest.approx(7.0)
    assert at(resolved, "seven") == (0.0, 0.0)


@pytest.mark.parametrize(("side", "beta"), [("before", 0.6), ("after", -0.6)])
def test_a_corner_has_two_rest_frames(side: str, beta: float) -> None:
    text = """
[[worldline]]
id = "ship"
start = "zero"
velocity = "0.6 c"
[[worldline.leg]]
until = { time = 5 }
[[worldline.leg]]
velocity = "-0.6 c"
until = { meets = "home" }
[[event]]
id = "turn"
on = "ship"
time = 5
[[event]]
id = "now"
on = "home"
simultaneous_with = "turn"
observer = "ship"
"""
    assert "side" in fault_of(text, "now")
    resolved = clean(text + f'side = "{side}"\n')
    assert resolved.worldlines["ship"].line.corners == pytest.approx((4.0,))
    assert at(resolved, "now")[0] == pytest.approx(5 - beta * 3, rel=1e-14)


def test_light_towards_either_side() -> None:
    resolved = clean(
        """
[[event]]
id = "lamp"
t = 0
x = 2
[[signal]]
id = "inward"
from = "lamp"
to = "home"
[[signal]]
id = "seen-by"
from = "home"
to = "lamp"
[[signal]]
id = "off"
from = "lamp"
direction = "+x"
"""
    )
    assert at(resolved, "inward.received") == (2.0, 0.0)
    assert at(resolved, "seen-by.sent") == (-2.0, 0.0)
    assert resolved.states["off"] == "resolved"
    assert resolved.signals["off"].received is None


def test_pulses_start_one_period_after_the_start_and_include_the_end() -> None:
    resolved = clean(
        """
[[event]]
id = "last"
t = 3
x = 0
[[worldline]]
id = "other"
x = 1
clock = { reads = 0, at = "corner" }
[[event]]
id = "corner"
t = 0
x = 1
[[pulses]]
id = "tick"
from = "home"
to = "other"
every = "0.1 yr"
start = "zero"
end = "last"
"""
    )
    signals = resolved.pulses["tick"].signals
    assert len(signals) == 30
    times = [float(signal.sent.point.sum()) / 2 for signal in signals if signal.sent]
    assert times[0] == pytest.approx(0.1)
    assert times[-1] == pytest.approx(3.0)


def test_a_signal_that_never_arrives_is_a_result() -> None:
    resolved = resolved_of(
        """
[[event]]
id = "chase"
t = 1
x = -1
[[worldline]]
id = "rocket"
start = "zero"
[[worldline.leg]]
acceleration = "1 ly/yr^2"
[[signal]]
id = "late"
from = "chase"
to = "rocket"
"""
    )
    assert resolved.faults == ()
    assert resolved.states["late"] == "not received"
    assert "horizon" in resolved.signals["late"].reason
    assert [d.object for d in resolved.diagnoses] == ["late"]


@given(st.floats(-0.99, 0.99), st.floats(0.1, 5.0), st.floats(-3.0, 3.0))
def test_signal_ends_are_null_separated_exactly(beta: float, t: float, x: float) -> None:
    resolved = clean(
        f"""
[[worldline]]
id = "probe"
through = "zero"
velocity = "{beta!r} c"
clock = {{ reads = 0, at = "zero" }}
[[event]]
id = "flash"
t = {t!r}
x = {x!r}
[[signal]]
id = "light"
from = "flash"
to = "probe"
"""
    )
    signal = resolved.signals["light"]
    assert signal.sent is not None
    assert signal.received is not None
    du, dv = signal.received.point - signal.sent.point
    assert du * dv == 0.0
    placed = resolved.events[signal.received.id].on
    assert "probe" in [placement.worldline for placement in placed]


# --- faults ---------------------------------------------------------------------------------

LEG = """
[[worldline]]
id = "ship"
start = "zero"
velocity = "{velocity}"
[[worldline.leg]]
{leg}
"""


@pytest.mark.parametrize(
    ("text", "name", "says"),
    [
        (LEG.format(velocity="1.2 c", leg='for = "1 yr"'), "ship", "1.2 c is not below"),
        (LEG.format(velocity="c", leg='for = "1 yr"'), "ship", "not below that of light"),
        (LEG.format(velocity="0.5 yr", leg='for = "1 yr"'), "ship", "velocity"),
        (LEG.format(velocity="0.5 c", leg="until = { time = -1 }"), "ship", "leg[1].until.time"),
        (LEG.format(velocity="0.5 c", leg="until = { x = -1 }"), "ship", "never gets to"),
        (LEG.format(velocity="0.5 c", leg='until = { meets = "home" }'), "ship", "never meets"),
        (LEG.format(velocity="0.5 c", leg='until = { meets = "nobody" }'), "ship", "nobody"),
        (
            LEG.format(velocity="0.5 c", leg='acceleration = 1\nuntil = { velocity = "0" }'),
            "ship",
            "velocity",
        ),
        (
            LEG.format(velocity="0.5 c", leg='acceleration = 1\nuntil = { velocity = "0.1 c" }'),
            "ship",
            "leads away",
        ),
        ('[[event]]\nid = "e"\non = "home"\nproper_time = "1 ly"\n', "e", "a length"),
        ('[[event]]\nid = "e"\nt = "1e400 yr"\nx = 0\n', "e", "t: "),
        ('[[event]]\nid = "e"\nt = nan\nx = 0\n', "e", "finite"),
        ('[[event]]\nid = "e"\nt = 1e400\nx = 0\n', "e", "finite"),
        ('[[event]]\nid = "e"\nmeeting = ["home", "zero"]\n', "e", "is a event, not a worldline"),
        ('[[signal]]\nid = "s"\nfrom = "zero"\nto = "gone"\n', "s", "nothing has the id 'gone'"),
        (
            '[[event]]\nid = "e"\nt = 1\nx = 5\n[[signal]]\nid = "s"\nfrom = "zero"\nto = "e"\n',
            "s",
            "spacelike",
        ),
        ('[[worldline]]\nid = "w"\nx = 3\n', "w", "endless"),
        (
            '[[frame]]\nid = "f"\nvelocity = "0.5 c"\nrelative_to = "f"\n',
            "f",
            "refers to itself: f → f",
        ),
    ],
)
def test_each_fault_is_found_in_its_place(text: str, name: str, says: str) -> None:
    assert says in fault_of(text, name)


def test_a_ring_of_references_is_told_on_every_object_in_it() -> None:
    resolved = resolved_of(
        """
[[event]]
id = "a"
on = "home"
simultaneous_with = "b"
frame = "base"
[[event]]
id = "b"
on = "home"
simultaneous_with = "c"
frame = "base"
[[event]]
id = "c"
on = "home"
simultaneous_with = "a"
frame = "base"
[[signal]]
id = "hangs-on"
from = "a"
to = "home"
"""
    )
    states = {name: resolved.states[name] for name in ("a", "b", "c", "hangs-on", "home")}
    assert states == {
        "a": "faulty",
        "b": "faulty",
        "c": "faulty",
        "hangs-on": "blocked",
        "home": "resolved",
    }
    assert all("refers to itself" in d.message for d in resolved.faults if d.object in "abc")


def test_a_clock_set_by_an_event_on_its_own_worldline_is_no_ring() -> None:
    resolved = clean(
        """
[[worldline]]
id = "probe"
through = "zero"
velocity = "0.6 c"
clock = { reads = "1 yr", at = "later" }
[[event]]
id = "later"
on = "probe"
time = 5
"""
    )
    assert resolved.worldlines["probe"].clock_offset == pytest.approx(1.0 - 4.0)


# --- what is done again, and what is not ----------------------------------------------------

CHAINED = """
[parameters]
speed = "0.6 c"
[[worldline]]
id = "ship"
start = "zero"
velocity = "speed"
[[worldline.leg]]
for = "4 yr"
[[event]]
id = "mid"
on = "ship"
proper_time = 2
[[event]]
id = "free"
t = 1
x = 1
[[signal]]
id = "call"
from = "mid"
to = "home"
"""


def test_only_what_changed_is_worked_out_again() -> None:
    scenario = scenario_of(CHAINED)
    first = resolve(scenario)
    moved = resolve(set_field(scenario, "free", "x", 2.0), first)
    for name in ("ship", "home"):
        assert moved.worldlines[name] is first.worldlines[name]
    assert moved.signals["call"] is first.signals["call"]
    assert at(moved, "free") == (1.0, 2.0)


def test_everything_that_hangs_on_a_parameter_follows() -> None:
    scenario = scenario_of(CHAINED)
    first = resolve(scenario)
    second = resolve(set_parameter(scenario, "speed", "0.8 c"), first)
    fresh = resolve(second.scenario)
    assert second.worldlines["home"] is first.worldlines["home"]
    for name, event in fresh.events.items():
        assert np.array_equal(event.point, second.events[name].point)
    assert not np.array_equal(first.events["mid"].point, second.events["mid"].point)


def test_a_mended_reference_is_found_again() -> None:
    scenario = scenario_of('[[signal]]\nid = "s"\nfrom = "later-named"\nto = "home"\n')
    first = resolve(scenario)
    assert first.states["s"] == "faulty"
    mended = parse(
        HEAD
        + '[[signal]]\nid = "s"\nfrom = "later-named"\nto = "home"\n'
        + '[[event]]\nid = "later-named"\nt = 0\nx = 1\n'
    ).scenario
    assert resolve(mended, first).states["s"] == "resolved"
    assert resolve(scenario, resolve(mended, first)).states["s"] == "faulty"


def test_a_ring_closed_by_an_edit_and_opened_again() -> None:
    text = """
[[event]]
id = "a"
on = "home"
simultaneous_with = "zero"
frame = "base"
[[event]]
id = "b"
on = "home"
simultaneous_with = "a"
frame = "base"
"""
    scenario = scenario_of(text)
    first = resolve(scenario)
    ring = set_field(scenario, "a", "simultaneous_with", "b")
    second = resolve(ring, first)
    assert second.states["a"] == second.states["b"] == "faulty"
    assert resolve(scenario, second).faults == ()


def test_a_long_chain_of_constructions_resolves() -> None:
    """Three hundred events, each hanging on the next one of the file."""
    parts = [
        f'[[event]]\nid = "e{k}"\non = "home"\nsimultaneous_with = "e{k + 1}"\nframe = "base"\n'
        for k in range(300)
    ]
    resolved = clean("".join(parts) + '[[event]]\nid = "e300"\nt = 1\nx = 1\n')
    assert at(resolved, "e0") == (1.0, 0.0)


def test_related_things_stay_in_sight() -> None:
    resolved = resolve(scenario_of(CHAINED))
    near = related(resolved, ["call"])
    assert {"call", "mid", "home", "call.received", "ship"} - near == {"ship"}
    assert "free" not in near
    assert {"mid", "call"} <= related(resolved, ["ship"]) | related(resolved, ["mid"])


def test_one_minus_beta_keeps_its_digits() -> None:
    resolved = clean(
        """
[[worldline]]
id = "ray"
through = "zero"
one_minus_beta = 4.3e-24
direction = "+x"
clock = { reads = 0, at = "zero" }
"""
    )
    rapidity = float(resolved.worldlines["ray"].line.rapidity(0.0))
    assert 2.0 / (1.0 + math.exp(2.0 * rapidity)) == pytest.approx(4.3e-24, rel=1e-13)


# --- lines that keep with another one -------------------------------------------------------

LEAD = """
[[worldline]]
id = "lead"
start = "zero"
[[worldline.leg]]
acceleration = "1 ly/yr^2"
for = "1 yr"
[[worldline.leg]]
for = "1 yr"
"""


def test_a_rigid_companion_follows_what_it_keeps_with() -> None:
    scenario = scenario_of(
        LEAD + '[[worldline]]\nid = "tail"\ncompanion = "lead"\ndistance = -0.5\n'
    )
    first = resolve(scenario)
    assert first.diagnoses == ()
    # 1 + a s = 1/2 while the lead accelerates, 1 while it coasts
    assert first.worldlines["tail"].line.end == pytest.approx(1.5, rel=1e-14)
    assert "tail.leg-2" in first.leg_frames
    second = resolve(set_field(scenario, "tail", "distance", "-0.25 ly"), first)
    assert second.worldlines["lead"] is first.worldlines["lead"]
    assert second.worldlines["tail"].line.end == pytest.approx(1.75, rel=1e-14)


def test_where_a_companion_breaks_is_told_and_is_no_fault() -> None:
    resolved = resolved_of(
        LEAD.replace("[[worldline.leg]]\nfor", '[[worldline.leg]]\nvelocity = "0"\nfor').replace(
            '"0"', '"0 c"'
        )
        + '[[worldline]]\nid = "nose"\ncompanion = "lead"\ndistance = 0.5\n'
    )
    assert resolved.faults == ()
    (note,) = resolved.diagnoses
    assert "breaks where 'lead' is at t = 1.1752 yr" in note.message
    assert "jumps" in note.message
    assert resolved.worldlines["nose"].line.end == pytest.approx(1.5, rel=1e-14)


def test_too_far_behind_nothing_can_keep_the_distance() -> None:
    text = LEAD + '[[worldline]]\nid = "tail"\ncompanion = "lead"\ndistance = -1\n'
    assert "less than 1 ly" in fault_of(text, "tail")


def test_the_same_programme_elsewhere_begins_at_the_same_time_there() -> None:
    resolved = clean(
        LEAD
        + '[[worldline]]\nid = "other"\ndisplaced = "lead"\nby = "2 ly"\nframe = "moving"\n'
        + '[[frame]]\nid = "moving"\nvelocity = "0.6 c"\n'
    )
    u, v = resolved.worldlines["other"].line.event(0.0)
    assert (0.5 * (u + v), 0.5 * (v - u)) == pytest.approx((1.5, 2.5), rel=1e-14)
    assert resolved.worldlines["other"].line.end == 2.0


@pytest.mark.parametrize(
    "until",
    [
        "x = 1",
        "time = 1.7320508075688772",
        'proper_time = "acosh(2) yr"',
        'meets = "mark"',
        'velocity = "sqrt(3)/2 c"',
    ],
)
def test_an_accelerated_leg_ends_in_any_way(until: str) -> None:
    """One light-year at 1 ly/yr²: γ = 2, t = √3, τ = arcosh 2 (hyperbolic motion)."""
    resolved = clean(
        f"""
[[event]]
id = "there"
t = 0
x = 1
[[worldline]]
id = "mark"
x = 1
clock = {{ reads = 0, at = "there" }}
[[worldline]]
id = "ship"
start = "zero"
[[worldline.leg]]
acceleration = 1
until = {{ {until} }}
[[worldline.leg]]
acceleration = -1
until = {{ velocity = "0 c" }}
"""
    )
    line = resolved.worldlines["ship"].line
    assert line.end == pytest.approx(2 * math.acosh(2), rel=1e-14)
    u, v = line.event(line.end)
    assert (0.5 * (u + v), 0.5 * (v - u)) == pytest.approx((2 * math.sqrt(3), 2.0), rel=1e-13)


def test_a_leg_pushed_the_wrong_way_says_so() -> None:
    text = LEG.format(velocity="0 c", leg="acceleration = -1\nuntil = { x = 1 }")
    assert "never gets to x = 1 ly" in fault_of(text, "ship")


def test_all_faults_of_a_table_are_told_at_once() -> None:
    """A key too many does not hide the wrong units beside it."""
    resolved = resolved_of(
        """
[[worldline]]
id = "ship"
start = "zero"
velocity = "0.5 yr"
colour = "red"
[[worldline.leg]]
for = "2 ly"
until = { time = 3 }
[[event]]
id = "e"
t = "5 kg"
x = 1
y = 2
"""
    )
    told = {(fault.object, fault.key) for fault in resolved.faults}
    assert told == {
        ("ship", "colour"),
        ("ship", "velocity"),
        ("ship", "leg[1].for"),
        ("ship", "leg[1].until"),
        ("e", "t"),
        ("e", "y"),
    }


@given(st.floats(-0.95, 0.95), st.floats(-0.95, 0.95))
def test_from_the_halfway_frame_both_go_at_one_speed(first: float, second: float) -> None:
    resolved = clean(
        f"""
[[frame]]
id = "one"
velocity = "{first!r} c"
[[frame]]
id = "other"
velocity = "{second!r} c"
[[frame]]
id = "between"
halfway = ["one", "other"]
"""
    )
    middle = resolved.frame("between").rapidity
    away = [resolved.frame(name).rapidity - middle for name in ("one", "other")]
    assert away[0] == pytest.approx(-away[1], abs=1e-14)
