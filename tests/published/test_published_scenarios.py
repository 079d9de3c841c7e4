"""Published facts that go the whole way: from the text of a scenario to a readout or a table.

Each test names its source. "From memory" means that the source itself was not read.
"""

from __future__ import annotations

import pytest

from tauline.readouts import event_table, readouts_for
from tauline.resolve import Resolved, resolve
from tauline.scenario.read import parse


def resolved_from(text: str) -> Resolved:
    resolved = resolve(parse("tauline = 1\n" + text).scenario)
    assert resolved.faults == (), [str(fault) for fault in resolved.faults]
    return resolved


def number(resolved: Resolved, selection: tuple[str, ...], name: str, frame: str = "") -> float:
    where = resolved.frame(frame) if frame else resolved.base
    found = [r.number for r in readouts_for(resolved, selection, where) if r.name == name]
    assert len(found) == 1, [r.name for r in readouts_for(resolved, selection, where)]
    assert found[0] is not None
    return found[0]


CANOPUS = """
[units]
time = "yr"
length = "ly"
[[event]]
id = "setting-out"
t = 0
x = 0
[[worldline]]
id = "earth"
x = 0
clock = { reads = 0, at = "setting-out" }
[[worldline]]
id = "astronaut"
start = "setting-out"
velocity = "99/101 * c"
[[worldline.leg]]
until = { x = "99 ly" }
[[worldline.leg]]
velocity = "-99/101 * c"
until = { meets = "earth" }
[[event]]
id = "home"
meeting = ["astronaut", "earth"]
after = "setting-out"
"""


def test_d8_canopus_and_back() -> None:
    """D8: 99 ly at 99/101 c and back: 202 yr on Earth, 40 yr for the astronaut.

    E. F. Taylor & J. A. Wheeler, Spacetime Physics, 2nd ed. (1992), ch. 4 (from memory).
    """
    resolved = resolved_from(CANOPUS)
    assert number(resolved, ("setting-out", "home"), "elapsed on earth") == pytest.approx(
        202, rel=1e-12
    )
    assert number(resolved, ("setting-out", "home"), "elapsed on astronaut") == pytest.approx(
        40, rel=1e-12
    )


GREETINGS = """
[[event]]
id = "goodbye"
t = 0
x = 0
[[worldline]]
id = "home"
x = 0
clock = { reads = 0, at = "goodbye" }
[[worldline]]
id = "pam"
start = "goodbye"
velocity = "0.6 c"
[[worldline.leg]]
for = "4 yr"
[[worldline.leg]]
velocity = "-0.6 c"
until = { meets = "home" }
[[event]]
id = "hello"
meeting = ["pam", "home"]
after = "goodbye"
[[pulses]]
id = "from-home"
from = "home"
to = "pam"
every = "1 yr"
start = "goodbye"
end = "hello"
[[pulses]]
id = "from-pam"
from = "pam"
to = "home"
every = "1 yr"
"""


def test_d4_new_year_greetings_both_ways() -> None:
    """D4: 0.6 c out 4 yr and back 4 yr: 10 greetings one way, 8 the other; factors 1/2 and 2.

    einsteins-theory-of-relativity-4engineers.com/twin-paradox-2.html (inputs and factors read;
    the counts are derived from them).
    """
    resolved = resolved_from(GREETINGS)
    assert number(resolved, ("from-home",), "pulses received") == 10
    assert number(resolved, ("from-pam",), "pulses received") == 8
    assert number(resolved, ("goodbye", "hello"), "elapsed on home") == pytest.approx(10, rel=1e-12)
    first, last = (
        number(resolved, ("from-home",), f"Doppler factor, {which} pulse")
        for which in ("first", "last")
    )
    assert first == pytest.approx(0.5, rel=1e-12)
    assert last == pytest.approx(2.0, rel=1e-12)


ARROW = """
[units]
time = "ns"
length = "lns"
[parameters]
speed = "0.8 c"
arrow = "15 lns"
box = "10 lns"
[[frame]]
id = "box-frame"
[[frame]]
id = "arrow-frame"
velocity = "speed"
[[event]]
id = "tip-in"
t = 0
x = 0
[[worldline]]
id = "near-face"
x = 0
clock = { reads = 0, at = "tip-in" }
[[worldline]]
id = "far-face"
x = "box"
clock = { reads = 0, at = "far-zero" }
[[event]]
id = "far-zero"
t = 0
x = "box"
[[worldline]]
id = "tip"
through = "tip-in"
velocity = "speed"
clock = { reads = 0, at = "tip-in" }
[[worldline]]
id = "tail"
frame = "arrow-frame"
x = "-arrow"
clock = { reads = 0, at = "tail-zero" }
[[event]]
id = "tail-zero"
frame = "arrow-frame"
t = 0
x = "-arrow"
[[event]]
id = "tip-out"
meeting = ["tip", "far-face"]
[[event]]
id = "tail-in"
meeting = ["tail", "near-face"]
[[event]]
id = "far-now"
on = "far-face"
simultaneous_with = "tip-in"
frame = "arrow-frame"
[[body]]
id = "arrow-body"
between = ["tail", "tip"]
"""


