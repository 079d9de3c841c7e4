"""Tick places at 1-2-5 steps, and the numbers written there."""

from __future__ import annotations

import math

import numpy as np
from numpy.typing import NDArray

MAX_TICKS = 200


def step_for(least: float) -> float:
    """Return the smallest of 1, 2, 5 × 10ⁿ that is not below ``least`` (positive)."""
    power = 10.0 ** math.floor(math.log10(least))
    for factor in (1.0, 2.0, 5.0):
        if factor * power >= least * (1.0 - 1e-9):
            return factor * power
    return 10.0 * power


def minor_step(step: float) -> float:
    """Return the step between small ticks: a fifth, or a quarter of a step of 2."""
    leading = step / 10.0 ** math.floor(math.log10(step) + 1e-9)
    return step / 4.0 if round(leading) == 2 else step / 5.0


def ticks_between(low: float, high: float, step: float) -> NDArray[np.float64]:
    """Return the multiples of ``step`` from ``low`` to ``high``, none twice."""
    first, last = math.ceil(low / step - 1e-9), math.floor(high / step + 1e-9)
    if last - first > MAX_TICKS:
        return np.empty(0)
    return np.asarray(np.arange(first, last + 1) * step, dtype=float)


def tick_text(value: float, step: float) -> str:
    """Write a tick's number with just the decimals its step needs.

    >>> tick_text(-0.4, 0.2)
    '−0.4'
    """
    if value == 0.0:
        return "0"
    exponent = math.floor(math.log10(step) + 1e-9)
    if abs(value) >= 1e6 or exponent < -5:
        mantissa, _, power = f"{value:.4g}".partition("e")
        if not power:
            return mantissa.replace("-", "−")
        raised = str(int(power)).translate(str.maketrans("-0123456789", "⁻⁰¹²³⁴⁵⁶⁷⁸⁹"))
        return f"{mantissa}·10{raised}".replace("-", "−")
    return f"{value:.{max(0, -exponent)}f}".replace("-", "−")
