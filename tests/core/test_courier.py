"""The courier's story, against the closed form, in every frame."""

from __future__ import annotations

import math
from pathlib import Path

import numpy as np
import pytest

from tauline.readouts import event_table, readouts_for
from tauline.resolve import Resolved, resolve
from tauline.resources import scenarios_folder
from tauline.scenario.read import read
from tauline.scenario.units import JULIAN_YEAR, SPEED_OF_LIGHT

TURN = 9.80665 * JULIAN_YEAR / SPEED_OF_LIGHT
PHI = math.atanh(0.6)
STATION_AGE = 10 + 2 * math.sinh(PHI) / TURN
COURIER_AGE = 8 + 2 * PHI / TURN


@pytest.fixture(scope="module")
def courier() -> Resolved:
    return resolve(read(scenarios_folder() / "courier.toml").scenario)


def test_nothing_is_wrong_with_it(courier: Resolved) -> None:
    assert [str(diagnosis) for diagnosis in courier.diagnoses] == []


def test_both_ages(courier: Resolved) -> None:
    readings = {p.worldline: p.proper_time for p in courier.events["return"].on}
    assert readings["station"] == pytest.approx(STATION_AGE, rel=1e-12)
    assert readings["courier"] == pytest.approx(COURIER_AGE, rel=1e-12)


@pytest.mark.parametrize("frame", ["station-frame", "outbound", "homebound", "courier.leg-3"])
def test_the_ages_are_the_same_in_every_frame(courier: Resolved, frame: str) -> None:
    found = {
        item.name: item.number
        for item in readouts_for(courier, ("departure", "return"), courier.frame(frame))
    }
    assert found["elapsed on Station"] == pytest.approx(STATION_AGE, rel=1e-12)
    assert found["elapsed on Courier"] == pytest.approx(COURIER_AGE, rel=1e-12)
    assert found["proper time, straight"] == pytest.approx(STATION_AGE, rel=1e-12)


def test_the_table_keeps_every_interval(courier: Resolved) -> None:
    frames = [*courier.frames.values(), *courier.leg_frames.values()]
    table = event_table(courier, frames)
    for first in table.rows:
        for second in table.rows:
            intervals = [
                (b.u - a.u) * (b.v - a.v)
                for a, b in zip(first.coordinates, second.coordinates, strict=True)
            ]
            size = max(
                (abs(a.u) + abs(b.u)) * (abs(a.v) + abs(b.v))
                for a, b in zip(first.coordinates, second.coordinates, strict=True)
            )
            assert np.ptp(intervals) <= 1e-12 * max(size, 1e-300)


def test_who_calls_what_simultaneous(courier: Resolved) -> None:
    """t(1 − β²) for the outbound present; the same from the end for the homebound one."""
    on_station = {
        name: next(p.proper_time for p in courier.events[name].on if p.worldline == "station")
        for name in ("now-at-brakes", "now-at-homeward")
    }
    assert on_station["now-at-brakes"] == pytest.approx(5 - 0.6 * 3, rel=1e-12)
    assert on_station["now-at-homeward"] == pytest.approx(STATION_AGE - (5 - 0.6 * 3), rel=1e-12)


def test_greetings_and_the_answer(courier: Resolved) -> None:
    greetings = courier.pulses["greeting"].signals
    assert len(greetings) == math.floor(STATION_AGE)
    assert all(signal.received is not None for signal in greetings)
    # outbound, the k-th greeting sent at k years arrives at 2 k years of the courier's clock
    first = courier.events["greeting.1.received"]
    assert {p.worldline: p.proper_time for p in first.on}["courier"] == pytest.approx(2.0)
    answer = courier.signals["answer"]
    assert answer.received is not None
    assert answer.received.point[0] > 0.0


def test_everything_follows_one_number(courier: Resolved, tmp_path: Path) -> None:
    text = (scenarios_folder() / "courier.toml").read_text(encoding="utf-8")
    file = tmp_path / "faster.toml"
    file.write_text(text.replace('"0.6 c" ', '"0.8 c" '), encoding="utf-8")
    faster = resolve(read(file).scenario, courier)
    assert faster.faults == ()
    age = {p.worldline: p.proper_time for p in faster.events["return"].on}["courier"]
    assert age == pytest.approx(6 + 2 * math.atanh(0.8) / TURN, rel=1e-12)
