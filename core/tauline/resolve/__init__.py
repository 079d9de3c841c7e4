"""Scenario → Resolved: where everything is, and what is wrong with the rest."""

from tauline.resolve.resolve import resolve
from tauline.resolve.results import (
    BodyResult,
    EventResult,
    FrameResult,
    LightConeResult,
    Placement,
    PulsesResult,
    Resolved,
    SignalResult,
    SimultaneityResult,
    ViewResult,
    WorldlineResult,
)

__all__ = [
    "BodyResult",
    "EventResult",
    "FrameResult",
    "LightConeResult",
    "Placement",
    "PulsesResult",
    "Resolved",
    "SignalResult",
    "SimultaneityResult",
    "ViewResult",
    "WorldlineResult",
    "resolve",
]
