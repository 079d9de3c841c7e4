"""Which events lie on which worldlines, and what the clocks carried there read."""

from __future__ import annotations

from collections.abc import Mapping

import msgspec
import numpy as np

from tauline.resolve.context import proper_times_on
from tauline.resolve.results import EventResult, Placement, WorldlineResult


def place_on_worldlines(
    events: Mapping[str, EventResult], worldlines: Mapping[str, WorldlineResult]
) -> dict[str, EventResult]:
    """Give every event its places on all the worldlines it lies on, within rounding."""
    if not events:
        return {}
    points = np.stack([event.point for event in events.values()], axis=1)
    placements: dict[str, list[Placement]] = {name: [] for name in events}
    for line_id, result in worldlines.items():
        tau = proper_times_on(result.line, points)
        for name, own in zip(events, tau, strict=True):
            if not np.isnan(own):
                placements[name].append(Placement(line_id, result.reading(float(own))))
    return {
        name: msgspec.structs.replace(event, on=tuple(placements[name]))
        for name, event in events.items()
    }
