"""Benchmarks: what we do against a peer or a floor, side by side in one run.

Without ``--benchmark-enable`` each runs once, as a check that it runs at all. With it, the groups
in the report compare; nothing is asserted about time.
"""

from __future__ import annotations

import math
from collections.abc import Callable

import numpy as np
import pytest

from tauline.export.measure import PrintMeasure
from tauline.figure.diagram import diagram
from tauline.figure.style import PRINT
from tauline.figure.view import default_view
from tauline.meetings import receptions
from tauline.resolve import resolve
from tauline.resources import scenarios_folder
from tauline.scenario.edit import set_parameter
from tauline.scenario.read import parse, read
from tauline.spacetime import boost
from tauline.worldlines import Coast, chain

Benchmark = Callable[..., object]
EVENTS = np.random.default_rng(3).uniform(-1.0, 1.0, size=(2, 1_000_000))


@pytest.mark.benchmark(group="boost a million events")
def test_floor_a_copy_of_the_memory(benchmark: Benchmark) -> None:
    target = np.empty_like(EVENTS)
    benchmark(np.copyto, target, EVENTS)
    assert np.array_equal(target, EVENTS)


@pytest.mark.benchmark(group="boost a million events")
def test_boost(benchmark: Benchmark) -> None:
    seen = benchmark(boost, EVENTS, 0.5)
    assert isinstance(seen, np.ndarray)


@pytest.mark.benchmark(group="boost a million events")
def test_peer_a_matrix_for_each_event(benchmark: Benchmark) -> None:
    matrix = np.array([[math.cosh(0.5), -math.sinh(0.5)], [-math.sinh(0.5), math.cosh(0.5)]])
    benchmark(lambda: EVENTS.T @ matrix)


def _zigzag() -> object:
    legs, point = [], np.zeros(2)
    for k in range(200):
        leg = Coast(point=point, start_rapidity=0.4 * (-1) ** k, end=0.5)
        legs.append(leg)
        point = leg.event(leg.end)
    return chain(legs)


ZIGZAG = _zigzag()
FLASHES = np.random.default_rng(4).uniform(0.0, 40.0, size=(2, 1000))


@pytest.mark.benchmark(group="receptions of a thousand signals")
def test_receptions_together(benchmark: Benchmark) -> None:
    benchmark(receptions, ZIGZAG, FLASHES)


@pytest.mark.benchmark(group="receptions of a thousand signals")
def test_peer_one_by_one(benchmark: Benchmark) -> None:
    benchmark(lambda: [receptions(ZIGZAG, FLASHES[:, k]) for k in range(1000)])  # type: ignore[arg-type]


def _many_events(count: int) -> str:
    head = """tauline = 1
[parameters]
speed = "0.6 c"
[[event]]
id = "zero"
t = 0
x = 0
[[worldline]]
id = "ship"
through = "zero"
velocity = "speed"
clock = { reads = 0, at = "zero" }
"""
    body = "".join(f'[[event]]\nid = "e{k}"\nt = {k}\nx = {k % 7}\n' for k in range(count))
    return head + body + '[[event]]\nid = "moving"\non = "ship"\nproper_time = 1\n'


CROWD = parse(_many_events(1000)).scenario
RESOLVED_CROWD = resolve(CROWD)


@pytest.mark.benchmark(group="one parameter among a thousand objects")
def test_resolve_what_changed(benchmark: Benchmark) -> None:
    benchmark(resolve, set_parameter(CROWD, "speed", "0.7 c"), RESOLVED_CROWD)


@pytest.mark.benchmark(group="one parameter among a thousand objects")
def test_peer_resolve_all(benchmark: Benchmark) -> None:
    benchmark(resolve, set_parameter(CROWD, "speed", "0.7 c"))


COURIER = resolve(read(scenarios_folder() / "courier.toml").scenario)


@pytest.mark.benchmark(group="one frame of the courier's diagram")
def test_drawing(benchmark: Benchmark) -> None:
    view = default_view(COURIER)
    benchmark(diagram, COURIER, view, 40.0, PrintMeasure(PRINT))


@pytest.mark.benchmark(group="one frame of the courier's diagram")
def test_peer_matplotlib_draws_the_same_lines(benchmark: Benchmark) -> None:
    from matplotlib.backends.backend_agg import FigureCanvasAgg
    from matplotlib.figure import Figure

    drawing = diagram(COURIER, default_view(COURIER), 40.0, PrintMeasure(PRINT))
    figure = Figure(figsize=(5, 7))
    canvas = FigureCanvasAgg(figure)
    axes = figure.add_axes((0.0, 0.0, 1.0, 1.0))
    for stroke in drawing.strokes:
        axes.plot(*stroke.points.T)
    benchmark(canvas.draw)