def test_d9_arrow_and_box() -> None:
    """D9: 15 ft arrow, 10 ft open box, 0.8 c, c = 1 ft/ns (so a foot is a light-nanosecond).

    cr4.globalspec.com blog entries 832 and 854, "Ladder paradox" (12.5 ns, 18.75 ns, 8 ns read;
    9 ft, 1.25 ns and 7.5 ns derived).
    """
    resolved = resolved_from(ARROW)
    table = {row.id: row for row in event_table(resolved).rows}
    clocks = {name: {p.worldline: p.proper_time for p in row.on} for name, row in table.items()}
    assert number(resolved, ("arrow-body",), "length") == pytest.approx(9.0, rel=1e-12)
    assert clocks["tip-out"]["far-face"] == pytest.approx(12.5, rel=1e-12)
    assert clocks["tail-in"]["tail"] == pytest.approx(18.75, rel=1e-12)
    assert clocks["far-now"]["far-face"] == pytest.approx(8.0, rel=1e-12)
    inside = table["tip-out"].coordinates[0].t - table["tail-in"].coordinates[0].t
    assert inside == pytest.approx(1.25, rel=1e-12)
    assert table["tip-out"].coordinates[1].t == pytest.approx(7.5, rel=1e-12)


FLASHES = """
[units]
time = "s"
length = "m"
[[frame]]
id = "platform"
[[frame]]
id = "train"
velocity = "c/2"
[[event]]
id = "rear"
t = 0
x = 0
[[event]]
id = "front"
t = 0
x = "26 m / sqrt(4/3)"
"""


def test_d10_lamps_on_a_train() -> None:
    """D10: a 26 m car at c/2, lamps flash together on the platform: front first, by 43.3 ns.

    OpenStax, University Physics vol. 3 (2016), §5.5, worked example, with c = 3.00e8 m/s; the
    exact number is that of the SI c, where −vL/c² holds for lamps 26 m apart in the car's frame.
    """
    resolved = resolved_from(FLASHES)
    difference = number(resolved, ("rear", "front"), "time difference", "train")
    assert difference == pytest.approx(-43.3e-9, abs=0.1e-9)
    assert difference == pytest.approx(-43.36333237575976e-9, rel=1e-12)


RADAR = """
[[event]]
id = "sent"
t = 1
x = 0
[[event]]
id = "zero"
t = 0
x = 0
[[worldline]]
id = "station"
x = 0
clock = { reads = 0, at = "zero" }
[[worldline]]
id = "target"
through = "zero"
velocity = "0.6 c"
clock = { reads = 0, at = "zero" }
[[signal]]
id = "ping"
from = "sent"
to = "target"
[[signal]]
id = "echo"
from = "ping.received"
to = "station"
"""


def test_d12_radar() -> None:
    """D12: radar with k = 2: sent at 1, echo at 4, so the event is at t = 2.5, x = 1.5.

    Bondi's k-calculus (method read in encyclopaedias; numbers derived).
    """
    resolved = resolved_from(RADAR)
    table = {row.id: row for row in event_table(resolved).rows}
    (echo,) = (p.proper_time for p in table["echo.received"].on if p.worldline == "station")
    assert echo == pytest.approx(4.0, rel=1e-12)
    hit = table["ping.received"].coordinates[0]
    assert (hit.t, hit.x) == pytest.approx((2.5, 1.5), rel=1e-12)
    seen = ("station", "ping.received")
    assert number(resolved, seen, "radar time of station") == pytest.approx(2.5, rel=1e-12)
    assert number(resolved, seen, "radar place of station") == pytest.approx(1.5, rel=1e-12)


def test_g3_interval_of_48() -> None:
    """G3: the event (13, 11) seen at 3/5 c is at (8, 4); the interval is 48.

    B. Crowell, Special Relativity, ch. 1.4 (number read).
    """
    resolved = resolved_from(
        """
[[frame]]
id = "moving"
velocity = "3/5 c"
[[event]]
id = "far"
t = 13
x = 11
"""
    )
    (row,) = event_table(resolved, [resolved.frame("moving")]).rows
    (seen,) = row.coordinates
    assert (seen.t, seen.x) == pytest.approx((8.0, 4.0), rel=1e-12)
    assert seen.u * seen.v == pytest.approx(48.0, rel=1e-12)


def test_c1_velocities_composed_through_frames() -> None:
    """C1: 0.5 ⊕ 0.75 = 0.909 c, 0.75 ⊖ 0.25 = 0.615 c.

    OpenStax, University Physics vol. 3 (2016), §5.6 (numbers read).
    """
    resolved = resolved_from(
        """
[[event]]
id = "here"
t = 0
x = 0
[[frame]]
id = "ship"
velocity = "0.5 c"
[[worldline]]
id = "canister"
through = "here"
velocity = "0.75 c"
frame = "ship"
clock = { reads = 0, at = "here" }
[[frame]]
id = "other"
velocity = "0.25 c"
[[worldline]]
id = "pursuer"
through = "here"
velocity = "0.75 c"
clock = { reads = 0, at = "here" }
"""
    )
    assert number(resolved, ("canister",), "velocity") == pytest.approx(10 / 11, rel=1e-12)
    assert number(resolved, ("pursuer",), "velocity", "other") == pytest.approx(
        0.6153846153846153, rel=1e-12
    )
    assert number(resolved, ("canister",), "velocity") == pytest.approx(0.909, abs=5e-4)


