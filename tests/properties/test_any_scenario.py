"""Whatever a file says: it resolves without an exception, draws, tabulates and is inspected.

Random scenarios of all kinds of objects that refer to one another at random, with sensible,
odd, extreme and wrong values.
"""

from __future__ import annotations

import json
import math
from itertools import pairwise

import numpy as np
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st

from tauline.export.tables import write_table
from tauline.figure.diagram import diagram
from tauline.figure.drawing import Drawing, Role, Run
from tauline.figure.view import default_view, fit_window
from tauline.readouts import event_table, inspection, readouts_for
from tauline.resolve import Resolved, resolve
from tauline.scenario.read import parse

LAYERS = ["grid", "hyperbolas", "clock_ticks", "labels", "signals", "light_cones", "caption"]


class CountingMeasure:
    """Text metrics without a font: so much for each character."""

    def size(self, runs: tuple[Run, ...], role: Role) -> tuple[float, float]:
        height = 7.0 if role is Role.AXIS_NUMBER else 8.0
        return 0.6 * height * sum(len(run.text) for run in runs), height


# Mostly what is there and of the right kind; now and then anything.
odd = st.sampled_from(["home", "zero", "moving", "n0", "n1", "n2.end", "n3.received", "nobody"])


def mostly(*right: str) -> st.SearchStrategy[str]:
    return st.integers(0, 9).flatmap(lambda n: odd if n == 0 else st.sampled_from(right))


events = mostly("zero", "one", "aside", "goal", "traveller.leg-1.end", "n0", "n1")
lines = mostly("home", "passer", "traveller", "rocket", "n0", "n2")
frames = mostly("base", "moving", "passer.leg-1", "traveller.leg-3", "n1")
places = st.one_of(events, lines)
plain = st.one_of(
    st.sampled_from([0, 1, -1, 2.5, 5, -3, 1e-12, 1e9, -1e9, 1e300, 1e-300]),
    st.floats(-10, 10).map(lambda x: round(x, 3)),
)
sound = st.sampled_from([0, 1, 2.5, 5, 0.1])
times = st.one_of(
    sound, sound, sound, plain, st.sampled_from(["1 yr", "p*2 yr", "3 d", "1 ly", "1e400 yr"])
)
lengths = st.one_of(
    sound, sound, plain, st.sampled_from(["1 ly", "-2 ly", "p*1 ly", "5 km", "2 yr", ""])
)
speeds = st.sampled_from(
    ["0.6 c", "-0.6 c", "0.999999 c", "0 c", "p*0.1 c", "c", 0.3, -0.8, "1 yr", "v", "-v"]
)
pushes = st.sampled_from(["1 g", "-1 g", 0.5, -2.0, "1e-9 ly/yr^2", "1e9 ly/yr^2", 0, "1 yr"])


def maybe(key: str, values: st.SearchStrategy[object]) -> st.SearchStrategy[dict[str, object]]:
    return st.one_of(st.just({}), values.map(lambda value: {key: value}))


def joined(*parts: st.SearchStrategy[dict[str, object]]) -> st.SearchStrategy[dict[str, object]]:
    return st.tuples(*parts).map(lambda dicts: {k: v for d in dicts for k, v in d.items()})


def given_(**fields: st.SearchStrategy[object]) -> st.SearchStrategy[dict[str, object]]:
    return st.fixed_dictionaries(fields)


