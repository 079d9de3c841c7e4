"""Readouts: what is said of one or two selected things, and with which frame and unit."""

from __future__ import annotations

import math

import pytest
from hypothesis import given
from hypothesis import strategies as st

from tauline.readouts import Readout, format_number, readouts_for
from tauline.resolve import Resolved, resolve
from tauline.scenario.read import parse

STORY = """tauline = 1
[[frame]]
id = "ground"
label = "Ground"
[[frame]]
id = "train"
label = "Train"
velocity = "0.6 c"
[[event]]
id = "zero"
t = 0
x = 0
[[event]]
id = "later"
t = 5
x = 3
[[event]]
id = "apart"
t = 3
x = 5
[[event]]
id = "lit"
t = 4
x = 4
[[worldline]]
id = "home"
x = 0
clock = { reads = 0, at = "zero" }
[[worldline]]
id = "ship"
through = "zero"
velocity = "0.6 c"
clock = { reads = 0, at = "zero" }
[[worldline]]
id = "turner"
start = "zero"
velocity = "0.6 c"
[[worldline.leg]]
until = { time = 5 }
[[worldline.leg]]
velocity = "-0.6 c"
until = { meets = "home" }
[[event]]
id = "corner"
on = "turner"
time = 5
[[signal]]
id = "ray"
from = "ask"
to = "ship"
[[event]]
id = "ask"
t = 1
x = 0
"""
RESOLVED = resolve(parse(STORY).scenario)


def say(*selection: str, frame: str = "ground", of: Resolved = RESOLVED) -> dict[str, Readout]:
    assert of.faults == ()
    return {item.name: item for item in readouts_for(of, selection, of.frame(frame))}


def test_timelike_pairs_have_a_proper_time_and_a_frame_at_one_place() -> None:
    found = say("zero", "later")
    assert found["proper time, straight"].number == pytest.approx(4.0, rel=1e-15)
    assert found["frame where they are at one place"].number == pytest.approx(0.6, rel=1e-15)
    assert found["time difference"].frame == "Ground"
    assert found["proper time, straight"].frame == ""
    assert found["distance along x"].unit == "ly"


def test_spacelike_pairs_have_a_proper_distance_and_a_frame_at_one_time() -> None:
    found = say("zero", "apart")
    assert found["proper distance"].number == pytest.approx(4.0, rel=1e-15)
    assert found["frame where they are simultaneous"].number == pytest.approx(0.6, rel=1e-15)
    seen = say("zero", "apart", frame="train")
    assert seen["time difference"].number == pytest.approx(0.0, abs=1e-15)
    assert seen["distance along x"].number == pytest.approx(4.0, rel=1e-15)


def test_null_pairs_have_neither() -> None:
    found = say("zero", "lit")
    assert "light" in found["interval class"].note
    assert "proper distance" not in found


@pytest.mark.parametrize(
    ("t1", "x1", "t2", "x2"), [(100.1, 100.3, 100.4, 100.6), (0.1, 0.3, 0.4, 0)]
)
@pytest.mark.parametrize("frame", ["base", "f"])
def test_decimals_on_a_light_ray_are_on_it(
    t1: float, x1: float, t2: float, x2: float, frame: str
) -> None:
    where = f'frame = "{frame}"\n'
    resolved = resolve(
        parse(
            f"""tauline = 1
[[frame]]
id = "f"
velocity = "0.9 c"
[[event]]
id = "a"
t = {t1}
x = {x1}
{where}
[[event]]
id = "b"
t = {t2}
x = {x2}
{where}
"""
        ).scenario
    )
    found = say("a", "b", of=resolved, frame="base")
    assert "null" in found["interval class"].note


@pytest.mark.parametrize("frame", ["ground", "train", "turner.leg-2"])
def test_doppler_factor_of_a_stated_emission_and_reception(frame: str) -> None:
    found = say("ask", "ray.received", frame=frame)
    (factor,) = (item.number for name, item in found.items() if name.startswith("Doppler"))
    assert factor == pytest.approx(0.5, rel=1e-14)


def test_doppler_factor_does_not_depend_on_the_order_of_selection() -> None:
    one, other = say("ask", "ray.received"), say("ray.received", "ask")
    names = [name for name in one if name.startswith("Doppler")]
    assert names == [name for name in other if name.startswith("Doppler")]
    assert other[names[0]].number == pytest.approx(0.5, rel=1e-14)