def test_t3_the_rope_between_two_rockets_is_stretched() -> None:
    """T3: same programme up to 0.6 c: the gap grows by γ − 1 = 0.25, it is not squeezed by 0.2.

    B. Crowell, Special Relativity, ch. 3.9 (statement read; the number is derived).
    """
    resolved = resolved_from(
        """
[[event]]
id = "start"
t = 0
x = 0
[[worldline]]
id = "front"
start = "start"
[[worldline.leg]]
acceleration = 1
until = { velocity = "0.6 c" }
[[worldline.leg]]
[[worldline]]
id = "back"
displaced = "front"
by = "-1 ly"
[[worldline]]
id = "rope-end"
companion = "front"
distance = "-0.5 ly"
[[frame]]
id = "cruise"
relative_to = "front.leg-2"
[[event]]
id = "late"
on = "front"
proper_time = 9
[[event]]
id = "back-then"
on = "back"
simultaneous_with = "late"
frame = "cruise"
[[event]]
id = "rope-then"
on = "rope-end"
simultaneous_with = "late"
frame = "cruise"
"""
    )
    gap = number(resolved, ("back-then", "late"), "distance along x", "cruise")
    assert gap - 1.0 == pytest.approx(0.25, rel=1e-12)
    rope = number(resolved, ("rope-then", "late"), "distance along x", "cruise")
    assert rope == pytest.approx(0.5, rel=1e-12)


def test_e12_light_along_a_rigid_rod_is_redshifted() -> None:
    """E12: tail at 1, nose at 2 (a L = 1): light from tail to nose has its period doubled.

    Derived: the ratio of the clock rates along the rod, 1 + a L.
    """
    resolved = resolved_from(
        """
[[event]]
id = "start"
t = 0
x = 1
[[worldline]]
id = "tail"
start = "start"
[[worldline.leg]]
acceleration = 1
for = 9
[[worldline]]
id = "nose"
companion = "tail"
distance = "1 ly"
[[event]]
id = "flash"
on = "tail"
proper_time = 2
[[signal]]
id = "light"
from = "flash"
to = "nose"
"""
    )
    factor = number(resolved, ("light",), "Doppler factor, flash → light.received")
    assert 1.0 / factor == pytest.approx(2.0, rel=1e-12)


@pytest.mark.parametrize(
    ("far", "flyby", "years", "exact"),
    [(27000, True, 11, 10.593187084191711), (30000, False, 20, 20.046861483208057)],
)
def test_e3_to_the_middle_of_the_galaxy(
    far: float, flyby: bool, years: float, exact: float
) -> None:
    """E3: 9.8 m/s² all the way: 27 000 ly in 11 yr; 30 000 ly with braking in 20 yr.

    B. Crowell, Special Relativity, ch. 4, problem "galactic-center" (numbers read).
    """
    braking = '[[worldline.leg]]\nacceleration = "-9.8 m/s^2"\nuntil = { velocity = "0 c" }\n'
    resolved = resolved_from(
        f"""
[[event]]
id = "leaving"
t = 0
x = 0
[[worldline]]
id = "ship"
start = "leaving"
[[worldline.leg]]
acceleration = "9.8 m/s^2"
until = {{ x = {far if flyby else far / 2} }}
{"" if flyby else braking}
"""
    )
    age = number(resolved, ("ship",), "elapsed proper time")
    assert age == pytest.approx(years, abs=0.5)
    assert age == pytest.approx(exact, rel=1e-12)


def test_e7_the_horizon_of_a_ship_at_one_g() -> None:
    """E7: 0.97 ly behind a 1 g ship; signals from where it started arrive if sent within 354 d.

    "About one light-year" read in arcsecond.blogspot.com 2008/07 and elsewhere; 0.97 from memory;
    the number of days is derived, c/g.
    """
    resolved = resolved_from(
        """
[units]
time = "d"
length = "ly"
[[event]]
id = "start"
t = 0
x = 0
[[worldline]]
id = "base-camp"
x = 0
clock = { reads = 0, at = "start" }
[[worldline]]
id = "ship"
start = "start"
[[worldline.leg]]
acceleration = "1 g"
[[event]]
id = "in-time"
t = 353.8
x = 0
[[event]]
id = "late"
t = 353.9
x = 0
[[signal]]
id = "first"
from = "in-time"
to = "ship"
[[signal]]
id = "second"
from = "late"
to = "ship"
"""
    )
    assert number(resolved, ("ship",), "horizon, from the traveller") == pytest.approx(
        -0.9687150795722887, rel=1e-12
    )
    assert resolved.states["first"] == "resolved"
    assert resolved.states["second"] == "not received"
    assert "leaves before t = 353.823 d" in resolved.signals["second"].reason