motion: st.SearchStrategy[dict[str, object]] = st.one_of(
    st.just({}),
    given_(velocity=speeds),
    given_(rapidity=st.sampled_from([0, 0.5, -3, 30, 301, "p"])),
    given_(gamma=st.sampled_from([1, 2, 0.5]), direction=st.sampled_from(["+x", "-x"])),
    given_(one_minus_beta=st.sampled_from([4.3e-24, 0.5, 2]), direction=st.just("+x")),
)
until_coast = st.one_of(
    given_(time=times),
    given_(x=lengths, frame=frames),
    given_(proper_time=times),
    given_(event=events),
    given_(meets=lines),
)
leg = st.one_of(
    joined(motion, st.one_of(st.just({}), given_(**{"for": times}), given_(until=until_coast))),
    joined(
        given_(acceleration=pushes),
        st.one_of(st.just({}), given_(**{"for": times}), given_(until=given_(velocity=speeds))),
    ),
)
clock = maybe("clock", given_(reads=times, at=st.one_of(events, st.just("start"))))
ends = joined(
    maybe("start", st.one_of(events, given_(time=times))),
    maybe("end", st.one_of(events, given_(time=times, frame=frames))),
)
frame = maybe("frame", frames)
tables: dict[str, st.SearchStrategy[dict[str, object]]] = {
    "frame": joined(motion, maybe("relative_to", frames), maybe("origin", events)),
    "worldline": st.one_of(
        joined(given_(x=lengths), frame, ends, clock),
        joined(given_(through=events), motion, frame, ends, clock),
        joined(
            given_(start=events, leg=st.lists(leg, min_size=1, max_size=3)),
            motion,
            frame,
            clock,
            maybe("endless_past", st.booleans()),
        ),
    ),
    "event": st.one_of(
        joined(given_(t=times, x=lengths), frame),
        given_(on=lines, proper_time=times),
        joined(given_(on=lines, time=times), frame),
        joined(
            given_(meeting=st.lists(lines, min_size=2, max_size=2)),
            maybe("which", st.integers(-2, 2)),
            maybe("after", events),
        ),
        joined(
            given_(on=lines, simultaneous_with=events),
            st.one_of(given_(frame=frames), given_(observer=lines)),
            maybe("side", st.sampled_from(["before", "after"])),
        ),
    ),
    "signal": st.one_of(
        given_(**{"from": events, "to": places}),
        given_(**{"from": places, "to": events}),
        given_(**{"from": events, "direction": st.sampled_from(["+x", "-x"])}),
    ),
    "pulses": joined(
        given_(**{"from": lines, "to": lines, "every": times}),
        maybe("start", events),
        maybe("end", events),
        given_(count=st.integers(-1, 20)),
    ),
    "simultaneity": joined(
        given_(through=events), st.one_of(given_(frame=frames), given_(observer=lines))
    ),
    "region": joined(
        given_(light_cone=events), maybe("part", st.sampled_from(["future", "past", "both"]))
    ),
    "body": given_(between=st.lists(lines, min_size=2, max_size=2)),
    "view": joined(
        frame,
        maybe("t", st.lists(times, min_size=2, max_size=2)),
        maybe("axes", st.lists(frames, max_size=2)),
        maybe("layers", st.lists(st.sampled_from(LAYERS), max_size=7)),
        maybe("pivot", events),
    ),
}
kinds = st.sampled_from([*sorted(tables), "worldline", "event", "event", "signal"])
objects = kinds.flatmap(lambda kind: st.tuples(st.just(kind), tables[kind]))
HEAD = """tauline = 1
[parameters]
p = 2
v = "0.5 c"
[[event]]
id = "zero"
t = 0
x = 0
[[worldline]]
id = "home"
x = 0
clock = { reads = 0, at = "zero" }
[[frame]]
id = "moving"
velocity = "v"
[[event]]
id = "one"
t = 1
x = 0
[[event]]
id = "aside"
t = 1
x = "-3 ly"
[[event]]
id = "goal"
t = 8
x = 2
[[worldline]]
id = "passer"
through = "one"
velocity = "-0.8 c"
clock = { reads = 0, at = "one" }
[[worldline]]
id = "traveller"
start = "zero"
velocity = "v"
[[worldline.leg]]
for = 3
[[worldline.leg]]
acceleration = "-1 g"
until = { velocity = "-v" }
[[worldline.leg]]
velocity = "-0.9 c"
until = { meets = "home" }
[[worldline]]
id = "rocket"
start = "aside"
[[worldline.leg]]
acceleration = 1
"""


def toml(value: object) -> str:
    if isinstance(value, dict):
        return "{ " + ", ".join(f"{k} = {toml(v)}" for k, v in value.items()) + " }"
    if isinstance(value, list):
        return "[" + ", ".join(map(toml, value)) + "]"
    if isinstance(value, bool):
        return str(value).lower()
    return json.dumps(value) if isinstance(value, str) else repr(value)


def text_of(parts: list[tuple[str, dict[str, object]]]) -> str:
    text = [HEAD]
    for number, (kind, table) in enumerate(parts):
        text.append(f'[[{kind}]]\nid = "n{number}"')
        text += [f"{key} = {toml(value)}" for key, value in table.items()]
    return "\n".join(text) + "\n"


def all_finite(drawing: Drawing) -> bool:
    """Nothing reaches out of the window by more than ticks and leaders do: some points."""
    w, margin = drawing.window, 80.0 / drawing.scale
    low, high = np.array([w.x0, w.t0]) - margin, np.array([w.x1, w.t1]) + margin
    places = [stroke.points for stroke in drawing.strokes]
    places += [fill.points for fill in drawing.fills]
    places += [np.array([marker.at]) for marker in drawing.markers]
    return all(bool(np.all((p >= low) & (p <= high))) for p in places)


def drawn(resolved: Resolved) -> None:
    for frame in list(resolved.frames.values())[:3]:
        view = default_view(resolved, frame.id)
        w = view.window
        if not all(map(math.isfinite, (w.width, w.height))) or w.width <= 0 or w.height <= 0:
            raise AssertionError(f"no window to draw in: {w}")
        assert all_finite(diagram(resolved, view, 400.0 / w.width, CountingMeasure()))
        assert fit_window(resolved, frame).width > 0


@settings(max_examples=60, suppress_health_check=list(HealthCheck))
@given(st.lists(objects, max_size=9))
def test_any_scenario(parts: list[tuple[str, dict[str, object]]]) -> None:
    loaded = parse(text_of(parts))
    resolved = resolve(loaded.scenario)
    again = resolve(loaded.scenario, resolved)
    assert [str(d) for d in again.diagnoses] == [str(d) for d in resolved.diagnoses]
    assert again.states == resolved.states
    sound_ones = ("zero", "one", "home", "moving", "passer", "traveller", "rocket")
    assert {resolved.states[name] for name in sound_ones} == {"resolved"}
    for name, state in resolved.states.items():
        faults = [d for d in resolved.faults if d.object == name]
        assert bool(faults) == (state in ("faulty", "blocked"))
    report = inspection(resolved, loaded.source)
    assert all(item["line"] for item in report["diagnoses"])
    table = event_table(resolved, None, "zero")
    for form in ("csv", "tsv", "md", "latex", "html", "json"):
        assert write_table(table, form)
    json.loads(write_table(table, "json"))
    chosen = [*resolved.states, *resolved.events]
    for one, other in pairwise(chosen):
        for item in readouts_for(resolved, (one, other), resolved.base):
            assert item.text()
    drawn(resolved)
