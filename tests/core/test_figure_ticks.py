"""Ticks at 1-2-5 steps."""

from __future__ import annotations

import math

import pytest
from hypothesis import given
from hypothesis import strategies as st

from tauline.figure.ticks import minor_step, step_for, tick_text, ticks_between


@given(st.floats(1e-250, 1e250))
def test_a_step_is_the_next_of_1_2_5(least: float) -> None:
    step = step_for(least)
    leading = step / 10.0 ** math.floor(math.log10(step) + 1e-9)
    assert round(leading, 6) in (1.0, 2.0, 5.0)
    assert least * (1.0 - 1e-8) <= step <= least * 2.5 * (1.0 + 1e-8)


@pytest.mark.parametrize(("step", "minor"), [(1.0, 0.2), (2.0, 0.5), (5.0, 1.0), (0.2, 0.05)])
def test_small_ticks_are_round_too(step: float, minor: float) -> None:
    assert minor_step(step) == pytest.approx(minor)


@given(st.floats(-1e4, 1e4), st.floats(0.0, 100.0), st.sampled_from([0.5, 1.0, 2.0, 5.0, 20.0]))
def test_ticks_are_all_multiples_in_the_range(low: float, length: float, step: float) -> None:
    ticks = ticks_between(low, low + length, step)
    whole = [round(tick / step) for tick in ticks]
    assert (
        whole
        == list(range(math.ceil(low / step - 1e-9), math.floor((low + length) / step + 1e-9) + 1))
        or len(whole) == 0
    )
    if length / step < 150.0 and length > 2.0 * step:
        assert len(whole) >= 1
    assert all(tick == number * step for tick, number in zip(ticks, whole, strict=True))


@pytest.mark.parametrize(
    ("value", "step", "text"),
    [
        (0.0, 0.5, "0"),
        (-0.0, 0.5, "0"),
        (3.0, 1.0, "3"),
        (-0.4, 0.2, "−0.4"),
        (1.0, 0.5, "1.0"),
        (0.30000000000000004, 0.1, "0.3"),
        (200.0, 50.0, "200"),
        (2e-7, 1e-7, "2·10⁻⁷"),
        (-3e9, 1e9, "−3·10⁹"),
    ],
)
def test_numbers_have_the_decimals_their_step_needs(value: float, step: float, text: str) -> None:
    assert tick_text(value, step) == text