def test_a_corner_has_a_velocity_before_and_after() -> None:
    found = say("turner", "corner")
    assert found["velocity (before its corner)"].number == pytest.approx(0.6)
    assert found["velocity (after its corner)"].number == pytest.approx(-0.6)


def test_two_coasting_observers() -> None:
    found = say("home", "ship", frame="train")
    assert found["velocity of ship rel. to home"].number == pytest.approx(0.6, rel=1e-15)


def test_an_observer_and_an_event_elsewhere() -> None:
    found = say("home", "later", frame="train")
    # simultaneous on the train: 5 − 0.6 · 3 at x = 0; seen when light gets there
    assert found["clock of home, simultaneous"].number == pytest.approx(3.2, rel=1e-15)
    assert found["clock of home, simultaneous"].frame == "Train"
    assert found["clock of home when it sees it"].number == pytest.approx(8.0, rel=1e-15)


def test_what_a_corner_skips_is_reckoned_by_nobody() -> None:
    resolved = resolve(
        parse(STORY + '[[event]]\nid = "mid"\non = "home"\nproper_time = 5\n').scenario
    )
    found = say("turner", "mid", of=resolved)
    assert found["reckoned time, turner, co-moving"].number is None
    assert "none" in found["reckoned time, turner, co-moving"].text()
    # sent at 1/2 · 5, back at 10 − 1/2 · 5 of the traveller's eight years
    assert found["radar time of turner"].number == pytest.approx(4.0)
    assert found["radar place of turner"].number == pytest.approx(-1.5)


def test_seen_is_neither_reckoned_nor_happened() -> None:
    found = say("home", "apart")
    assert found["clock of home when it sees it"].number == pytest.approx(8.0)
    assert found["place where home sees it"].number == pytest.approx(5.0)
    assert found["reckoned time, home, co-moving"].number == pytest.approx(3.0)
    assert found["reckoned place, home, co-moving"].number == pytest.approx(5.0)


def test_very_fast_things_are_told_by_what_is_missing_to_c() -> None:
    resolved = resolve(
        parse(
            STORY
            + """[[worldline]]
id = "ray-like"
through = "zero"
one_minus_beta = 4.3e-24
direction = "+x"
clock = { reads = 0, at = "zero" }
"""
        ).scenario
    )
    found = say("ray-like", of=resolved)
    assert found["shortfall from c"].number == pytest.approx(4.3e-24, rel=1e-13)
    assert found["shortfall from c"].text(2) == "4.3·10⁻²⁴"


@given(st.floats(-4, 4), st.floats(-4, 4), st.floats(-0.99, 0.99))
def test_the_interval_is_the_same_from_every_frame(t: float, x: float, beta: float) -> None:
    resolved = resolve(
        parse(
            f"""tauline = 1
[[event]]
id = "a"
t = 0
x = 0
[[event]]
id = "b"
t = {t!r}
x = {x!r}
[[frame]]
id = "f"
velocity = "{beta!r} c"
"""
        ).scenario
    )
    for name in ("proper time, straight", "proper distance"):
        numbers = [
            {r.name: r.number for r in readouts_for(resolved, ("a", "b"), frame)}.get(name)
            for frame in resolved.frames.values()
        ]
        assert numbers[0] == numbers[1]
        if numbers[0] is not None:
            assert numbers[0] == pytest.approx(math.sqrt(abs(t * t - x * x)), rel=1e-6, abs=1e-7)


@pytest.mark.parametrize(
    ("number", "digits", "text"),
    [
        (0.0, 3, "0"),
        (-1.5, 3, "−1.5"),
        (math.inf, 3, "∞"),
        (1e-7, 2, "1·10⁻⁷"),
        (12345.6, 3, "1.23·10⁴"),
    ],
)
def test_numbers_are_written_for_people(number: float, digits: int, text: str) -> None:
    assert format_number(number, digits) == text


def test_copied_numbers_keep_every_digit() -> None:
    item = say("zero", "later", frame="train")["time difference"]
    assert item.number is not None
    assert float(item.full()) == item.number
